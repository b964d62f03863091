import "server-only";
import { notFound } from "next/navigation";
import { cache } from "react";
import { labelOf } from "@/components/search/brief-words";
import { fmt } from "@/components/ui/format";
import { type CuePage, getCue } from "@/lib/catalogue";
import { NotFound } from "@/lib/kernel/errors";
import { getScreeningOfCue, type ScreeningOfCue } from "@/lib/screening";
import { viewer } from "@/lib/web";
import { detailOf } from "../../find/found";

const NOTHING: ScreeningOfCue = { certificate: null, pieces: {} };

/** The cue of an address with its chart and its screening; a cue that is off sale comes without them. */
export const readCue = cache(async (number: string) => {
  const { actor } = await viewer();
  try {
    const cue = await getCue(actor, { number });
    if (cue.availability.kind !== "on sale") return { cue, detail: null, screening: NOTHING };
    const screening = await getScreeningOfCue(actor, { familyId: cue.familyId });
    return { cue, detail: detailOf(cue, screening), screening };
  } catch (error) {
    if (error instanceof NotFound) notFound();
    throw error;
  }
});

/** The other versions as words, stems as one. */
export function alsoWords(cue: CuePage): string[] {
  const others = cue.versions.slice(1);
  const plain = others.filter((version) => !version.role.startsWith("stem:"));
  return [...plain.map((version) => version.label), ...(plain.length < others.length ? ["stems"] : [])];
}

export function describedAs(cue: CuePage): { name: string; value: string }[] {
  const words = (ids: readonly string[]) => fmt.list(ids.map(labelOf));
  const voice =
    cue.voice === "none"
      ? "no voice"
      : `${labelOf(cue.voice)}${cue.voiceLanguage ? `, ${languageOf(cue.voiceLanguage)}` : ""}`;
  return [
    { name: "Genre", value: words(cue.terms.genre) },
    { name: "Moods", value: words(cue.terms.mood) },
    { name: "Instruments", value: words(cue.terms.instrument) },
    { name: "Voice", value: voice },
    ...(cue.terms.use.length > 0 ? [{ name: "Meant for", value: words(cue.terms.use) }] : []),
    { name: "Shape", value: `${labelOf(cue.shape)}, ${labelOf(cue.density)} in density` },
    ...(cue.explicitContent === "none" ? [] : [{ name: "Explicit content", value: cue.explicitContent }]),
  ];
}

const languages = new Intl.DisplayNames("en-GB", { type: "language" });

function languageOf(code: string): string {
  try {
    return languages.of(code) ?? code;
  } catch {
    return code;
  }
}
