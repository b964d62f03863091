import { z } from "zod";
import { isCivilDate } from "@/lib/kernel/calendar";
import { isCurrency } from "@/lib/kernel/currencies";
import { checkIpiNameNumber, checkIsrc, checkIswc, type IdentifierCheck } from "@/lib/kernel/identifiers";
import { parseLicenceNumber } from "@/lib/kernel/licence-number";
import { parseProofCode } from "@/lib/kernel/proof-code";
import { MEDIA_CLASS_CODES } from "../rate-card";

export const RECORD_FORMAT = "sedgewren-licence-record/1";

/** Stands on every record; similarity evidence must never read as a legal finding. */
export const SCREENING_CAUTION =
  "Similarity evidence is technical. It is not a finding of infringement or of originality, and absence of a match is not clearance.";
export const PERFORMANCE_NOT_INCLUDED =
  "Public performance and communication to the public are not included: the broadcaster, platform or venue pays its society.";

const Text = z.string().min(1).max(4000);
const Sha256 = z.string().regex(/^[0-9a-f]{64}$/);
const Instant = z.iso.datetime({ precision: 3 });
const Day = z.string().refine(isCivilDate, "This is not a date.");
const Amount = z.string().regex(/^\d{1,15}(\.\d{1,4})?$/);
const Share = z
  .string()
  .regex(/^(100\.00|\d{1,2}\.\d{2})$/, "Write a share with two decimals, for example 33.34.");
const stored = (check: (text: string) => IdentifierCheck) =>
  z.string().refine((text) => {
    const answer = check(text);
    return answer.ok && answer.normalised === text;
  }, "The identifier is not valid, or not in its stored form.");
const Ipi = stored(checkIpiNameNumber).nullable();
const LicenceNumber = z.string().refine((text) => {
  const parsed = parseLicenceNumber(text);
  return parsed.ok && parsed.number === text;
}, "This is not a licence number.");

const totals100 = (rows: ReadonlyArray<{ share: string }>) =>
  rows.reduce((sum, { share }) => sum + Number(share.replace(".", "")), 0) === 10_000;

const Cue = z.strictObject({
  title: Text,
  otherTitles: z.array(Text),
  library: Text,
  catalogueNumber: Text,
  iswc: stored(checkIswc).nullable(),
  versions: z
    .array(
      z.strictObject({
        role: Text,
        versionId: Text,
        isrc: stored(checkIsrc).nullable(),
        durationMs: z.number().int().positive(),
        /** null where this service had rendered no master when it signed. */
        masterSha256: Sha256.nullable(),
        deliveredSha256: Sha256,
      }),
    )
    .min(1),
});

const Shares = z.strictObject({
  convention: z.literal("The writer side and the publisher side each total 100.00."),
  writers: z
    .array(
      z.strictObject({
        name: Text,
        role: z.enum(["C", "A", "CA", "AR", "AD", "TR"]),
        ipi: Ipi,
        society: Text.nullable(),
        share: Share,
      }),
    )
    .min(1)
    .refine(totals100, "Writers' shares total 100.00."),
  /** Empty for an unpublished work. */
  publishers: z
    .array(
      z.strictObject({
        name: Text,
        role: z.enum(["E", "SE", "AM"]),
        ipi: Ipi,
        society: Text.nullable(),
        share: Share,
        territory: Text,
      }),
    )
    .refine((rows) => rows.length === 0 || totals100(rows), "Publishers' shares total 100.00."),
});

const Recording = z.strictObject({
  owner: Text,
  performers: z.array(z.strictObject({ name: Text, role: Text })),
  phonogramLine: Text,
});

const TermInput = z.strictObject({
  startEvent: z.enum(["licence date", "first use", "fixed date"]),
  startsOn: Day,
  /** null is perpetual. */
  months: z.number().int().positive().nullable(),
  /** IANA name of the zone in which 23:59:59 is meant. */
  zone: Text,
  archiveRule: Text,
});

const ScopeInput = z.strictObject({
  media: z.strictObject({ code: z.enum(MEDIA_CLASS_CODES), words: Text, included: z.array(Text) }),
  territory: z.strictObject({
    kind: z.enum(["country", "region", "world"]),
    words: Text,
    /** Empty for the World. */
    countries: z.array(z.string().regex(/^[A-Z]{2}$/)),
    /** Which frozen list of a named region; null where none is used. */
    listVersion: Text.nullable(),
  }),
  term: TermInput,
  exclusivity: z.strictObject({ kind: z.enum(["none", "category", "media", "full"]), words: Text }),
  quantity: z.strictObject({
    productions: z.number().int().positive(),
    episodes: z.number().int().positive(),
    cutdowns: z.number().int().min(0),
    tagChanges: z.number().int().min(0),
  }),
  audience: z.strictObject({ measure: Text, band: Text, topUpDays: z.number().int().positive() }).nullable(),
  use: z.strictObject({
    placement: z.enum(["any", "featured", "background", "theme", "source"]),
    lyricsHeard: z.boolean(),
    maxDurationS: z.number().int().positive().nullable(),
  }),
  edits: z.strictObject({ allowed: z.array(Text), notAllowed: z.array(Text) }),
  contextLimits: z.array(Text),
  credit: Text.nullable(),
  cueSheetDays: z.number().int().positive().nullable(),
  options: z.array(Text),
  promo: Text,
});

const Scope = ScopeInput.extend({
  term: TermInput.extend({ lastUseAt: Instant.nullable() }),
  /** The same in words, one sentence a row. */
  words: z.array(z.strictObject({ row: Text, says: Text })).min(1),
});

const Fee = z.strictObject({
  net: Amount,
  tax: Amount,
  taxWords: Text,
  gross: Amount,
  currency: z.string().refine(isCurrency),
  /** "150 × 1.6 × 1.6", and the card it comes from; a quote or a brought-in licence says so. */
  basis: Text,
  cardVersion: Text.nullable(),
  paymentReference: Text.nullable(),
  invoiceNumber: Text.nullable(),
});
const Person = z.strictObject({ name: Text, role: Text });
const References = z.strictObject({
  internal: Text.nullable(),
  isan: Text.nullable(),
  eidr: Text.nullable(),
});

const Plain = z.strictObject({
  demonstration: z.boolean(),
  origin: z.enum(["issued here", "brought in"]),
  number: LicenceNumber,
  verify: z.strictObject({
    address: z.url(),
    proofCode: z.string().refine((text) => parseProofCode(text).ok),
  }),
  issuedAt: Instant,
  licensor: z.strictObject({
    legalName: Text,
    capacity: z.enum(["owner", "exclusive administrator", "agent"]),
    chainReference: Text,
  }),
  cue: Cue,
  shares: Shares,
  recording: Recording,
  screening: z.strictObject({
    certificate: Text,
    screenedAt: Instant,
    indexSequence: z.number().int().min(0),
    recordingsCompared: z.number().int().min(0),
    engineVersion: Text,
    result: Text,
  }),
  warranties: z.array(Text).min(1),
  amendments: z.array(
    z.strictObject({ kind: z.enum(["addendum to", "supersedes"]), number: LicenceNumber, words: Text }),
  ),
  claimsContact: z.strictObject({ name: Text, email: z.email(), post: Text.nullable() }),
  signing: z.strictObject({
    keyId: Text,
    algorithm: z.literal("Ed25519"),
    /** Leaf of the day's Merkle tree. */
    log: z.strictObject({ day: Day, position: z.number().int().min(0) }),
  }),
});

const AcceptanceFacts = z.strictObject({
  authorityStatement: Text,
  acceptedAt: Instant,
  method: z.enum(["accepted on the site", "signed", "brought in"]),
  /** Salted, so that an address cannot be found by trying all of them. */
  addressSha256: Sha256.nullable(),
});

/** What the builder takes: every value in the clear, nothing derived. */
export const LicenceRecordInput = Plain.extend({
  statusAtIssue: z.enum(["in force", "payment due"]),
  licensee: z.strictObject({ name: Text, endClient: Text.nullable(), address: Text.nullable() }),
  production: z.strictObject({ type: Text, title: Text, parts: Text, references: References }),
  scope: ScopeInput,
  notIncluded: z.array(Text),
  performanceIncluded: z.boolean(),
  fee: Fee,
  terms: z.strictObject({ version: Text, text: z.string().min(1).max(200_000) }),
  acceptance: AcceptanceFacts.extend({ person: Person }),
});
export type LicenceRecordInput = z.infer<typeof LicenceRecordInput>;

const Committed = z.strictObject({ sha256: Sha256 });

/** The signed part. Every top-level name is one part, whose alteration can be told apart from the others'. */
export const LicenceRecord = Plain.extend({
  format: z.literal(RECORD_FORMAT),
  status: z.strictObject({ atIssue: z.enum(["in force", "payment due"]), history: Text }),
  licensee: z.strictObject({ name: Committed, endClient: Committed, address: Committed }),
  production: z.strictObject({ type: Text, title: Committed, parts: Committed, references: Committed }),
  scope: Scope,
  notIncluded: z.array(Text).min(1),
  fee: z.strictObject({ details: Committed }),
  terms: z.strictObject({ version: Text, sha256: Sha256, text: z.string() }),
  screening: Plain.shape.screening.extend({ caution: z.literal(SCREENING_CAUTION) }),
  cueSheetLines: z.array(Text).min(1),
  acceptance: AcceptanceFacts.extend({ person: Committed }),
});
export type LicenceRecord = z.infer<typeof LicenceRecord>;
export type LicenceScope = z.infer<typeof Scope>;
export type LicenceFee = z.infer<typeof Fee>;

export const STATUS_KINDS = [
  "in force",
  "payment due",
  "paid",
  "payment disputed",
  "dispute withdrawn",
  "payment reversed",
  "refunded",
  "rights question open",
  "rights question closed",
  "rescinded",
  "cancelled",
  "superseded",
  "reinstated",
  "amended",
] as const;
export type StatusKind = (typeof STATUS_KINDS)[number];

/** One dated line of a licence's history; each is a leaf of its day's tree. */
export const StatusEvent = z.strictObject({
  format: z.literal("sedgewren-status-event/1"),
  number: LicenceNumber,
  sequence: z.number().int().positive(),
  at: Instant,
  kind: z.enum(STATUS_KINDS),
  words: Text,
});
export type StatusEvent = z.infer<typeof StatusEvent>;

/** The published list. A key outlives its use: it goes on verifying what it signed while it was valid. */
export const KeyList = z.strictObject({
  format: z.literal("sedgewren-keys/1"),
  keys: z.array(
    z.strictObject({
      keyId: Text,
      algorithm: z.literal("Ed25519"),
      publicKey: z.string().regex(/^[0-9a-f]{64}$/),
      validFrom: Instant,
      validUntil: Instant.nullable(),
    }),
  ),
});
export type KeyList = z.infer<typeof KeyList>;
