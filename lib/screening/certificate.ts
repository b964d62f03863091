import type { ExplainedHit } from "./explain";
import { STANDING_LIMITS } from "./states";

/**
 * The body of a screening certificate: which recordings were compared, how, what was found and how it was explained,
 * and what was not done. It names no recording of another library.
 */
export function certificateBody(args: {
  run: {
    id: string;
    recordingId: string;
    engineVersion: number;
    seqSearched: number;
    seqAdmitted: number;
    recordingsCompared: number;
    hoursCompared: number;
    thresholds: Record<string, unknown>;
    outcome: string;
    outcomeWords: string;
    finishedAt: Date;
  };
  recording: { fileSha256: string; durationS: number };
  hits: readonly ExplainedHit[];
  channels: readonly string[];
  notComparable: readonly { startS: number; endS: number; reason: string }[];
}): Record<string, unknown> {
  const { run } = args;
  return {
    screenedAt: run.finishedAt.toISOString(),
    audioSha256: args.recording.fileSha256,
    durationS: args.recording.durationS,
    index: {
      engineVersion: run.engineVersion,
      sequence: run.seqAdmitted,
      recordings: run.recordingsCompared,
      hours: Number(run.hoursCompared.toFixed(2)),
    },
    comparisons: [
      "unaltered",
      "tempo 0.785 to 1.275 and pitch ±4.3 semitones",
      ...args.channels.map((channel) => `channel: ${channel}`),
    ],
    notRun: ["played backwards", "same tune in a new recording"],
    shortestStretchFound: "not yet measured for this engine version",
    notComparable: args.notComparable,
    thresholds: run.thresholds,
    outcome: run.outcome,
    words: run.outcomeWords,
    hits: args.hits
      .filter((hit) => hit.band === "hold")
      .map((hit) => ({
        reference:
          hit.subjectKind === "recording"
            ? "a recording held on this service"
            : hit.subjectKind === "loop"
              ? "a registered loop"
              : "a reported work",
        relation: hit.relation,
        explainedBy: hit.explainedBy,
        explanation: hit.explanation,
        passages: hit.passages.map((passage) => ({
          startS: round(passage.startS),
          endS: round(passage.endS),
        })),
      })),
    registersConsulted: ["families", "shared loops", "other titles", "reported works"],
    decidedBy: null,
    limits: STANDING_LIMITS,
  };
}

const round = (seconds: number) => Math.round(seconds * 100) / 100;
