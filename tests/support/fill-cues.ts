import { eq } from "drizzle-orm";
import { db } from "@/db/client";
import { people } from "@/db/schema/accounts";
import {
  families,
  familyTerms,
  holds,
  libraries,
  licensedMasters,
  recordings,
  splitShares,
  splitVersions,
} from "@/db/schema/catalogue";
import {
  type ComposerKey,
  type CueRow,
  keyLabel,
  type LibraryCode,
  versionIsrc,
} from "@/db/seed/data/cue-row";
import { cues } from "@/db/seed/data/cues";
import { listClearRecordings, registerFamily } from "@/lib/catalogue";
import { checkIswc } from "@/lib/kernel/identifiers";
import { makeLibrary, makePerson } from "./make";

export interface FilledCue {
  number: number;
  familyId: string;
  catalogueNumber: string;
  recordingIds: string[];
}

export interface FillOptions {
  /** Measured contours are left out unless somebody draws them. */
  contourOf?: (cue: CueRow, durationS: number, role: string) => Buffer;
  sectionsOf?: (cue: CueRow) => { atS: number; label: string; energy: number }[];
  sectionLoudnessOf?: (cue: CueRow) => number[] | null;
  previewKeyOf?: (cue: CueRow, position: number) => string | null;
}

const LIBRARIES: Record<
  LibraryCode,
  { name: string; place: string; currency: string; publisherIpi: string; countryCode: string }
> = {
  SM: {
    name: "Saltmarrow Music Library",
    place: "Leith, UK",
    currency: "GBP",
    publisherIpi: "99900002152",
    countryCode: "GB",
  },
  BC: {
    name: "Brindlecote Cues",
    place: "Hamilton (Ontario), CA",
    currency: "USD",
    publisherIpi: "99900002250",
    countryCode: "CA",
  },
  OA: {
    name: "Ostravelle Audiothèque",
    place: "Namur, BE",
    currency: "EUR",
    publisherIpi: "99900002348",
    countryCode: "BE",
  },
};
const COMPOSERS: Record<ComposerKey, string> = {
  A: "Ailsa Trevarrick-Moe",
  B: "Bastian Okonjo-Lund",
  C: "Celandine Harrowgill",
  D: "Dov Marchetti-Ruane",
  E: "Eluned Pryce-Santoro",
  F: "Farrukh Tollander",
  G: "Gwenaëlle Dubrossard",
  H: "Hikaru Westenvelt",
};

/** A test process keeps its database from file to file, and these cues are counted: what was listed before is taken away. */
async function emptyCatalogue(): Promise<void> {
  const tables = [
    families,
    familyTerms,
    holds,
    libraries,
    licensedMasters,
    recordings,
    splitShares,
    splitVersions,
  ];
  for (const table of tables) await db().delete(table);
}

/** The forty cues of the demonstration and nothing else, listed, without their sound: for search, pages, shortlists. */
export async function fillCues(options: FillOptions = {}): Promise<Map<number, FilledCue>> {
  await emptyCatalogue();
  const libraryIds = new Map<LibraryCode, string>();
  for (const [code, library] of Object.entries(LIBRARIES) as [LibraryCode, (typeof LIBRARIES)["SM"]][]) {
    const [there] = await db().select({ id: libraries.id }).from(libraries).where(eq(libraries.code, code));
    libraryIds.set(code, there?.id ?? (await makeLibrary({ code, ...library })));
  }
  const personIds = new Map<ComposerKey, string>();
  for (const [key, name] of Object.entries(COMPOSERS) as [ComposerKey, string][]) {
    const [there] = await db().select({ id: people.id }).from(people).where(eq(people.name, name));
    personIds.set(key, there?.id ?? (await makePerson({ name })).id);
  }
  const filled = new Map<number, FilledCue>();
  for (const cue of cues) filled.set(cue.number, await fillOne(cue, libraryIds, personIds, options));
  return filled;
}

async function fillOne(
  cue: CueRow,
  libraryIds: Map<LibraryCode, string>,
  personIds: Map<ComposerKey, string>,
  options: FillOptions,
): Promise<FilledCue> {
  const libraryId = libraryIds.get(cue.library)!;
  const library = LIBRARIES[cue.library];
  const now = new Date(Date.UTC(2026, 0, 2, 9, cue.number));
  const versions = cue.versions.flatMap((version) =>
    version.role === "stems" ? ["stem:one", "stem:two"].map((role) => ({ ...version, role })) : [version],
  );
  const lengthOf = (role: string) =>
    /^\d+$/.test(role)
      ? Number(role)
      : role === "sting"
        ? 6
        : role === "loop"
          ? Math.min(32, cue.durationS)
          : cue.durationS;
  return db().transaction(async (tx) => {
    const { familyId, recordingIds, catalogueNumber } = await registerFamily(tx, {
      libraryId,
      personId: null,
      demo: true,
      now,
      description: {
        title: cue.title,
        otherTitles: cue.otherTitles.map((other) => other.title),
        iswc: (() => {
          const checked = checkIswc(cue.iswc);
          return checked.ok ? checked.normalised : null;
        })(),
        deal: cue.deal,
        bpm: cue.bpm,
        musicalKey: keyLabel(cue),
        genre: cue.genre,
        moreGenres: [],
        moods: [...cue.moods],
        instruments: [...cue.leadInstruments, ...cue.otherInstruments],
        uses: [...cue.uses],
        voice: cue.voice,
        voiceLanguage: cue.language,
        ending: cue.ending,
        shape: cue.shape,
        density: cue.density,
        description: cue.description,
        keywords: [...cue.keywords],
        sections: options.sectionsOf?.(cue) ?? [],
        explicitContent: "none",
        yearRecorded: cue.recorded.year,
        restrictedTerritories: [],
        refusedUses: [],
      },
      shares: [
        ...cue.writers.map((writer) => ({
          side: "writer" as const,
          personId: personIds.get(writer.person)!,
          name: COMPOSERS[writer.person],
          ipi: null,
          role: writer.role,
          shareBps: writer.shareBps,
          acceptedAt: now,
        })),
        {
          side: "publisher" as const,
          personId: null,
          name: library.name,
          ipi: library.publisherIpi,
          role: "E",
          shareBps: 10_000,
          acceptedAt: now,
        },
      ],
      recordings: versions.map((version, index) => ({
        versionRole: version.role,
        isrc: version.role.startsWith("stem:") ? null : versionIsrc(cue, version.position),
        ending: version.role === "loop" ? "loop-safe" : cue.ending,
        fileKey: `file-${cue.number}-${index}`,
        fileName: `${cue.number}-${index}.wav`,
        fileSha256: String(cue.number * 100 + index).padStart(64, "0"),
        sampleRateHz: 48_000,
        bitDepth: 24,
        channels: 2,
        durationS: lengthOf(version.role),
        loudnessLufs: -18,
        truePeakDbtp: -3,
        loudnessRangeLu: 7,
        bpmMeasured: cue.bpm,
        keyMeasured: keyLabel(cue),
        contour: options.contourOf?.(cue, lengthOf(version.role), version.role) ?? null,
        soundFeatures: null,
        sectionLoudness: index === 0 ? (options.sectionLoudnessOf?.(cue) ?? null) : null,
      })),
    });
    await tx.update(recordings).set({ state: "clear" }).where(eq(recordings.familyId, familyId));
    for (const [index, id] of recordingIds.entries()) {
      const previewKey = options.previewKeyOf
        ? options.previewKeyOf(cue, index)
        : `preview-${cue.number}-${index}`;
      await tx.update(recordings).set({ previewKey }).where(eq(recordings.id, id));
    }
    await listClearRecordings(tx, familyId, { words: "Listed.", now });
    return { number: cue.number, familyId, catalogueNumber, recordingIds };
  });
}
