import type { Reader } from "@/db/client";
import { EVERYONE } from "@/lib/kernel/actor";
import { open, query } from "@/lib/kernel/verb";
import { contoursOf } from "../contours";
import { type CueCard, cueCards } from "../cue-card";
import { type Brief, SearchCues } from "../schemas";
import { type Candidate, candidates, countOnSale } from "./candidates";
import { type Part, weigh } from "./weigh";
import { capitalise, countWord, labelOf } from "./words";

export interface SearchResult {
  cue: CueCard;
  /** The head's contour, thinned for a list. */
  contour: string | null;
  /** Words of the brief that it misses. */
  missed: number;
  /** "Fits every word." or "Misses one word."; empty where nothing was asked. */
  verdict: string;
  /** Why it is here and where it misses, in sentences. */
  why: string;
}

export interface SearchAnswer {
  /** Results in all, of which `fitting` miss nothing. */
  total: number;
  fitting: number;
  onSale: number;
  /** How many words the brief has. */
  asked: number;
  page: number;
  pageSize: number;
  results: SearchResult[];
}

/** CATALOGUE-5: found is what is on sale and shares words with the brief; the order is the formula's, and nothing is bought. */
export const searchCues = query({
  name: "catalogue.searchCues",
  who: EVERYONE,
  input: SearchCues,
  authorise: open("what is on sale is public"),
  run: async ({ reader, input }): Promise<SearchAnswer> => {
    const { page, pageSize, ...brief } = input;
    const [ranked, onSale] = await Promise.all([rank(reader, brief), countOnSale(reader)]);
    const shown = ranked.slice(page * pageSize, (page + 1) * pageSize);
    const heads = shown.flatMap(({ cue }) => cue.versions[0]?.recordingId ?? []);
    const contours = await contoursOf(reader, heads);
    return {
      total: ranked.length,
      fitting: ranked.filter(({ missed }) => missed === 0).length,
      onSale,
      asked: ranked[0]?.parts.length ?? 0,
      page,
      pageSize,
      results: shown.map(({ cue, missed, parts }) => ({
        cue,
        contour: contours.get(cue.versions[0]?.recordingId ?? "") ?? null,
        missed,
        verdict: verdictOf(parts, missed),
        why: whyOf(brief, cue, parts),
      })),
    };
  },
});

interface Weighed {
  cue: CueCard;
  parts: Part[];
  missed: number;
  score: number;
}

/** Nearer than half-way to the brief, or it is not shown. */
const SCORE_LEAST = 0.5;

async function rank(reader: Reader, brief: Brief): Promise<Weighed[]> {
  const found = await candidates(reader, brief);
  const cards = await cueCards(
    reader,
    found.map(({ familyId }) => familyId),
  );
  const bestRelevance = Math.max(0, ...found.map(({ relevance }) => relevance));
  const weighed = found.flatMap((candidate): Weighed[] => {
    const cue = cards.get(candidate.familyId);
    return cue && cue.versions.length > 0 ? [weighOne(brief, cue, candidate, bestRelevance)] : [];
  });
  return weighed
    .filter(({ score }) => score >= SCORE_LEAST)
    .sort((a, b) => a.missed - b.missed || b.score - a.score);
}

function weighOne(brief: Brief, cue: CueCard, candidate: Candidate, bestRelevance: number): Weighed {
  const parts = weigh(brief, cue, candidate, bestRelevance);
  const sum = parts.reduce((total, part) => total + part.weight, 0);
  const score = sum === 0 ? 1 : parts.reduce((total, part) => total + part.weight * part.value, 0) / sum;
  return { cue, parts, score, missed: parts.filter((part) => part.missed).length };
}

function verdictOf(parts: readonly Part[], missed: number): string {
  if (parts.length === 0) return "";
  if (missed === 0) return "Fits every word.";
  return `Misses ${countWord(missed)} ${missed === 1 ? "word" : "words"}.`;
}

const CLAUSES_MAX = 3;

/** Where it misses first, then what speaks for it; what the brief left open is said of a cue that fits. */
function whyOf(brief: Brief, cue: CueCard, parts: readonly Part[]): string {
  if (parts.length === 0) return cue.description;
  const said = (missed: boolean) =>
    parts.flatMap((part) => (part.missed === missed && part.says ? [part.says] : []));
  const misses = said(true);
  const fits = said(false).slice(0, Math.max(0, CLAUSES_MAX - misses.length));
  const sentences = [...joined(misses), ...joined(fits)].map((clause) => `${capitalise(clause)}.`);
  const isOpen = misses.length === 0 && fits.length < CLAUSES_MAX && brief.genres.length === 0;
  if (isOpen) sentences.push(`It is filed under ${labelOf(cue.genre)}, which you left open.`);
  return sentences.join(" ");
}

/** Two clauses make one sentence: "a piano leads, and it opens at 1:28". */
function joined(clauses: readonly string[]): string[] {
  const [first, second, ...others] = clauses;
  if (first === undefined) return [];
  if (second === undefined) return [first];
  const isSplit = first.includes(";") || second.includes(";") || first.length + second.length > 110;
  return isSplit ? [first, second, ...others] : [`${first}, and ${second}`, ...others];
}
