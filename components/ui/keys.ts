"use client";

import { useEffect, useRef, useSyncExternalStore } from "react";

export interface KeyBinding {
  /** `KeyboardEvent.key`: "1", "u", " ", "ArrowLeft". */
  key: string;
  /** What it does on this screen, for the list behind `?`. */
  does: string;
  run: (event: KeyboardEvent) => void;
}

interface KeyGroup {
  id: symbol;
  screen: string;
  current: { readonly bindings: readonly KeyBinding[] };
}

let groups: readonly KeyGroup[] = [];
const listeners = new Set<() => void>();
const OFF_KEY = "sedgewren.keys-off";

const TYPING =
  "input:not([type=checkbox],[type=radio],[type=button],[type=submit],[type=range]),textarea,select,[contenteditable]";
const OWN_KEYS =
  "a,button,summary,input,[role=button],[role=slider],[role=menuitem],[role=option],[role=tab],[role=radio]";

/** True where the focused element uses the key itself, so that a screen key must stand back. */
export function keyBelongsToTarget(key: string, target: EventTarget | null): boolean {
  if (!(target instanceof Element)) return false;
  if (target.closest(TYPING)) return true;
  const isMoving = key === " " || key === "Enter" || key.startsWith("Arrow");
  return isMoving && target.closest(OWN_KEYS) !== null;
}

export function keysAreOff(): boolean {
  try {
    return window.localStorage.getItem(OFF_KEY) === "1";
  } catch {
    return false;
  }
}

export function setKeysOff(off: boolean): void {
  try {
    if (off) window.localStorage.setItem(OFF_KEY, "1");
    else window.localStorage.removeItem(OFF_KEY);
  } finally {
    for (const listener of listeners) listener();
  }
}

function onKeyDown(event: KeyboardEvent): void {
  if (event.defaultPrevented || event.ctrlKey || event.metaKey || event.altKey || keysAreOff()) return;
  if (keyBelongsToTarget(event.key, event.target)) return;
  if (event.target instanceof Element && event.target.closest("[role=dialog],[role=menu]")) return;
  for (const group of [...groups].reverse()) {
    const binding = group.current.bindings.find((candidate) => candidate.key === event.key);
    if (binding) {
      event.preventDefault();
      binding.run(event);
      return;
    }
  }
}

function setGroups(next: readonly KeyGroup[]): void {
  if (groups.length === 0 && next.length > 0) window.addEventListener("keydown", onKeyDown);
  if (groups.length > 0 && next.length === 0) window.removeEventListener("keydown", onKeyDown);
  groups = next;
  for (const listener of listeners) listener();
}

/** Keys of the present screen. The latest mounted wins where two screens' parts claim the same key. */
export function useKeys(screen: string, bindings: readonly KeyBinding[], enabled = true): void {
  const current = useRef({ bindings });
  useEffect(() => {
    current.current = { bindings };
  });
  useEffect(() => {
    if (!enabled) return;
    const id = Symbol(screen);
    setGroups([
      ...groups,
      {
        id,
        screen,
        get current() {
          return current.current;
        },
      },
    ]);
    return () => setGroups(groups.filter((group) => group.id !== id));
  }, [screen, enabled]);
}

function subscribe(listener: () => void): () => void {
  listeners.add(listener);
  return () => listeners.delete(listener);
}

const NONE: readonly KeyGroup[] = [];

export function useKeyGroups(): readonly KeyGroup[] {
  return useSyncExternalStore(
    subscribe,
    () => groups,
    () => NONE,
  );
}

export function useKeysOff(): boolean {
  return useSyncExternalStore(subscribe, keysAreOff, () => false);
}
