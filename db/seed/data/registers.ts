import type { SharedLoopId } from "./cue-row";

export interface SharedMaterialRow {
  readonly id: SharedLoopId;
  readonly title: string;
  readonly bpm: number | null;
  readonly condition: string;
  readonly principalElementAllowed: boolean;
  readonly isLowInformation: boolean;
}

export const sharedMaterial: readonly SharedMaterialRow[] = [
  {
    id: "LP-003",
    title: "two-bar tambourine-and-rim groove, 104 BPM",
    bpm: 104,
    condition: "library use allowed with other musical content",
    principalElementAllowed: false,
    isLowInformation: false,
  },
  {
    id: "LP-007",
    title: "ukulele island strum, 126 BPM",
    bpm: 126,
    condition: "forbids use as the principal element",
    principalElementAllowed: false,
    isLowInformation: false,
  },
  {
    id: "LP-011",
    title: "vinyl crackle bed",
    bpm: null,
    condition: "none",
    principalElementAllowed: true,
    isLowInformation: true,
  },
];

export const publicDomainTunes = [
  {
    id: "PD-001",
    title: "The Cooper of Brae",
    kind: "traditional reel melody",
    firstPrintedYear: 1794,
    usedInCues: [6, 29],
    note: "Invented for the demonstration.",
  },
] as const;

export const otherTitles = [
  { cueNumber: 37, title: "Empty Deck", library: "BC", basis: "contract on file; both deals non-exclusive" },
] as const;

export interface ReportedWorkRow {
  readonly id: string;
  readonly title: string | null;
  readonly claims: readonly ("work" | "recording")[];
  readonly reporter: string | null;
  readonly against: { readonly cueNumber: number; readonly fromS: number; readonly toS: number } | null;
  readonly received: string | null;
  readonly evidence: "claimed" | "supported" | null;
  readonly isComplete: boolean;
  readonly hasRecording: boolean;
  readonly facts: string;
}

export const reportedWorks: readonly ReportedWorkRow[] = [
  {
    id: "RW-01",
    title: "Harbour Without Lamps",
    claims: ["work"],
    reporter: "marisol",
    against: { cueNumber: 9, fromS: 20, toS: 65 },
    received: "2026-05-11",
    evidence: "claimed",
    isComplete: true,
    hasRecording: true,
    facts: "Complete notice; new sales stopped and letters sent 12 May 2026.",
  },
  {
    id: "RW-02",
    title: "Copper Sparrow, live in Varn",
    claims: ["recording"],
    reporter: "tern-anvil",
    against: null,
    received: null,
    evidence: "supported",
    isComplete: true,
    hasRecording: true,
    facts: "Released 2019.",
  },
  {
    id: "RW-03",
    title: "Elevator Spring",
    claims: ["recording"],
    reporter: "cato",
    against: { cueNumber: 21, fromS: 0, toS: 18 },
    received: null,
    evidence: "claimed",
    isComplete: true,
    hasRecording: true,
    facts:
      "The span named is shared material LP-003; the reporter's ninth notice in four months, seven unfounded, prior warning given.",
  },
  {
    id: "RW-04",
    title: "Meadow Signal",
    claims: ["work", "recording"],
    reporter: "lindqvist-roe-estate",
    against: null,
    received: null,
    evidence: "supported",
    isComplete: true,
    hasRecording: true,
    facts: "Made 1974; writer Agathe Lindqvist-Roe died 2009.",
  },
  {
    id: "RW-05",
    title: null,
    claims: [],
    reporter: null,
    against: null,
    received: "2026-05-15",
    evidence: null,
    isComplete: false,
    hasRecording: false,
    facts: "Notice without location or statement.",
  },
];
