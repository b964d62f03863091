import type { MasterKey } from "@/fixtures/audio";
import { env } from "@/lib/kernel/env";
import { type CaseRow, plantedCases } from "./data/cases";
import { type CueRow, keyLabel } from "./data/cue-row";
import { cueTimings, versionsOf } from "./data/cue-timings";
import { cues } from "./data/cues";
import { libraries } from "./data/libraries";
import { sharedMaterial } from "./data/registers";
import type { DemoWorld } from "./world";
import { personOf } from "./world";

/** One delivery of the demonstration, as its deliverer would make it. */
export interface Handover {
  deliverer: string;
  library: string;
  /** Business time of the delivery. */
  at: Date;
  draft: Record<string, unknown>;
  files: { name: string; role: string; isrc: string | null; key: MasterKey }[];
  samples: Record<string, unknown>[];
  /** Cue whose family these versions join. */
  joinsCue: number | null;
  deal: "exclusive" | "non-exclusive";
  preExisting: "none" | "public-domain tune";
  /** What the library does when it is screened: accept, or leave it as it stands. */
  accept: boolean;
}

const INTAKE = {
  SM: "2026-01-02T10:00:00Z",
  BC: "2026-01-05T10:00:00Z",
  OA: "2026-01-07T10:00:00Z",
} as const;
const minutes = (from: string, count: number) => new Date(Date.parse(from) + count * 60_000);

/** A shorter form of every cue, for tests. */
const length = env.DEMO_CUE_SECONDS ? { seconds: env.DEMO_CUE_SECONDS } : {};

export function cueByNumber(number: number): CueRow {
  const cue = cues.find((candidate) => candidate.number === number);
  if (!cue) throw new RangeError(`no cue ${number}`);
  return cue;
}

const publisherOf = (code: string) => {
  const library = libraries.find((candidate) => candidate.code === code);
  return library ? [{ name: library.name, ipi: library.ipi, role: "E", share: "100.00" }] : [];
};

function descriptionOf(cue: CueRow): Record<string, unknown> {
  return {
    otherTitles: cue.otherTitles.map((entry) => entry.title),
    iswc: cue.iswc,
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
    sections: cueTimings(cue, length).sections.map((section) => ({
      atS: section.timeS,
      label: section.label,
      energy: section.energy,
    })),
    yearRecorded: cue.recorded.year,
  };
}

const loopSamples = (codes: readonly string[]) =>
  codes.map((code) => ({
    what: sharedMaterial.find((row) => row.id === code)?.title ?? code,
    source: "a royalty-free pack",
    kind: "registered loop",
    loopCode: code,
    where: "throughout",
    paperKey: null,
    paperWords: `receipt for ${code}, kept by the writer`,
  }));

export function cueHandover(world: DemoWorld, number: number, which: "full" | "others"): Handover {
  const cue = cueByNumber(number);
  const writers = cue.writers.map((writer) => {
    const person = personOf(world, writer.person);
    return {
      name: person.name,
      ipi: person.ipi,
      email: person.email,
      role: writer.role,
      share: (writer.shareBps / 100).toFixed(2),
    };
  });
  const versions = versionsOf(cue, length).filter(
    (version) => !version.role.startsWith("stem:") && (version.role === "full") === (which === "full"),
  );
  return {
    deliverer: cue.writers[0]?.person ?? "A",
    library: cue.library,
    at: minutes(INTAKE[cue.library], number * 4 + (which === "full" ? 0 : 300)),
    draft: { ...descriptionOf(cue), title: cue.title, writers, publishers: publisherOf(cue.library) },
    files: versions.map((version) => ({
      name: `${cue.library}${String(number).padStart(4, "0")}_${cue.title.replace(/[^A-Za-z0-9]+/g, "-")}_${version.role.replace(":", "-")}.flac`,
      role: version.role,
      isrc: version.isrc,
      key: { kind: "version", cueNumber: number, role: version.role },
    })),
    samples: loopSamples(cue.sharedLoops),
    joinsCue: which === "full" ? null : number,
    deal: cue.deal,
    preExisting: cue.publicDomainSource ? "public-domain tune" : "none",
    accept: true,
  };
}

export function caseHandover(world: DemoWorld, id: string): Handover {
  const row = plantedCases.find((candidate) => candidate.id === id);
  if (!row?.uploader || !row.deliveredTo) throw new RangeError(`${id} is not a delivery`);
  const person = personOf(world, row.uploader);
  const cue = row.about.find((entry): entry is number => typeof entry === "number");
  const like = cueByNumber(cue ?? 5);
  const isNew = row.process === "explained" || row.kinds.some((kind) => kind.startsWith("K9"));
  return {
    deliverer: row.uploader,
    library: row.deliveredTo,
    at: minutes("2026-05-18T07:30:00Z", Number(id.slice(2))),
    draft: {
      ...descriptionOf(like),
      otherTitles: [],
      iswc: null,
      sections: [],
      ...(id === "P-13" ? { bpm: 104 } : {}),
      ...(id === "P-27" ? { genre: "drone-and-texture", bpm: null, musicalKey: null } : {}),
      title: row.title,
      description: `${row.title}, as its deliverer describes it: made for documentary and drama, with room for speech.`,
      writers: [{ name: person.name, ipi: person.ipi, email: person.email, role: "C", share: "100.00" }],
      publishers: publisherOf(row.deliveredTo),
    },
    files: [
      {
        name: `${row.title.replace(/[^A-Za-z0-9]+/g, "-")}.flac`,
        role: roleOfCase(row),
        isrc: null,
        key: { kind: "case", id },
      },
    ],
    samples: id === "P-13" ? loopSamples(["LP-003"]) : [],
    joinsCue: id === "P-16" ? 4 : null,
    deal: "exclusive",
    preExisting: "none",
    accept: isNew && id !== "P-25",
  };
}

const roleOfCase = (row: CaseRow): string => (row.id === "P-16" ? "without:strings" : "full");

export function handoverOf(world: DemoWorld, item: string): Handover {
  const [kind, rest = ""] = item.split(/:(.*)/);
  if (kind === "cue") return cueHandover(world, Number(rest), "full");
  if (kind === "versions") return cueHandover(world, Number(rest), "others");
  return caseHandover(world, rest);
}
