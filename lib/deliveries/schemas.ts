import { z } from "zod";
import { FamilyDescription } from "@/lib/catalogue/schemas";
import {
  densities,
  endings,
  genres,
  instruments,
  moods,
  shapes,
  uses,
  voiceKinds,
} from "@/lib/catalogue/vocabularies";
import { checkIpiNameNumber, checkIsrc, checkIswc } from "@/lib/kernel/identifiers";

const identifier = (
  check: (text: string) => { ok: true; normalised: string } | { ok: false; message: string },
) =>
  z
    .string()
    .trim()
    .transform((text, context) => {
      const result = check(text);
      if (result.ok) return result.normalised;
      context.addIssue({ code: "custom", message: result.message });
      return z.NEVER;
    });

/** Nothing, or what fits. Not a union: its refusal would say "Invalid input" in place of the schema's own sentence. */
const optional = (schema: z.ZodType<string, string>) =>
  z
    .string()
    .nullable()
    .transform((text, context): string | null => {
      if (text === null || text === "") return null;
      const parsed = schema.safeParse(text);
      if (parsed.success) return parsed.data;
      for (const { message } of parsed.error.issues) context.addIssue({ code: "custom", message });
      return z.NEVER;
    });

export const IsrcField = optional(identifier(checkIsrc));
export const IswcField = optional(identifier(checkIswc));
export const IpiField = optional(identifier(checkIpiNameNumber));

/** "60.00" to basis points; two decimals, so that shares sum exactly. */
export const SharePercent = z
  .string()
  .trim()
  .regex(/^\d{1,3}(\.\d{1,2})?$/, "a share like 33.34")
  .transform((text) => {
    const [whole = "0", part = ""] = text.split(".");
    return Number(whole) * 100 + Number(part.padEnd(2, "0"));
  })
  .refine((bps) => bps > 0 && bps <= 10_000, "more than 0 and at most 100");

export const DeliveryWriter = z.object({
  name: z.string().trim().min(2, "the writer's name").max(200),
  email: optional(z.email("an address that mail reaches")),
  ipi: IpiField,
  role: z.enum(["C", "A", "CA", "AR", "AD", "TR"]),
  share: SharePercent,
});

export const DeliveryPublisher = z.object({
  name: z.string().trim().min(2).max(200),
  ipi: IpiField,
  role: z.enum(["E", "SE", "AM"]),
  share: SharePercent,
});

const sumIs100 = (message: string) => (rows: readonly { share: number }[], context: z.RefinementCtx) => {
  const sum = rows.reduce((total, row) => total + row.share, 0);
  if (rows.length === 0 || sum === 10_000) return;
  const text = (bps: number) => (bps / 100).toFixed(2);
  const difference = sum < 10_000 ? `missing ${text(10_000 - sum)}` : `${text(sum - 10_000)} too many`;
  context.addIssue({ code: "custom", message: `${message} add to ${text(sum)}, ${difference} (M01).` });
};

/** One of a controlled list, by its stable id. */
const termOf = (terms: readonly { id: string }[], message: string) =>
  z.string().refine((id) => terms.some((term) => term.id === id), message);
const termsOf = (terms: readonly { id: string }[], least: number, most: number, message: string) =>
  z.array(termOf(terms, message)).min(least, message).max(most);

/** The whole form, as it must be when it is signed. */
export const DeliveryForm = FamilyDescription.extend({
  genre: termOf(genres, "Choose the genre that fits best."),
  moreGenres: termsOf(genres, 0, 2, "At most two more genres."),
  moods: termsOf(moods, 1, 4, "Choose one to four moods."),
  instruments: termsOf(instruments, 1, 8, "Choose one to eight leading instruments."),
  uses: termsOf(uses, 0, 5, "Choose at most five uses."),
  voice: termOf(voiceKinds, "Say what voice there is, or none."),
  ending: termOf(endings, "Say how it ends."),
  shape: termOf(shapes, "Say how it goes."),
  density: termOf(densities, "Say how full it is."),
  iswc: IswcField,
  writers: z
    .array(DeliveryWriter)
    .min(1, "At least one writer.")
    .max(20)
    .superRefine(sumIs100("The writers' shares")),
  publishers: z.array(DeliveryPublisher).max(10).superRefine(sumIs100("The publishers' shares")),
  /** Adds these versions to a family that is already held. */
  linkedFamilyId: z.string().nullable(),
});
export type DeliveryForm = z.output<typeof DeliveryForm>;
export type DeliveryFormInput = z.input<typeof DeliveryForm>;

/** The form as far as it is filled in: kept at each step, of any completeness, within sane sizes. */
export const DeliveryDraft = z
  .record(z.string().max(40), z.unknown())
  .refine((draft) => JSON.stringify(draft).length < 60_000, "That is too much to keep.");

export const SampleDeclared = z.object({
  what: z.string().trim().min(2).max(200),
  source: z.string().trim().min(2).max(200),
  kind: z.enum([
    "registered loop",
    "royalty-free pack",
    "cleared sample",
    "public-domain recording",
    "own field recording",
  ]),
  /** The register's code, where it is a registered loop. */
  loopCode: z
    .string()
    .regex(/^LP-\d{3}$/, "LP- and three digits")
    .nullable(),
  where: z.string().trim().max(200),
  /** The stored paper: a licence or receipt. */
  paperKey: z.string().nullable(),
  paperWords: z.string().trim().max(300),
});

/** Declarations 1–4, 7 and 12: authorship, recording, samples, pre-existing music, deal, truth. */
export const Declaration = z.object({
  authorship: z.literal(true, { error: "Say that you wrote it and named every writer." }),
  recordingOwner: z.string().trim().min(2, "Who owns the master?").max(200),
  performers: z.enum(["all performed by me", "all consented in writing"], { error: "Say who performed." }),
  samples: z.array(SampleDeclared).max(20),
  preExisting: z.enum(["none", "public-domain tune", "arrangement with permission"]),
  preExistingWords: z.string().trim().max(500),
  deal: z.enum(["exclusive", "non-exclusive"]),
  truth: z.literal(true, { error: "A delivery needs the statement that all of this is true." }),
  signedName: z.string().trim().min(2, "Sign with your name.").max(200),
});
export type Declaration = z.output<typeof Declaration>;
