import { endings, genres, instruments, moods, shapes, uses, voiceKinds } from "../vocabularies";

const labels = new Map<string, string>(
  [...genres, ...moods, ...instruments, ...uses, ...voiceKinds, ...shapes, ...endings].map((term) => [
    term.id,
    term.label,
  ]),
);

export const labelOf = (id: string): string => labels.get(id) ?? id;

export function list(items: readonly string[], last = "and"): string {
  return items.length < 2
    ? (items[0] ?? "")
    : `${items.slice(0, -1).join(", ")} ${last} ${items[items.length - 1]}`;
}

export const capitalise = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1);

/** Instruments that are spoken of in the plural or without an article. */
const BARE = new Set([
  "strings",
  "mallets",
  "found sound",
  "hand percussion",
  "plucked small strings",
  "whistling and claps",
]);

/** "a piano", "an accordion", "strings". */
export function articled(noun: string): string {
  if (BARE.has(noun)) return noun;
  return `${/^[aeiou]/.test(noun) ? "an" : "a"} ${noun}`;
}

export function time(seconds: number): string {
  const whole = Math.round(seconds);
  return `${Math.floor(whole / 60)}:${String(whole % 60).padStart(2, "0")}`;
}

const SMALL = ["no", "one", "two", "three", "four", "five", "six", "seven", "eight", "nine", "ten"];
export const countWord = (count: number): string => SMALL[count] ?? String(count);
