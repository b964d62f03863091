import "server-only";
import type {
  FoundCue,
  FoundDetail,
  FoundPage,
  FoundPrice,
  FoundVersion,
} from "@/components/search/find-types";
import { type Ending, fmt } from "@/components/ui/format";
import {
  type CuePage,
  type CueVersion,
  getCue,
  opensAt,
  type SearchResult,
  searchCues,
} from "@/lib/catalogue";
import type { Brief } from "@/lib/catalogue/schemas";
import type { Actor } from "@/lib/kernel/actor";
import { listFromPrices, priceUse } from "@/lib/licensing";
import { Use } from "@/lib/licensing/rate-card";
import { getProduction } from "@/lib/productions";
import { getScreeningOfCue, type ScreeningOfCue } from "@/lib/screening";

const PAGE_SIZE = 12;
const ENDINGS: Record<string, Ending | null> = {
  button: "button",
  "ring-out": "ring-out",
  fade: "fade",
  "loop-safe": "loop",
};
export const endingOf = (ending: string): Ending | null => ENDINGS[ending] ?? null;

/** One page of results with their prices: the same for the page's first data and for the list's later ones. */
export async function foundPage(
  actor: Actor,
  brief: Brief,
  options: { page: number; productionId: string | null },
): Promise<FoundPage> {
  const answer = await searchCues(actor, { ...brief, page: options.page, pageSize: PAGE_SIZE });
  const priceOf = await prices(actor, answer.results, options.productionId);
  const { total, fitting, onSale, asked, page, pageSize } = answer;
  const cues = answer.results.map((result) => foundCue(result, priceOf(result)));
  return { total, fitting, onSale, asked, page, pageSize, cues };
}

function foundCue({ cue, contour, missed, verdict, why }: SearchResult, price: FoundPrice): FoundCue {
  return {
    familyId: cue.familyId,
    number: cue.number,
    title: cue.title,
    libraryName: cue.library.name,
    libraryCode: cue.library.code,
    writers: cue.writers,
    durationS: cue.durationS,
    bpm: cue.bpm,
    musicalKey: cue.musicalKey,
    versions: cue.versions.map(foundVersion),
    contour,
    opensS: opensAt(cue),
    price,
    missed,
    verdict,
    why,
  };
}

export function foundVersion(version: CueVersion): FoundVersion {
  return { ...version, ending: endingOf(version.ending) };
}

/** Exact prices inside a production that has a use; else what each library's card begins at. */
async function prices(
  actor: Actor,
  results: readonly SearchResult[],
  productionId: string | null,
): Promise<(result: SearchResult) => FoundPrice> {
  const use = productionId && actor.kind === "buyer" ? await productionUse(actor, productionId) : null;
  if (!use) {
    const from = await listFromPrices(actor, {});
    return ({ cue }) => {
      const text = from[cue.library.id] ?? null;
      return text === null
        ? { kind: "none", text, sentence: null }
        : { kind: "from", text, sentence: `From\u00a0${text}` };
    };
  }
  const exact = new Map<string, FoundPrice>();
  for (const { cue } of results) {
    const answer = await priceUse(actor, { familyId: cue.familyId, use });
    exact.set(cue.familyId, {
      kind: answer.ok ? "exact" : "none",
      text: answer.text,
      sentence: answer.sentence,
    });
  }
  return ({ cue }) => exact.get(cue.familyId) ?? { kind: "none", text: null, sentence: null };
}

async function productionUse(actor: Actor, productionId: string): Promise<Use | null> {
  const production = await getProduction(actor, { productionId });
  const use = Use.safeParse(production.use);
  return use.success ? use.data : null;
}

export const letterOf = (index: number) => String.fromCharCode(65 + (index % 26));

/** What the open strip shows: sections with their soundings, versions in full, cutdowns where their pieces come from. */
export async function foundDetail(actor: Actor, number: string): Promise<FoundDetail> {
  const cue = await getCue(actor, { number });
  return detailOf(cue, await getScreeningOfCue(actor, { familyId: cue.familyId }));
}

export function detailOf(cue: CuePage, { pieces }: ScreeningOfCue): FoundDetail {
  const sections = cue.sections.map((section, index) => ({
    letter: letterOf(index),
    fromS: section.atS,
    toS: cue.sections[index + 1]?.atS ?? cue.durationS,
    // A form's own letters would stand beside the chart's and contradict them.
    words: section.label.length > 1 ? section.label : "",
    lufs: cue.sectionLoudness?.[index] ?? null,
  }));
  return {
    number: cue.number,
    writers: cue.writers,
    sections,
    versions: cue.versions.map((version) => {
      const own = pieces[version.recordingId] ?? null;
      return {
        ...foundVersion(version),
        contour: cue.contours[version.recordingId] ?? null,
        pieces: own,
        cutFrom: own && sections.length > 0 ? cutFromWords(own, sections) : null,
      };
    }),
  };
}

/** "cut from A, D to E, G": the sections that the pieces of a cutdown lie in. */
function cutFromWords(
  pieces: readonly { fromS: number; toS: number; atS: number }[],
  sections: FoundDetail["sections"],
): string {
  const spans = pieces.map((piece) => {
    const endS = piece.atS + piece.toS - piece.fromS;
    const inside = sections.filter(
      (section) => Math.min(endS, section.toS) - Math.max(piece.atS, section.fromS) > 0.5,
    );
    const [first, last] = [inside[0]?.letter, inside.at(-1)?.letter];
    return first === last ? (first ?? "") : `${first} to ${last}`;
  });
  const named = [...new Set(spans.filter(Boolean))];
  return named.length > 0
    ? `cut from ${named.join(", ")}`
    : `cut from ${fmt.countWord(pieces.length, "place")}`;
}
