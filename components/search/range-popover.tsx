"use client";

import { Popover } from "@base-ui/react/popover";
import { type ReactNode, useState } from "react";
import { Button } from "@/components/ui/button";
import { cx } from "@/components/ui/cx";
import { choiceLook } from "./choice-menu";

interface RangePopoverProps {
  name: string;
  words: string;
  isOpen: boolean;
  /** Ready answers: "slow, 60 to 80". */
  presets: readonly { words: string; pick: () => void; isCurrent: boolean }[];
  onClear: () => void;
  /** Fields for an answer of one's own. */
  children: ReactNode;
  onSubmit: (form: FormData) => void;
  quiet?: boolean;
}

/** Underlined words that open ready answers and fields for another one. */
export function RangePopover(props: RangePopoverProps) {
  const { name, words, isOpen, presets, onClear, children, onSubmit, quiet } = props;
  const [place, setPlace] = useState<HTMLSpanElement | null>(null);
  const [shown, setShown] = useState(false);
  const close = (run: () => void) => () => {
    run();
    setShown(false);
  };
  return (
    <Popover.Root onOpenChange={setShown} open={shown}>
      <Popover.Trigger
        aria-label={`${name}: ${words}`}
        nativeButton={false}
        render={<span className={choiceLook(isOpen, quiet)}>{words}</span>}
      />
      <span className="contents [&>div]:contents" ref={setPlace} />
      <Popover.Portal container={place}>
        <Popover.Positioner align="start" className="z-50" positionMethod="fixed" sideOffset={6}>
          <Popover.Popup
            aria-label={name}
            className="w-max max-w-[calc(100vw-2rem)] rounded-plain border border-ink bg-page p-3 text-body font-normal tracking-normal text-ink shadow-menu"
          >
            {!isOpen && (
              <Button className="mb-2" kind="quiet" onClick={close(onClear)}>
                Leave it open
              </Button>
            )}
            <ul className="mb-3">
              {presets.map((preset) => (
                <li key={preset.words}>
                  <button
                    aria-pressed={preset.isCurrent}
                    className={cx(
                      "min-h-8 w-full cursor-pointer px-1 text-left hover:bg-shoal-1",
                      preset.isCurrent && "font-strong",
                    )}
                    onClick={close(preset.pick)}
                    type="button"
                  >
                    {preset.words}
                  </button>
                </li>
              ))}
            </ul>
            <form
              className="flex flex-wrap items-end gap-2"
              onSubmit={(event) => {
                event.preventDefault();
                onSubmit(new FormData(event.currentTarget));
                setShown(false);
              }}
            >
              {children}
              <Button size="small" type="submit">
                Use it
              </Button>
            </form>
          </Popover.Popup>
        </Popover.Positioner>
      </Popover.Portal>
    </Popover.Root>
  );
}

interface FigureFieldProps {
  label: string;
  name: string;
  initial: number | null;
  min: number;
  max: number;
}

export function FigureField({ label, name, initial, min, max }: FigureFieldProps) {
  return (
    <label className="text-small">
      <span className="block text-ink-soft">{label}</span>
      <input
        className="w-20 rounded-plain border border-ink-soft bg-page px-2 py-1 text-body"
        defaultValue={initial ?? ""}
        inputMode="numeric"
        max={max}
        min={min}
        name={name}
        type="number"
      />
    </label>
  );
}
