import { fmt } from "@/components/ui/format";
import type { MarkKind } from "@/components/ui/mark";
import { versionRoleLabel } from "@/lib/catalogue/version-roles";
import type { Standing } from "@/lib/deliveries/states";
import { factsOf, measuresOf, type VersionOnWire } from "./wire";

const STATE_MARKS: Record<string, MarkKind> = {
  arrived: "half",
  measuring: "half",
  measured: "done",
  unreadable: "warn",
  screening: "half",
  clear: "done",
  held: "held",
  returned: "warn",
  refused: "warn",
  listed: "tick",
};

export const markOfState = (state: string): MarkKind => STATE_MARKS[state] ?? "open";

const STANDING_MARKS: Record<Standing, MarkKind> = {
  refused: "warn",
  "rights hold": "held",
  "needs you": "warn",
  "held for a person": "held",
  working: "half",
  "waiting for others": "half",
  clear: "done",
};

export function markOfStanding(standing: Standing | null, state: string): MarkKind {
  if (state === "listed") return "tick";
  return standing ? STANDING_MARKS[standing] : "open";
}

/** "Full", "No lead", "30": how a version is called at the head of its part. */
export function roleHead(role: string): string {
  const label = versionRoleLabel(role);
  return label.charAt(0).toUpperCase() + label.slice(1);
}

/** "2:02, 48 kHz, 24 bit, −14.2 LUFS, peak −1.3 dBTP" */
export function factsLine(version: VersionOnWire): string | null {
  const facts = factsOf(version);
  const measures = measuresOf(version);
  if (!facts || !measures) return null;
  const exact = /^\d+$/.test(version.versionRole);
  return [
    exact ? fmt.seconds(measures.durationS, 2) : fmt.time(measures.durationS),
    facts.container,
    fmt.hertz(facts.sampleRateHz),
    facts.bitDepth ? fmt.bits(facts.bitDepth) : null,
    facts.channels === 2 ? "stereo" : facts.channels === 1 ? "mono" : `${facts.channels} channels`,
    typeof measures.integratedLufs === "number" ? fmt.lufs(measures.integratedLufs) : null,
    typeof measures.truePeakDbtp === "number" ? `peak ${fmt.dbtp(measures.truePeakDbtp)}` : null,
  ]
    .filter((part) => part !== null)
    .join(", ");
}

/** What is really being done to a version, and how much of how much. */
export function progressWords(version: VersionOnWire): string {
  const { progress, state } = version;
  if (state === "arrived")
    return progress?.of
      ? `measuring ${fmt.time(progress.done)} of ${fmt.time(progress.of)}.`
      : "arrived; waiting to be measured.";
  if (!progress) return "waiting to be screened.";
  if (progress.words === "reading")
    return progress.of
      ? `being screened. Reading ${fmt.time(progress.done)} of ${fmt.time(progress.of)}, then searching what is held.`
      : `being screened. Reading, ${fmt.time(progress.done)} so far.`;
  return progress.done > 0
    ? `being screened. Searched ${progress.done} of ${fmt.count(progress.of, "recording")}.`
    : `being screened. Searching ${fmt.count(progress.of, "recording")}.`;
}

/** What a match looks like, inside a sentence. */
export const RELATION_WORDS: Record<string, string> = {
  "same recording": "the same recording",
  "altered copy": "an altered copy",
  excerpt: "an excerpt",
  "shared material": "shared material",
  "own version": "a version of your own",
  "same tune": "the same tune",
};

export const ENDING_KINDS: Record<string, "button" | "ring-out" | "fade" | "loop"> = {
  button: "button",
  "ring-out": "ring-out",
  fade: "fade",
  "loop-safe": "loop",
};
