"use client";

import { Menu as Base } from "@base-ui/react/menu";
import Link from "next/link";
import { type ReactElement, type ReactNode, useState } from "react";
import { Mark } from "./mark";

export interface MenuEntry {
  key: string;
  words: ReactNode;
  /** A soft line beneath. */
  below?: ReactNode;
  href?: string;
  onPick?: () => void;
  /** The one in use: marked, and not pressed again. */
  isCurrent?: boolean;
}

export interface MenuGroup {
  key: string;
  head?: string;
  entries: readonly MenuEntry[];
}

interface MenuProps {
  trigger: ReactElement;
  groups: readonly MenuGroup[];
  align?: "start" | "end";
}

const ENTRY =
  "grid min-h-9 w-full cursor-pointer grid-cols-[1.25rem_minmax(0,1fr)] items-baseline px-3 py-1.5 text-left outline-none data-highlighted:bg-shoal-1";

function EntryWords({ entry }: { entry: MenuEntry }) {
  return (
    <>
      <span>{entry.isCurrent && <Mark kind="done" sizePx={9} />}</span>
      <span className={entry.isCurrent ? "font-strong" : undefined}>
        {entry.words}
        {entry.below && <span className="block text-small font-normal text-ink-soft">{entry.below}</span>}
      </span>
    </>
  );
}

export function Menu({ trigger, groups, align = "end" }: MenuProps) {
  // The list opens beside its button, inside the same landmark, not at the end of the page.
  const [place, setPlace] = useState<HTMLSpanElement | null>(null);
  return (
    <Base.Root modal={false}>
      <Base.Trigger render={trigger} />
      <span className="contents" ref={setPlace} />
      <Base.Portal container={place}>
        <Base.Positioner align={align} className="z-50" positionMethod="fixed" sideOffset={6}>
          <Base.Popup className="max-h-[calc(100dvh-5rem)] w-max max-w-[min(22rem,calc(100vw-2rem))] min-w-48 overflow-y-auto rounded-plain border border-ink bg-page py-1.5 text-ink shadow-menu outline-none">
            {groups.map((group, index) => (
              <Base.Group key={group.key}>
                {index > 0 && <Base.Separator className="my-1.5 border-t border-line" />}
                {group.head && (
                  <Base.GroupLabel className="px-3 pt-1 pb-0.5 pl-8 text-small text-ink-soft">
                    {group.head}
                  </Base.GroupLabel>
                )}
                {group.entries.map((entry) =>
                  entry.href ? (
                    <Base.LinkItem
                      aria-current={entry.isCurrent ? "page" : undefined}
                      className={ENTRY}
                      closeOnClick
                      key={entry.key}
                      render={<Link href={entry.href} />}
                    >
                      <EntryWords entry={entry} />
                    </Base.LinkItem>
                  ) : (
                    <Base.Item className={ENTRY} key={entry.key} onClick={() => entry.onPick?.()}>
                      <EntryWords entry={entry} />
                    </Base.Item>
                  ),
                )}
              </Base.Group>
            ))}
          </Base.Popup>
        </Base.Positioner>
      </Base.Portal>
    </Base.Root>
  );
}
