"use client";

import { Menu } from "@base-ui/react/menu";
import { type ReactNode, useState } from "react";
import { cx } from "@/components/ui/cx";
import { Mark } from "@/components/ui/mark";

export interface ChoiceOption {
  id: string;
  words: string;
}

export interface ChoiceGroup {
  head?: string;
  options: readonly ChoiceOption[];
}

interface ChoiceMenuProps {
  /** What the words answer: "Mood". Heard before them. */
  name: string;
  /** The underlined words of the sentence. */
  words: string;
  /** True while nothing is chosen: the words are set plainly. */
  isOpen: boolean;
  groups: readonly ChoiceGroup[];
  chosen: readonly string[];
  /** "any of these may do", or one at a time. */
  several?: boolean;
  hint?: string;
  onChange: (ids: string[]) => void;
  quiet?: boolean;
  /** One of them always stands: it cannot be left open. */
  required?: boolean;
}

const ITEM =
  "grid min-h-9 w-full cursor-pointer grid-cols-[1.5rem_minmax(0,1fr)] items-center break-inside-avoid px-3 text-left outline-none data-highlighted:bg-shoal-1";

/** Underlined words that open the list of what may stand in their place. No button element: that would not wrap as words do. */
export function ChoiceMenu(props: ChoiceMenuProps) {
  const { name, words, isOpen, groups, chosen, several, hint, onChange, quiet, required } = props;
  const [place, setPlace] = useState<HTMLSpanElement | null>(null);
  const count = groups.reduce((sum, group) => sum + group.options.length, 0);
  return (
    <Menu.Root modal={false}>
      <Menu.Trigger
        aria-label={`${name}: ${words}`}
        nativeButton={false}
        render={<span className={choiceLook(isOpen, quiet)}>{words}</span>}
      />
      <span className="contents [&>div]:contents" ref={setPlace} />
      <Menu.Portal container={place}>
        <Menu.Positioner align="start" className="z-50" positionMethod="fixed" sideOffset={6}>
          <Menu.Popup
            className={cx(
              "max-h-[min(32rem,calc(100dvh-8rem))] overflow-y-auto rounded-plain border border-ink bg-page py-1.5 text-body font-normal tracking-normal text-ink shadow-menu outline-none",
              count > 12 ? "w-[min(30rem,calc(100vw-2rem))]" : "w-max max-w-[calc(100vw-2rem)] min-w-48",
            )}
          >
            {hint && <p className="px-3 pt-1 pb-1.5 text-small text-ink-soft">{hint}</p>}
            {chosen.length > 0 && !required && (
              <Menu.Item className={ITEM} onClick={() => onChange([])}>
                <span />
                <span className="link">Leave it open</span>
              </Menu.Item>
            )}
            {several ? (
              groups.map((group) => (
                <Group count={count} group={group} key={group.head ?? "all"}>
                  {group.options.map((option) => (
                    <Menu.CheckboxItem
                      checked={chosen.includes(option.id)}
                      className={ITEM}
                      closeOnClick={false}
                      key={option.id}
                      onCheckedChange={(checked) =>
                        onChange(
                          checked ? [...chosen, option.id] : chosen.filter((entry) => entry !== option.id),
                        )
                      }
                    >
                      <Ticked isChosen={chosen.includes(option.id)}>{option.words}</Ticked>
                    </Menu.CheckboxItem>
                  ))}
                </Group>
              ))
            ) : (
              <Menu.RadioGroup onValueChange={(value: string) => onChange([value])} value={chosen[0] ?? ""}>
                {groups.map((group) => (
                  <Group count={count} group={group} key={group.head ?? "all"}>
                    {group.options.map((option) => (
                      <Menu.RadioItem className={ITEM} closeOnClick key={option.id} value={option.id}>
                        <Ticked isChosen={chosen.includes(option.id)}>{option.words}</Ticked>
                      </Menu.RadioItem>
                    ))}
                  </Group>
                ))}
              </Menu.RadioGroup>
            )}
          </Menu.Popup>
        </Menu.Positioner>
      </Menu.Portal>
    </Menu.Root>
  );
}

/** Words that are chosen stand out; words left open are underlined only. */
export function choiceLook(isOpen: boolean, quiet: boolean | undefined): string {
  if (quiet) return "link target";
  return isOpen ? "link decoration-ink-soft" : "choice";
}

function Group({ group, count, children }: { group: ChoiceGroup; count: number; children: ReactNode }) {
  return (
    <Menu.Group>
      {group.head && (
        <Menu.GroupLabel className="px-3 pt-2 pb-0.5 text-small text-ink-soft">{group.head}</Menu.GroupLabel>
      )}
      <div className={cx(count > 12 && "sm:columns-2 sm:gap-0")}>{children}</div>
    </Menu.Group>
  );
}

function Ticked({ isChosen, children }: { isChosen: boolean; children: ReactNode }) {
  return (
    <>
      <span>{isChosen && <Mark kind="done" sizePx={9} />}</span>
      <span className={cx(isChosen && "font-strong")}>{children}</span>
    </>
  );
}
