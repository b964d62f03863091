import { proofCodeOf } from "@/lib/kernel/proof-code";
import { buildRecord } from "@/lib/licensing/record/build-record";
import { leafOf, proveInclusion, signDayRoot } from "@/lib/licensing/record/day-root";
import type { KeyList, LicenceRecordInput, StatusEvent, StatusKind } from "@/lib/licensing/record/schema";
import { type LicenceFile, sealOf, signRecord, signStatus } from "@/lib/licensing/record/sign-record";
import {
  privateKeyFromSeed,
  publicKeyHexOf,
  type SigningKey,
  sha256Hex,
} from "@/lib/licensing/record/signing-key";

/** Keys for tests only, from seeds anybody can see. */
export const KEY: SigningKey = { keyId: "test-2026-a", privateKey: privateKeyFromSeed("11".repeat(32)) };
export const OTHER_KEY: SigningKey = {
  keyId: "test-2026-b",
  privateKey: privateKeyFromSeed("22".repeat(32)),
};

const listed = (key: SigningKey) => ({
  keyId: key.keyId,
  algorithm: "Ed25519" as const,
  publicKey: publicKeyHexOf(key.privateKey),
  validFrom: "2026-01-01T00:00:00.000Z",
  validUntil: "2026-12-31T23:59:59.999Z",
});
export const KEYS: KeyList = { format: "sedgewren-keys/1", keys: [listed(KEY), listed(OTHER_KEY)] };

/** An invented licence: six episodes of a documentary, UK and Ireland, three years. */
export const INPUT: LicenceRecordInput = {
  demonstration: true,
  origin: "issued here",
  number: "LR-2026-0103-C",
  verify: { address: "https://sedgewren.example/check", proofCode: proofCodeOf(new Uint8Array(10).fill(7)) },
  issuedAt: "2026-02-20T11:02:30.000Z",
  statusAtIssue: "in force",
  licensor: {
    legalName: "Saltmarrow Music Library",
    capacity: "exclusive administrator",
    chainReference: "Writer agreement SM-W-0002 of 3 March 2023",
  },
  licensee: { name: "Thistlemoth Pictures", endClient: "Skerrymore TV", address: null },
  production: {
    type: "television programme",
    title: "Tide Tables",
    parts: "Series 1, episodes 1 to 6",
    references: { internal: "TT-1", isan: null, eidr: null },
  },
  cue: {
    title: "Peat Smoke and Ladders",
    otherTitles: [],
    library: "Saltmarrow Music Library",
    catalogueNumber: "SM0002",
    iswc: "T9990000027",
    versions: [
      {
        role: "full",
        versionId: "rec_full",
        isrc: "XXDM12300002",
        durationMs: 132_000,
        masterSha256: sha256Hex("master"),
        deliveredSha256: sha256Hex("delivered"),
      },
      {
        role: "bed",
        versionId: "rec_bed",
        isrc: "XXDM12301002",
        durationMs: 132_000,
        masterSha256: sha256Hex("bed master"),
        deliveredSha256: sha256Hex("bed delivered"),
      },
    ],
  },
  shares: {
    convention: "The writer side and the publisher side each total 100.00.",
    writers: [
      { name: "Ailsa Trevarrick-Moe", role: "C", ipi: "99900000158", society: null, share: "100.00" },
    ],
    publishers: [
      {
        name: "Saltmarrow Music Library",
        role: "E",
        ipi: "99900002152",
        society: null,
        share: "100.00",
        territory: "World",
      },
    ],
  },
  recording: {
    owner: "Saltmarrow Music Library",
    performers: [{ name: "Ailsa Trevarrick-Moe", role: "acoustic guitar, fiddle" }],
    phonogramLine: "(P) 2023 Saltmarrow Music Library",
  },
  scope: {
    media: {
      code: "MC06",
      words: "TV or radio programme incl. catch-up",
      included: ["broadcast", "catch-up for the term"],
    },
    territory: {
      kind: "region",
      words: "United Kingdom and Ireland",
      countries: ["GB", "IE"],
      listVersion: "2026-1",
    },
    term: {
      startEvent: "licence date",
      startsOn: "2026-02-20",
      months: 36,
      zone: "Europe/London",
      archiveRule: "Programmes already archived may stay there.",
    },
    exclusivity: { kind: "none", words: "Non-exclusive: others may receive the same rights." },
    quantity: { productions: 1, episodes: 6, cutdowns: 0, tagChanges: 0 },
    audience: null,
    use: { placement: "any", lyricsHeard: false, maxDurationS: null },
    edits: {
      allowed: ["cut", "loop", "fade", "mix with speech and effects"],
      notAllowed: ["change the tune", "add lyrics", "re-record", "release as music", "train AI"],
    },
    contextLimits: ["political advertising"],
    credit: null,
    cueSheetDays: 30,
    options: [],
    promo: "Promotion of the same production in context is included; out of context it is not.",
  },
  notIncluded: ["Trailers out of context, soundtrack albums, adverts."],
  performanceIncluded: false,
  fee: {
    net: "1536.00",
    tax: "307.20",
    taxWords: "VAT 20 %",
    gross: "1843.20",
    currency: "GBP",
    basis: "150 × 1.6 × 1.6 × 4",
    cardVersion: "invented-1",
    paymentReference: "pay_0103",
    invoiceNumber: "SM-2026-0041",
  },
  terms: {
    version: "2026-1 (draft for counsel)",
    text: "The terms in full.\nSecond paragraph: “quotes”, ümlauts.",
  },
  warranties: ["The licensor has the right to grant this licence."],
  screening: {
    certificate: "CERT-0002",
    screenedAt: "2026-01-02T10:00:00.000Z",
    indexSequence: 40,
    recordingsCompared: 96,
    engineVersion: "1",
    result: "No unexplained match.",
  },
  acceptance: {
    person: { name: "Beatrix Lomond-Achebe", role: "approver" },
    authorityStatement: "I may accept for Thistlemoth Pictures.",
    acceptedAt: "2026-02-20T11:02:00.000Z",
    method: "accepted on the site",
    addressSha256: sha256Hex("salted address"),
  },
  amendments: [],
  claimsContact: { name: "Saltmarrow rights desk", email: "rights@saltmarrow.example", post: null },
  signing: { keyId: KEY.keyId, algorithm: "Ed25519", log: { day: "2026-02-20", position: 2 } },
};

export function statusLines(
  number: string,
  lines: ReadonlyArray<readonly [string, StatusKind]>,
): StatusEvent[] {
  return lines.map(([at, kind], index) => ({
    format: "sedgewren-status-event/1",
    number,
    sequence: index + 1,
    at,
    kind,
    words: `Recorded: ${kind}.`,
  }));
}

/** The licence as a file with history and proof: its seal is the third of five leaves of its day. */
export function inventedFile(): LicenceFile {
  let salts = 0;
  const { record, disclosed } = buildRecord(INPUT, () => sha256Hex(`salt ${salts++}`).slice(0, 32));
  const events = statusLines(record.number, [
    ["2026-02-20T11:02:30.000Z", "in force"],
    ["2026-05-11T14:00:00.000Z", "rights question open"],
  ]);
  const leaves = [
    "leaf one",
    "leaf two",
    leafOf(sealOf(record)),
    leafOf(events[0] as StatusEvent),
    "leaf five",
  ];
  const before = signDayRoot("2026-02-19", [], null, KEY);
  const root = signDayRoot("2026-02-20", leaves, before.statement, OTHER_KEY);
  return {
    record,
    disclosed,
    seal: signRecord(record, KEY),
    status: signStatus(record, events, new Date("2026-05-18T09:00:00Z"), OTHER_KEY),
    inclusion: proveInclusion(leaves, 2, root),
  };
}
