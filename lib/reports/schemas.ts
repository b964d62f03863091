import { z } from "zod";
import { isMod3736 } from "@/lib/kernel/check-characters";
import { checkIsrc, checkIswc } from "@/lib/kernel/identifiers";
import { CAPACITIES, CONCERNS, GROUNDS, type Ground } from "./states";

const text = (least: number, most: number, message: string) =>
  z.string().trim().min(least, message).max(most);
const identifier = (check: (value: string) => { ok: boolean; message?: string }) =>
  z
    .string()
    .trim()
    .max(40)
    .superRefine((value, context) => {
      if (value === "") return;
      const result = check(value);
      if (!result.ok) context.addIssue({ code: "custom", message: result.message ?? "not an identifier" });
    });
const TIME = "A time such as 0:20, minutes and seconds.";
const seconds = z.number({ error: TIME }).min(0, TIME).max(86_400, TIME).nullable().default(null);
export const LEVELS = ["claimed", "supported", "adjudicated"] as const;
const grounds = Object.keys(GROUNDS) as [Ground, ...Ground[]];

const RECEIPT = /^RN(\d{4})([A-Z0-9]{8})([A-Z0-9])$/;
export const MISTYPED = "The check character does not match: a character is mistyped. Nothing was looked up.";

/** A receipt number in its written form, however it was typed; null where its check character does not match. */
export function receiptNumberOf(typed: string): string | null {
  const code = typed.toUpperCase().replace(/[\s-]/g, "");
  const [, year, chance, check] = RECEIPT.exec(code) ?? [];
  return year && isMod3736(code) ? `RN-${year}-${chance}-${check}` : null;
}

/** What a report holds: who, what work, where, why, good faith, accuracy and authority. */
export const SubmitNotice = z.object({
  name: text(2, 200, "Write your name."),
  capacity: z.enum(CAPACITIES, { error: "In which capacity do you write?" }),
  email: z.email("An address that mail reaches: the receipt and every answer go there.").max(254),
  countryCode: z.string().regex(/^[A-Z]{2}$/, "Choose your country."),
  postal: z.string().trim().max(500).default(""),
  workTitle: text(1, 200, "Write the title of your work."),
  concerns: z.enum(CONCERNS, { error: "The work, the recording, or both?" }),
  writers: z.string().trim().max(500).default(""),
  owner: text(2, 200, "Say who owns it."),
  isrc: identifier(checkIsrc).default(""),
  iswc: identifier(checkIswc).default(""),
  release: z.string().trim().max(500).default(""),
  where: text(3, 500, "Where it is: a catalogue number such as SM0009, or the address of the page."),
  fromS: seconds,
  toS: seconds,
  grounds: z.array(z.enum(grounds)).min(1, "At least one of these."),
  why: text(30, 4000, "In a few sentences: why you think this is yours."),
  hasRecording: z.boolean().default(false),
  goodFaith: z.literal(true, { error: "A report needs this statement. Everything else you wrote is kept." }),
  accuracy: z.literal(true, { error: "A report needs this statement. Everything else you wrote is kept." }),
  signedName: text(2, 200, "Sign with your name."),
});
export type SubmitNotice = z.output<typeof SubmitNotice>;
export type SubmitNoticeInput = z.input<typeof SubmitNotice>;

/** What is kept of a report in the clear: everything but who sent it. */
export type ClaimOfNotice = Omit<
  SubmitNotice,
  "name" | "capacity" | "email" | "countryCode" | "postal" | "signedName"
>;

export const SetEvidenceLevel = z.object({
  reportedWorkId: z.string(),
  level: z.enum(LEVELS),
  words: text(20, 1000, "What the level rests on, in a sentence."),
});
export type SetEvidenceLevel = z.output<typeof SetEvidenceLevel>;

export const JudgeNotice = z.discriminatedUnion(
  "decision",
  [
    z.object({
      noticeId: z.string(),
      decision: z.literal("ask for more"),
      reasons: text(20, 3000, "What is missing, in a sentence or two."),
    }),
    z.object({
      noticeId: z.string(),
      decision: z.literal("reject"),
      reasons: text(60, 3000, "At least two sentences that the reporter understands."),
    }),
    z.object({
      noticeId: z.string(),
      decision: z.literal("accept"),
      reasons: text(60, 3000, "At least two sentences that both sides understand."),
      level: z.enum(LEVELS, { error: "How sure is it?" }),
      holdTarget: z.boolean(),
    }),
  ],
  { error: "Choose what you decide." },
);
export type JudgeNotice = z.output<typeof JudgeNotice>;
