import { fmt } from "@/components/ui/format";
import type { Brief } from "@/lib/catalogue/schemas";
import { WANTED_VERSIONS } from "@/lib/catalogue/states";
import {
  endings,
  genres,
  instruments,
  moods,
  shapes,
  tempoBands,
  uses,
  voiceKinds,
} from "@/lib/catalogue/vocabularies";

const labels = new Map<string, string>(
  [...genres, ...moods, ...instruments, ...uses, ...voiceKinds, ...shapes, ...endings].map((term) => [
    term.id,
    term.label,
  ]),
);
export const labelOf = (id: string): string => labels.get(id) ?? id;

const anyOf = (ids: readonly string[]) => fmt.list(ids.map(labelOf), "or");

const PLURAL = /^(strings|mallets|whistling and claps|plucked small strings)$/;
const articled = (noun: string): string =>
  PLURAL.test(noun) || noun === "news and current affairs"
    ? noun
    : `${/^[aeiou]/.test(noun) ? "an" : "a"} ${noun}`;

/** Uses are spoken of as things; some names take no article. */
const BARE_USES = new Set([
  "cookery",
  "credits",
  "crime-and-investigation",
  "history",
  "home-and-garden",
  "news-and-current-affairs",
  "competition-and-reality",
  "science-and-technology",
  "sport",
  "travel",
  "waiting-and-hold",
]);

export const moodWords = (brief: Brief) => (brief.moods.length ? anyOf(brief.moods) : "of any mood");
export const purposeWords = (brief: Brief) =>
  brief.uses.length
    ? fmt.list(
        brief.uses.map((id) => (BARE_USES.has(id) ? labelOf(id) : articled(labelOf(id)))),
        "or",
      )
    : "any use";
export const leadWords = (brief: Brief) => (brief.lead.length ? anyOf(brief.lead) : "any instrument");

const VOICES: Record<string, string> = {
  none: "no voice",
  some: "a voice",
  wordless: "a voice without words",
  lyric: "a sung lyric",
  spoken: "a spoken voice",
  chant: "chant",
  whistle: "whistling",
};
export const voiceWords = (brief: Brief) =>
  brief.voice === null ? "with or without voice" : (VOICES[brief.voice] ?? brief.voice);
export const voiceOptions = Object.entries(VOICES).map(([id, words]) => ({ id, words }));

export function tempoWords(brief: Brief): string {
  const { bpmFrom, bpmTo } = brief;
  if (bpmFrom === null && bpmTo === null) return "at any tempo";
  if (bpmFrom === null) return `up to ${fmt.bpm(bpmTo ?? 0)}`;
  if (bpmTo === null) return `${fmt.bpm(bpmFrom)} or more`;
  return `${bpmFrom} to ${fmt.bpm(bpmTo)}`;
}
export const tempoPresets = tempoBands
  .filter((band) => band.id !== "free")
  .map((band) => ({
    words:
      band.belowBpm === null
        ? `${band.label}, ${band.fromBpm} bpm or more`
        : `${band.label}, ${band.fromBpm ? `${band.fromBpm} to` : "under"} ${band.belowBpm} bpm`,
    from: band.fromBpm || null,
    to: band.belowBpm,
  }));

const SHAPES: Record<string, string> = {
  steady: "stays steady",
  builds: "builds",
  "falls-away": "falls away",
  "builds-then-drops": "builds, then drops",
  "two-halves": "comes in two halves",
  "stop-start": "stops and starts",
};
export const shapeWords = (brief: Brief) =>
  brief.shape === null ? "takes any shape" : (SHAPES[brief.shape] ?? brief.shape);
export const shapeOptions = Object.entries(SHAPES).map(([id, words]) => ({ id, words }));

export const versionWords = (brief: Brief) =>
  brief.versions.length
    ? fmt.list(
        brief.versions.map((wanted) => WANTED_VERSIONS[wanted]),
        "or",
      )
    : "any versions";
export const versionOptions = Object.entries(WANTED_VERSIONS).map(([id, words]) => ({ id, words }));

export const excludedWords = (brief: Brief) =>
  brief.not.length
    ? fmt.list(
        brief.not.map((entry) => {
          const term = entry.slice(entry.indexOf(":") + 1);
          return entry.startsWith("word:") ? `“${term}”` : (EXCLUDED_VOICES[entry] ?? labelOf(term));
        }),
        "or",
      )
    : "ruled out";
const EXCLUDED_VOICES: Record<string, string> = {
  "voice:lyric": "sung",
  "voice:wordless": "with a voice",
  "voice:spoken": "spoken",
};

const ENDINGS: Record<string, string> = {
  button: "a button",
  "ring-out": "a ring-out",
  fade: "a fade",
  "loop-safe": "a loop point",
  cut: "a cut",
};
export const endingWords = (brief: Brief) =>
  brief.ending === null ? "ending" : (ENDINGS[brief.ending] ?? brief.ending);
export const endingOptions = Object.entries(ENDINGS).map(([id, words]) => ({ id, words }));

export const lengthWords = (brief: Brief) => (brief.lengthS === null ? "length" : fmt.time(brief.lengthS));
export const genreWords = (brief: Brief) => (brief.genres.length ? anyOf(brief.genres) : "genre");

export const TERRITORIES = [
  { id: "GB", words: "the UK" },
  { id: "GB,IE", words: "the UK and Ireland" },
  { id: "US,CA", words: "the United States and Canada" },
  { id: "*", words: "the World" },
] as const;
export const oneStopWords = (brief: Brief) => {
  if (brief.oneStop.length === 0) return "one-stop rights";
  const key = brief.oneStop.join(",");
  const named = TERRITORIES.find((territory) => territory.id === key);
  return `one-stop for ${named?.words ?? fmt.list(brief.oneStop)}`;
};

export { genres, instruments, moods, uses };
