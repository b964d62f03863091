"use client";

import { useState } from "react";
import { Button } from "./button";
import { Dialog } from "./dialog";
import { CheckField } from "./field";
import { setKeysOff, useKeyGroups, useKeys, useKeysOff } from "./keys";

const NAMES: Record<string, string> = {
  " ": "space",
  ArrowLeft: "left arrow",
  ArrowRight: "right arrow",
  ArrowUp: "up arrow",
  ArrowDown: "down arrow",
};

export function KeyCap({ children }: { children: string }) {
  return (
    <kbd className="inline-block min-w-5 rounded-plain border border-ink-soft bg-page px-1.5 text-center font-sans text-small font-normal leading-[1.5] text-ink">
      {NAMES[children] ?? children}
    </kbd>
  );
}

/** `?` lists the keys of the present screen. The same list opens from a quiet link at the foot. */
export function KeysHelp({ words = "Keys of this screen" }: { words?: string }) {
  const [isOpen, setOpen] = useState(false);
  const groups = useKeyGroups();
  const areOff = useKeysOff();
  useKeys("Everywhere", [{ key: "?", does: "lists the keys of this screen", run: () => setOpen(true) }]);
  return (
    <>
      <Button kind="quiet" onClick={() => setOpen(true)}>
        {words}
      </Button>
      <Dialog onOpenChange={setOpen} open={isOpen} title="Keys of this screen">
        {groups.map((group) => (
          <section className="mb-4" key={group.id.description}>
            <h3 className="mb-1 font-strong">{group.screen}</h3>
            <ul>
              {group.current.bindings.map((binding) => (
                <li className="grid grid-cols-[6.5rem_minmax(0,1fr)] py-0.5" key={binding.key}>
                  <span>
                    <KeyCap>{binding.key}</KeyCap>
                  </span>
                  <span>{binding.does}</span>
                </li>
              ))}
            </ul>
          </section>
        ))}
        <CheckField checked={!areOff} onChange={(event) => setKeysOff(!event.target.checked)}>
          Single keys work on this device.
        </CheckField>
      </Dialog>
    </>
  );
}
