import "server-only";
import { z } from "zod";
import type { ShortlistLine } from "@/components/productions/shortlist-line";
import { briefQuery } from "@/components/search/brief-query";
import { fmt } from "@/components/ui/format";
import type { Availability } from "@/lib/catalogue";
import { Brief } from "@/lib/catalogue/schemas";
import type { ProductionPage, ShortlistCue } from "@/lib/productions";

const Snapshot = z.looseObject({
  text: z.string().nullable(),
  totalMinor: z.string().nullable(),
  sentence: z.string(),
  pricedAt: z.string().nullish(),
  until: z.string().nullish(),
});

export function unavailableWords(availability: Availability): string | null {
  if (availability.kind === "on sale") return null;
  const since = availability.since ? ` since ${fmt.dayMonth(availability.since)}` : "";
  switch (availability.kind) {
    case "rights question":
      return `Held: a rights question has been open${since}. It cannot be licensed until that is answered.`;
    case "exclusive":
      return `Licensed to somebody exclusively${since}; it cannot be licensed again for now.`;
    case "off sale":
      return `Its library has taken it off sale${since}.`;
  }
}

export function shortlistLines(production: ProductionPage): ShortlistLine[] {
  return production.shortlist.map((item) => shortlistLine(production.id, item));
}

const NEAR_BPM = 15;

/** A brief that the cue itself would fit: for a replacement. */
function nearQuery({ terms, bpm }: ShortlistCue["cue"]): string {
  return briefQuery(
    Brief.parse({
      moods: terms.mood,
      lead: terms.instrument.slice(0, 2),
      bpmFrom: bpm === null ? null : Math.max(20, Math.round(bpm) - NEAR_BPM),
      bpmTo: bpm === null ? null : Math.min(400, Math.round(bpm) + NEAR_BPM),
    }),
  );
}

function shortlistLine(productionId: string, { cue, version, ...item }: ShortlistCue): ShortlistLine {
  const price = Snapshot.safeParse(item.priceSnapshot);
  const plain = ({ recordingId, label, durationS }: ShortlistCue["cue"]["versions"][number]) => ({
    recordingId,
    label,
    durationS,
  });
  return {
    itemId: item.itemId,
    familyId: cue.familyId,
    number: cue.number,
    title: cue.title,
    libraryName: cue.library.name,
    libraryCode: cue.library.code,
    currency: cue.library.currency,
    nearHref: `/find?${nearQuery(cue)}&production=${productionId}`,
    state: item.state,
    note: item.note,
    addedBy: item.addedBy,
    unavailable: unavailableWords(cue.availability),
    version: version && plain(version),
    versions: cue.versions.map(plain),
    contour: item.contour,
    price: price.success
      ? {
          text: price.data.text,
          minor: price.data.totalMinor,
          sentence: price.data.sentence,
          pricedAt: price.data.pricedAt ?? null,
          until: price.data.until ?? null,
        }
      : null,
  };
}

/** "Tide Tables, episode 4" */
export const productionWords = (production: { title: string; episode: string | null }): string =>
  production.episode ? `${production.title}, ${production.episode}` : production.title;

/** "For this, three cues can be ordered; one cannot, for now." */
export function standingWords(lines: readonly ShortlistLine[]): string {
  const available = lines.filter((line) => !line.unavailable && line.state !== "out").length;
  const held = lines.filter((line) => line.unavailable).length;
  if (lines.length === 0) return "Nothing is on its shortlist yet.";
  const first = `${capital(fmt.countWord(available, "cue"))} can be ordered`;
  return held === 0 ? `${first}.` : `${first}; ${fmt.countWord(held, "cannot", "cannot")}, for now.`;
}

const capital = (text: string) => text.charAt(0).toUpperCase() + text.slice(1);
