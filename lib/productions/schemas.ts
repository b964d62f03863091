import { z } from "zod";
import { SHORTLIST_STATES } from "./states";

const optional = (most: number) =>
  z
    .string()
    .trim()
    .max(most)
    .nullish()
    .transform((value) => value || null);

export const CreateProduction = z.object({
  title: z.string().trim().min(1, "Give the production a title.").max(200),
  /** What outsiders see instead of a title that is still confidential. */
  codeName: optional(80),
  episode: optional(120),
  kind: z.string().trim().min(1, "Say what it is.").max(60),
  client: optional(200),
});
export type CreateProduction = z.input<typeof CreateProduction>;

/** The use is licensing's to judge: it parses it again whenever it prices something. */
export const SetProductionUse = z.object({
  productionId: z.string(),
  use: z.record(z.string(), z.unknown()).nullable(),
});

const Note = z.string().trim().max(500, "A note is at most 500 characters.");

export const AddToShortlist = z.object({
  productionId: z.string(),
  recordingId: z.string(),
  note: Note.default(""),
});

export const SetShortlistItem = z.object({
  itemId: z.string(),
  state: z.enum(SHORTLIST_STATES).optional(),
  note: Note.optional(),
  /** Another version of the same cue. */
  recordingId: z.string().optional(),
});
