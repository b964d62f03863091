import { z } from "zod";
import { CHANNELS, RELATIONS, SUBJECT_KINDS } from "./states";

/** A passage as the engine reports it: times in seconds, speed and pitch of the recording against the reference. */
export const FoundPassage = z.object({
  startS: z.number(),
  endS: z.number(),
  refStartS: z.number(),
  refEndS: z.number(),
  speed: z.number(),
  pitchSemitones: z.number(),
  landmarksMatched: z.int(),
  landmarksTotal: z.int(),
  evidence: z.number(),
});
export type FoundPassage = z.infer<typeof FoundPassage>;

/** A hit as the engine reports it, before anything is known of families, registers and people. */
export const FoundHit = z.object({
  subjectKind: z.enum(SUBJECT_KINDS),
  subjectId: z.string(),
  band: z.enum(["hold", "weak"]),
  relationHint: z.enum(RELATIONS),
  evidence: z.number(),
  evidence2: z.number(),
  chance: z.number().nullable(),
  speed: z.number(),
  pitchSemitones: z.number(),
  coverageQuery: z.number(),
  coverageReference: z.number(),
  reversed: z.boolean(),
  channel: z.enum(CHANNELS),
  lowDistinctiveness: z.boolean(),
  passages: z.array(FoundPassage).min(1),
});
export type FoundHit = z.infer<typeof FoundHit>;
