import type { CueCard } from "../cue-card";
import type { Brief } from "../schemas";
import { WANTED_VERSIONS, type WantedVersion } from "../states";
import { type Candidate, isBeginning, stemOf, textWords } from "./candidates";
import { articled, labelOf, list, time } from "./words";

/** One word of the brief, weighed against one cue. */
export interface Part {
  weight: number;
  /** 0 misses, 1 fits. */
  value: number;
  missed: boolean;
  /** What there is to say about it, as a clause with a small first letter, or nothing. */
  says: string | null;
}

/** Weights of the formula; README states it. */
export const WEIGHTS = {
  moods: 4,
  uses: 2,
  lead: 3,
  genres: 3,
  voice: 2,
  tempo: 2,
  shape: 1.5,
  ending: 1,
  versions: 1.5,
  length: 1,
  text: 3,
} as const;
const BPM_REACH = 24;
const LEADS = 2;

/** "Any of" with something for more than one: one shared term is a fit, every further one brings it nearer. */
const anyOf = (shared: number, asked: number) =>
  shared === 0 ? 0 : 0.75 + (0.25 * shared) / Math.min(asked, 4);

export function weigh(brief: Brief, cue: CueCard, candidate: Candidate, bestRelevance: number): Part[] {
  return [
    ...moods(brief, cue, candidate),
    ...uses(brief, cue),
    ...lead(brief, cue),
    ...genres(brief, cue),
    ...voice(brief, cue),
    ...tempo(brief, cue),
    ...shape(brief, cue),
    ...ending(brief, cue),
    ...versions(brief, cue),
    ...length(brief, cue),
    ...text(brief, cue, candidate, bestRelevance),
  ];
}

function moods(brief: Brief, cue: CueCard, candidate: Candidate): Part[] {
  if (brief.moods.length === 0) return [];
  const weight = WEIGHTS.moods;
  const shared = cue.terms.mood.filter((mood) => (brief.moods as string[]).includes(mood));
  if (shared.length > 0)
    return [
      {
        weight,
        value: Math.min(1, anyOf(shared.length, brief.moods.length)),
        missed: false,
        says: `it is ${list(shared.map(labelOf))}`,
      },
    ];
  const own = textWords(candidate.searchText);
  const called = brief.moods.filter((mood) => own.includes(labelOf(mood)));
  if (called.length > 0)
    return [
      {
        weight,
        value: 0.65,
        missed: false,
        says: `its library's words for it include “${labelOf(called[0] ?? "")}”`,
      },
    ];
  const moodsOfCue = list(cue.terms.mood.map(labelOf)) || "of no stated mood";
  return [
    {
      weight,
      value: 0,
      missed: true,
      says: `it is ${moodsOfCue}, not ${list(brief.moods.map(labelOf), "or")}`,
    },
  ];
}

function uses(brief: Brief, cue: CueCard): Part[] {
  if (brief.uses.length === 0) return [];
  const shared = cue.terms.use.filter((use) => (brief.uses as string[]).includes(use));
  return [
    {
      weight: WEIGHTS.uses,
      value: Math.min(1, anyOf(shared.length, brief.uses.length)),
      missed: shared.length === 0,
      says:
        shared.length > 0
          ? null
          : cue.terms.use.length > 0
            ? `its library meant it for ${list(cue.terms.use.slice(0, 2).map(labelOf), "or")}`
            : "its library names no use for it",
    },
  ];
}

function lead(brief: Brief, cue: CueCard): Part[] {
  if (brief.lead.length === 0) return [];
  const wanted = brief.lead as string[];
  const leads = cue.terms.instrument.slice(0, LEADS);
  const leading = leads.filter((instrument) => wanted.includes(instrument));
  const inside = cue.terms.instrument.filter((instrument) => wanted.includes(instrument));
  const asked = list(
    brief.lead.map((id) => articled(labelOf(id))),
    "or",
  );
  const own = list(leads.map((id) => articled(labelOf(id))));
  const verb = leads.length === 1 ? "leads" : "lead";
  const weight = WEIGHTS.lead;
  if (leading.length > 0)
    return [
      {
        weight,
        value: Math.min(1, anyOf(leading.length, wanted.length)),
        missed: false,
        says: `${list(leading.map((id) => articled(labelOf(id))))} ${leading.length === 1 ? "leads" : "lead"}`,
      },
    ];
  if (inside.length > 0)
    return [{ weight, value: 0.45, missed: true, says: `${asked} is in it, but ${own} ${verb}` }];
  if (wanted.includes("piano") && leads.includes("electric-piano"))
    return [{ weight, value: 0.3, missed: true, says: "its piano is an electric one" }];
  return [{ weight, value: 0, missed: true, says: `${own} ${verb}, not ${asked}` }];
}

function genres(brief: Brief, cue: CueCard): Part[] {
  if (brief.genres.length === 0) return [];
  const wanted = brief.genres as string[];
  const isMain = wanted.includes(cue.genre);
  const isOther = cue.terms.genre.some((genre) => wanted.includes(genre));
  return [
    {
      weight: WEIGHTS.genres,
      value: isMain ? 1 : isOther ? 0.7 : 0,
      missed: !isMain && !isOther,
      says: isMain || isOther ? null : `it is filed under ${labelOf(cue.genre)}`,
    },
  ];
}

function voice(brief: Brief, cue: CueCard): Part[] {
  if (brief.voice === null) return [];
  const weight = WEIGHTS.voice;
  if (brief.voice === "none") {
    if (cue.voice === "none") return [{ weight, value: 1, missed: false, says: null }];
    const without = cue.versions.find((version) => meetsInstrumental(version.role));
    return without
      ? [
          {
            weight,
            value: 0.6,
            missed: false,
            says: `there is ${articled(voiceWords(cue.voice))} in the full; its ${versionWords(without.label)} leaves it out`,
          },
        ]
      : [{ weight, value: 0, missed: true, says: `there is ${articled(voiceWords(cue.voice))} in it` }];
  }
  const isMet = brief.voice === "some" ? cue.voice !== "none" : cue.voice === brief.voice;
  return [
    {
      weight,
      value: isMet ? 1 : brief.voice !== "some" && cue.voice !== "none" ? 0.3 : 0,
      missed: !isMet,
      says: isMet
        ? null
        : cue.voice === "none"
          ? "there is no voice in it"
          : `its voice is ${labelOf(cue.voice)}`,
    },
  ];
}

const voiceWords = (voice: string) =>
  ({ wordless: "voice without words", lyric: "sung lyric", spoken: "spoken voice", chant: "chant" })[voice] ??
  "whistle";

function tempo(brief: Brief, cue: CueCard): Part[] {
  const { bpmFrom, bpmTo } = brief;
  if (bpmFrom === null && bpmTo === null) return [];
  const weight = WEIGHTS.tempo;
  if (cue.bpm === null) return [{ weight, value: 0.3, missed: true, says: "its tempo is free" }];
  const under = bpmFrom === null ? 0 : Math.max(0, bpmFrom - cue.bpm);
  const over = bpmTo === null ? 0 : Math.max(0, cue.bpm - bpmTo);
  const off = under + over;
  return [
    {
      weight,
      value: Math.max(0, 1 - off / BPM_REACH),
      missed: off > 0,
      says:
        off === 0
          ? null
          : `at ${round(cue.bpm)}\u00a0bpm it is ${round(off)} ${over > 0 ? "above" : "below"} your range`,
    },
  ];
}

const round = (bpm: number) => String(Math.round(bpm * 10) / 10);

function shape(brief: Brief, cue: CueCard): Part[] {
  if (brief.shape === null) return [];
  const weight = WEIGHTS.shape;
  const rises = ["builds", "builds-then-drops"];
  if (cue.shape === brief.shape) {
    const opensS = rises.includes(brief.shape) ? opensAt(cue) : null;
    return [
      { weight, value: 1, missed: false, says: opensS === null ? null : `it opens at ${time(opensS)}` },
    ];
  }
  const isNear = rises.includes(brief.shape) && rises.includes(cue.shape);
  return [
    {
      weight,
      value: isNear ? 0.6 : 0,
      missed: !isNear,
      says: isNear && cue.shape === "builds" ? "it builds, but does not drop" : shapeWords(cue.shape),
    },
  ];
}

const shapeWords = (id: string) =>
  ({
    steady: "it stays steady",
    builds: "it builds",
    "falls-away": "it falls away",
    "builds-then-drops": "it builds, then drops",
    "two-halves": "it is in two halves",
    "stop-start": "it stops and starts",
  })[id] ?? `its shape is ${labelOf(id)}`;

/** Where the section with the greatest rise of energy begins. */
export function opensAt(cue: CueCard): number | null {
  let best: { atS: number; rise: number } | null = null;
  for (const [index, section] of cue.sections.entries()) {
    const before = cue.sections[index - 1];
    if (!before) continue;
    const rise = section.energy - before.energy;
    if (rise > (best?.rise ?? 0)) best = { atS: section.atS, rise };
  }
  return best?.atS ?? null;
}

function ending(brief: Brief, cue: CueCard): Part[] {
  if (brief.ending === null) return [];
  const isMet =
    cue.versions.some((version) => version.ending === brief.ending) || cue.ending === brief.ending;
  return [
    {
      weight: WEIGHTS.ending,
      value: isMet ? 1 : 0,
      missed: !isMet,
      says: isMet ? null : `its ending is a ${labelOf(cue.ending)}`,
    },
  ];
}

const meetsInstrumental = (role: string) => ["instrumental", "without:voice", "without:choir"].includes(role);

/** The listed version that answers a wanted one, or null. A version without the instrument that leads has no lead. */
export function versionFor(cue: CueCard, wanted: WantedVersion) {
  const leads = cue.terms.instrument.slice(0, LEADS).map((id) => labelOf(id));
  const answers = (role: string): boolean => {
    switch (wanted) {
      case "no-lead":
        return (
          role === "no-lead" ||
          meetsInstrumental(role) ||
          (role.startsWith("without:") && leads.some((name) => name === role.slice(8)))
        );
      case "instrumental":
        return meetsInstrumental(role);
      case "no-drums":
        return role === "no-drums" || role === "without:drums";
      case "stems":
        return role.startsWith("stem:");
      default:
        return role === wanted;
    }
  };
  return cue.versions.find((version) => answers(version.role)) ?? null;
}

function versions(brief: Brief, cue: CueCard): Part[] {
  if (brief.versions.length === 0) return [];
  const met = brief.versions.flatMap((wanted) => {
    const version = versionFor(cue, wanted);
    return version ? [{ wanted, version }] : [];
  });
  const isDrumless =
    brief.versions.includes("no-drums") &&
    !cue.terms.instrument.some((id) => ["drum-kit", "drum-machine", "hand-percussion"].includes(id));
  const isInstrumental = brief.versions.includes("instrumental") && cue.voice === "none";
  const [first] = met;
  const isMet = first !== undefined || isDrumless || isInstrumental;
  const leavesRoom = first && ["bed", "no-lead"].includes(first.wanted);
  return [
    {
      weight: WEIGHTS.versions,
      value: isMet ? Math.min(1, 0.9 + 0.1 * (met.length - 1)) : 0,
      missed: !isMet,
      says: first
        ? leavesRoom
          ? `its ${versionWords(first.version.label)} leaves room for speech`
          : `it comes with ${list(met.map(({ wanted }) => WANTED_VERSIONS[wanted]))}`
        : isDrumless
          ? "there are no drums in it"
          : isInstrumental
            ? null
            : `it has no ${list(
                brief.versions.map((wanted) => MISSING_WORDS[wanted] ?? wanted),
                "or",
              )}`,
    },
  ];
}

const MISSING_WORDS: Partial<Record<WantedVersion, string>> = {
  "no-lead": "version without its lead",
  "no-drums": "version without drums",
};

/** "bed", but "version without piano". */
const versionWords = (label: string) =>
  /^(without|no) /.test(label) ? `version ${label.replace(/^no /, "without ")}` : label;

function length(brief: Brief, cue: CueCard): Part[] {
  if (brief.lengthS === null) return [];
  const wanted = brief.lengthS;
  const [nearest] = [...cue.versions].sort(
    (a, b) => Math.abs(a.durationS - wanted) - Math.abs(b.durationS - wanted),
  );
  if (!nearest) return [];
  const off = Math.abs(nearest.durationS - wanted) / wanted;
  const isMet = off <= 0.12;
  const isHead = nearest === cue.versions[0];
  return [
    {
      weight: WEIGHTS.length,
      value: Math.max(0, 1 - off),
      missed: !isMet,
      says: isMet
        ? isHead
          ? null
          : `its ${versionWords(nearest.label)} runs ${time(nearest.durationS)}`
        : `the nearest to ${time(wanted)} is its ${versionWords(nearest.label)}, ${time(nearest.durationS)}`,
    },
  ];
}

function text(brief: Brief, cue: CueCard, candidate: Candidate, bestRelevance: number): Part[] {
  const words = textWords(brief.text);
  if (words.length === 0) return [];
  const weight = WEIGHTS.text;
  if (candidate.relevance >= 100) return [{ weight: 2 * weight, value: 1, missed: false, says: null }];
  const own = textWords(candidate.searchText);
  const title = textWords(cue.title);
  const has = (list: readonly string[], word: string) =>
    list.some((there) => isBeginning(stemOf(word), there));
  const missing = words.filter((word) => !has(own, word));
  const share = 1 - missing.length / words.length;
  const inTitle = words.filter((word) => has(title, word)).length / words.length;
  const relevance = bestRelevance > 0 ? candidate.relevance / bestRelevance : 0;
  return [
    {
      weight,
      value: 0.5 * share + 0.3 * relevance + 0.2 * inTitle,
      missed: missing.length > 0,
      says:
        missing.length === 0
          ? `its description speaks of ${list(words.map((word) => `“${word}”`))}`
          : `its description does not speak of ${list(
              missing.map((word) => `“${word}”`),
              "or",
            )}`,
    },
  ];
}
