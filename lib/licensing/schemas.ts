import { z } from "zod";
import { isCivilDate } from "@/lib/kernel/calendar";
import { RateCard, Use } from "./rate-card";
import { WITHHOLDABLE, type Withholdable } from "./states";

const Id = z.string().min(1).max(40);
const line = (max: number) => z.string().trim().min(1, "This is needed.").max(max);
const Day = z.string().refine(isCivilDate, "Write a date, for example 2026-02-20.");

export const SetRateCard = z.object({
  /** For the system; an owner sets the own library's. */
  libraryId: Id.optional(),
  card: RateCard,
});

export const PriceUse = z.object({
  familyId: Id,
  use: Use,
  /** A buyer's own production: then licences already held are named. */
  productionId: Id.optional(),
});

export const PlaceOrder = z.object({
  productionId: Id,
  lines: z
    .array(
      z.object({
        familyId: Id,
        use: Use,
        /** Left out: every listed version of the family. */
        recordingIds: z.array(Id).min(1).max(100).optional(),
      }),
    )
    .min(1, "An order has at least one cue.")
    .max(20, "An order has at most twenty cues."),
  /** The buyer has read that a licence for the same use is held already. */
  evenIfHeld: z.boolean().default(false),
});

export const ApproveOrder = z.object({
  orderId: Id,
  termsVersion: z.string().max(60),
  mayAccept: z.literal(true, "Tick the sentence: without authority there is no licence."),
  /** Of the request; kept as a keyed hash only. */
  address: z.string().max(100).optional(),
});

export const RefundLines = z.object({
  orderId: Id,
  lineIds: z.array(Id).min(1, "Choose at least one licence.").max(20),
  words: line(400),
});

export const ImportLicence = z.object({
  libraryId: Id.optional(),
  /** As the library issued it: "LR-2026-0103", with or without its check character. */
  number: z.string().max(30),
  licensedOn: Day,
  companyId: Id.nullable(),
  productionId: Id.nullable(),
  licensee: z.object({
    name: line(200),
    endClient: line(200).nullable(),
    address: line(500).nullable(),
  }),
  production: z.object({ title: line(200), type: line(60), parts: line(200) }),
  familyId: Id,
  use: Use,
  /** Before tax, in the library's currency: "1536.00". */
  net: z.string().regex(/^\d{1,12}(\.\d{1,4})?$/, "Write an amount in figures, for example 240.00."),
  acceptedBy: line(200).nullable(),
});

export const SetWithheld = z.object({
  number: z.string().max(30),
  withheld: z.array(z.enum(Object.keys(WITHHOLDABLE) as [Withholdable, ...Withholdable[]])).max(8),
});

export const CheckProof = z.object({
  proof: z.string().max(80),
  /** The day asked about; left out: today in the licence's own zone. */
  on: Day.optional(),
  /** Of the request, for the limit only; never stored. */
  address: z.string().max(100).optional(),
});

export const CheckFile = z.object({
  text: z.string().max(4_000_000, "The file is too large to be a licence file."),
  on: Day.optional(),
  address: z.string().max(100).optional(),
});
