import { beatToSeconds, formOf, stemNames, versionDurationS } from "@/fixtures/audio";
import type { VersionRoleId } from "@/lib/catalogue/version-roles";
import type { EndingId } from "@/lib/catalogue/vocabularies";
import type { CueRow, VersionRow } from "./cue-row";
import { versionIsrc } from "./cue-row";

export interface CueSection {
  readonly timeS: number;
  readonly label: string;
  readonly energy: 1 | 2 | 3 | 4 | 5;
}

export interface CueTimings {
  /** The last entry is the ending: the last hit, under the ending's own name. */
  readonly sections: readonly CueSection[];
  /** Places where the music may be cut: every four bars. */
  readonly editPointsS: readonly number[];
}

function round(seconds: number): number {
  return Math.round(seconds * 1000) / 1000;
}

/** Taken from the form that the synthesiser plays, so that page and sound agree. */
export function cueTimings(cue: CueRow, options: { seconds?: number } = {}): CueTimings {
  const form = formOf(cue.number, options);
  const sections: CueSection[] = form.sections.map((section) => ({
    timeS: section.startBeat === 0 ? 0 : round(beatToSeconds(form, section.startBeat)),
    label: section.label,
    energy: section.energy,
  }));
  const last = form.sections.at(-1);
  sections.push({ timeS: round(form.endS), label: cue.ending, energy: last ? last.energy : 1 });
  const editPointsS = form.bars
    .filter((bar) => bar.barInSection % 4 === 0 && bar.startBeat > 0)
    .map((bar) => round(beatToSeconds(form, bar.startBeat)));
  return { sections, editPointsS };
}

export interface DemoVersion {
  readonly role: VersionRoleId;
  readonly label: string | null;
  readonly position: number;
  /** Stems have none: they are not sold apart. */
  readonly isrc: string | null;
  readonly durationS: number;
  readonly ending: EndingId;
  readonly how: "mix" | "edit";
}

function endingOf(cue: CueRow, role: string): EndingId {
  if (role === "loop") return "loop-safe";
  return /^\d+$/.test(role) ? "button" : cue.ending;
}

/** Every recording of a family; "stems" stands for one recording a layer. */
export function versionsOf(cue: CueRow, options: { seconds?: number } = {}): DemoVersion[] {
  return cue.versions.flatMap((version: VersionRow): DemoVersion[] => {
    const { position } = version;
    if (version.role === "stems") {
      return stemNames(cue.number).map((name) => ({
        role: `stem:${name}`,
        label: null,
        position,
        isrc: null,
        durationS: round(versionDurationS(cue.number, `stem:${name}`, options)),
        ending: cue.ending,
        how: "mix",
      }));
    }
    const isEdit = /^(\d+|sting|loop)$/.test(version.role);
    return [
      {
        role: version.role,
        label: version.label ?? null,
        position,
        isrc: versionIsrc(cue, position),
        durationS: round(versionDurationS(cue.number, version.role, options)),
        ending: endingOf(cue, version.role),
        how: isEdit ? "edit" : "mix",
      },
    ];
  });
}
