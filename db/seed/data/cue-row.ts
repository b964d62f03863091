import type { VersionRoleId } from "@/lib/catalogue/version-roles";
import type {
  DensityId,
  EndingId,
  GenreId,
  InstrumentId,
  MoodId,
  ShapeId,
  UseId,
  VoiceKindId,
} from "@/lib/catalogue/vocabularies";

export type LibraryCode = "SM" | "BC" | "OA";
export type ComposerKey = "A" | "B" | "C" | "D" | "E" | "F" | "G" | "H";
export type Mode = "major" | "minor" | "mixolydian" | "phrygian";
export type SharedLoopId = "LP-003" | "LP-007" | "LP-011";

export interface WriterShare {
  readonly person: ComposerKey;
  /** CISAC writer roles: C composer, CA composer and author, AR arranger. */
  readonly role: "C" | "CA" | "AR";
  readonly shareBps: number;
}

export interface VersionRow {
  /** Place in the family, the full mix being 0; the version's ISRC is made from it. */
  readonly position: number;
  readonly role: VersionRoleId | "stems";
  /** What the library calls it, where that differs from the role's own label. */
  readonly label?: string;
}

export interface CueRow {
  readonly number: number;
  readonly title: string;
  readonly library: LibraryCode;
  readonly writers: readonly WriterShare[];
  readonly publicDomainSource: "PD-001" | null;
  readonly isrc: string;
  readonly iswc: string;
  readonly durationS: number;
  /** Beats per minute; null where the tempo is free. */
  readonly bpm: number | null;
  readonly key: { readonly tonic: string; readonly mode: Mode } | null;
  readonly genre: GenreId;
  readonly moods: readonly MoodId[];
  readonly leadInstruments: readonly InstrumentId[];
  readonly otherInstruments: readonly InstrumentId[];
  readonly instrumentDetail: string | null;
  readonly voice: VoiceKindId;
  /** BCP 47, where there are words. */
  readonly language: string | null;
  readonly uses: readonly UseId[];
  readonly shape: ShapeId;
  readonly density: DensityId;
  readonly description: string;
  readonly keywords: readonly string[];
  readonly ending: EndingId;
  readonly deal: "exclusive" | "non-exclusive";
  readonly recorded: { readonly year: number; readonly place: string };
  readonly sharedLoops: readonly SharedLoopId[];
  readonly otherTitles: readonly { readonly title: string; readonly library: LibraryCode }[];
  readonly versions: readonly VersionRow[];
}

/** One distinct recording has one ISRC: the last five digits are 1000 × position + cue number. */
export function versionIsrc(cue: CueRow, position: number): string {
  return cue.isrc.slice(0, 7) + String(1000 * position + cue.number).padStart(5, "0");
}

export function keyLabel(cue: CueRow): string | null {
  return cue.key && `${cue.key.tonic} ${cue.key.mode}`;
}
