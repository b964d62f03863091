import { COMMON_PASSWORD_WORDS } from "./common-passwords";
import { normalisePassword } from "./password-hash";
import { PASSWORD_LENGTH_ALONE, PASSWORD_LENGTH_MAX, PASSWORD_LENGTH_WITH_SECOND_FACTOR } from "./states";

export interface PasswordContext {
  hasSecondFactor: boolean;
  name: string;
  email: string;
}

const OWN_WORDS = ["sedgewren", "sedge", "wren", "library", "licence", "license"];
const ROWS = [
  "0123456789",
  "abcdefghijklmnopqrstuvwxyz",
  "qwertyuiop",
  "qwertzuiop",
  "azertyuiop",
  "asdfghjkl",
  "yxcvbnm",
  "zxcvbnm",
];
const LOOKS_LIKE: Readonly<Record<string, string>> = {
  "0": "o",
  "1": "i",
  "3": "e",
  "4": "a",
  "5": "s",
  "7": "t",
  "8": "b",
  "@": "a",
  $: "s",
  "!": "i",
  "|": "l",
};
const RUN_MIN = 4;
const DISTINCT_MIN = 5;
/** Fewer characters than these beside common words, names and runs are no password. */
const OWN_CHARACTERS_ALONE = 6;
const OWN_CHARACTERS_WITH_SECOND_FACTOR = 4;

interface Letter {
  raw: string;
  like: string;
}

function lettersOf(password: string): Letter[] {
  return [...password.toLowerCase().normalize("NFKD")]
    .filter((character) => /[\p{L}\p{N}]/u.test(character) || LOOKS_LIKE[character] !== undefined)
    .map((raw) => ({ raw, like: LOOKS_LIKE[raw] ?? raw }));
}

function runLengthAt(letters: readonly Letter[], from: number): number {
  let longest = 0;
  for (const row of ROWS) {
    for (const line of [row, [...row].reverse().join("")]) {
      let length = 0;
      const start = line.indexOf(letters[from]?.raw ?? "?");
      while (
        start >= 0 &&
        start + length < line.length &&
        letters[from + length]?.raw === line[start + length]
      )
        length++;
      longest = Math.max(longest, length);
    }
  }
  let same = 1;
  while (letters[from + same] && letters[from + same]?.raw === letters[from]?.raw) same++;
  longest = Math.max(longest, same);
  return longest >= RUN_MIN ? longest : 0;
}

function wordsOf(context: PasswordContext): string[] {
  const own = `${context.name} ${context.email}`
    .toLowerCase()
    .normalize("NFKD")
    .split(/[^\p{L}\p{N}]+/u);
  return [...COMMON_PASSWORD_WORDS, ...OWN_WORDS, ...own].filter((word) => word.length >= 3);
}

/** The fewest characters that no known word and no run covers, and the words that cover the rest. */
function cover(letters: readonly Letter[], words: readonly string[]): { own: number; found: string[] } {
  const raw = letters.map((letter) => letter.raw).join("");
  const like = letters.map((letter) => letter.like).join("");
  const best: { own: number; found: string[] }[] = [{ own: 0, found: [] }];
  const offer = (at: number, own: number, found: string[]) => {
    const held = best[at];
    if (!held || own < held.own) best[at] = { own, found };
  };
  for (let at = 0; at < letters.length; at++) {
    const here = best[at] ?? { own: at, found: [] };
    offer(at + 1, here.own + 1, here.found);
    for (const word of words) {
      if (raw.startsWith(word, at) || like.startsWith(word, at))
        offer(at + word.length, here.own, [...here.found, word]);
    }
    for (let length = runLengthAt(letters, at); length >= RUN_MIN; length--) {
      offer(at + length, here.own, [...here.found, raw.slice(at, at + length)]);
    }
  }
  return best[letters.length] ?? { own: letters.length, found: [] };
}

/** The part that is written again and again: "marsh1" of "marsh1marsh1marsh1". */
function repeatedPart(text: string): string | null {
  return /^(.+?)\1+$/su.exec(text)?.[1] ?? null;
}

/** Why this password is not taken, as a sentence with the remedy, or null. No rule asks for kinds of characters. */
export function passwordProblem(password: string, context: PasswordContext): string | null {
  const plain = normalisePassword(password);
  const length = [...plain].length;
  const minimum = context.hasSecondFactor ? PASSWORD_LENGTH_WITH_SECOND_FACTOR : PASSWORD_LENGTH_ALONE;
  if (length < minimum) {
    const why = context.hasSecondFactor ? "" : ", because it stands alone until you set up a second factor";
    return `A password has at least ${minimum} characters${why}; this one has ${length}. Four or five words that have nothing to do with each other are easy to keep.`;
  }
  if (length > PASSWORD_LENGTH_MAX)
    return `A password has at most ${PASSWORD_LENGTH_MAX} characters; this one has ${length}.`;
  if (new Set(plain.toLowerCase()).size < DISTINCT_MIN) {
    return "This password is the same few characters over and over. Choose words that only you would put together.";
  }
  const part = repeatedPart(plain.toLowerCase());
  const letters = lettersOf(part ?? plain);
  const { own, found } = cover(letters, wordsOf(context));
  if (part && [...part].length < PASSWORD_LENGTH_WITH_SECOND_FACTOR) {
    return `This password only repeats “${part}”. Choose words that only you would put together.`;
  }
  const ownMinimum = context.hasSecondFactor ? OWN_CHARACTERS_WITH_SECOND_FACTOR : OWN_CHARACTERS_ALONE;
  if (own < ownMinimum && found.length > 0) {
    const named = [...new Set(found)].slice(0, 4).map((word) => `“${word}”`);
    return `This password is made of what is tried first (${named.join(", ")}). Choose words that only you would put together.`;
  }
  return null;
}
