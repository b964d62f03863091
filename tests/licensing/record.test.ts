import { describe, expect, it } from "vitest";
import { buildRecord } from "@/lib/licensing/record/build-record";
import { canonicalJson, type JsonValue } from "@/lib/licensing/record/canonical-json";
import { CONFIDENTIAL_FIELDS, withhold } from "@/lib/licensing/record/confidential";
import { dayRootSha256, signDayRoot } from "@/lib/licensing/record/day-root";
import { inForceOn, type LicenceTerm } from "@/lib/licensing/record/in-force";
import {
  LicenceRecord,
  LicenceRecordInput,
  PERFORMANCE_NOT_INCLUDED,
  SCREENING_CAUTION,
} from "@/lib/licensing/record/schema";
import { recordSha256, signRecord, signStatus } from "@/lib/licensing/record/sign-record";
import { privateKeyFromSeed } from "@/lib/licensing/record/signing-key";
import { verifyRecord } from "@/lib/licensing/record/verify-record";
import { INPUT, inventedFile, KEY, KEYS, OTHER_KEY, statusLines } from "./invented-record";

const text = (value: unknown) => canonicalJson(value as JsonValue);

describe("the licence record", () => {
  const { record, disclosed } = inventedFile();

  it("has a part for each of the twenty things a record must hold, and nothing else", () => {
    expect(Object.keys(record).sort()).toEqual(
      [
        "format",
        "demonstration",
        "origin",
        "number", // 1 with verify
        "verify",
        "status", // 2
        "issuedAt", // 3
        "licensor", // 4
        "licensee", // 5
        "production", // 6
        "cue", // 7
        "shares", // 8
        "recording", // 9
        "scope", // 10
        "notIncluded", // 11
        "fee", // 12
        "terms", // 13
        "warranties", // 14
        "screening", // 15
        "cueSheetLines", // 16
        "acceptance", // 17
        "amendments", // 18
        "claimsContact", // 19
        "signing", // 20
      ].sort(),
    );
  });

  it("says the scope in words made from its own data, with the last use of the term", () => {
    expect(record.scope.term.lastUseAt).toBe("2029-02-19T23:59:59.000Z");
    const says = Object.fromEntries(record.scope.words.map(({ row, says }) => [row, says]));
    expect(says.Term).toBe(
      "From 20 February 2026 (licence date) for 3 years; last use 2029-02-19 23:59:59 UTC, which is the end of the day in Europe/London. Programmes already archived may stay there.",
    );
    expect(says.Territory).toBe("United Kingdom and Ireland (GB, IE), list 2026-1.");
    expect(says["Productions, episodes and versions"]).toBe("1 production and 6 episodes.");
    expect(says["Cue sheet"]).toBe("The licensee files a cue sheet within 30 days of first transmission.");
    expect(record.scope.words).toHaveLength(13);
  });

  it("always says that performance is not included and that screening is no legal finding", () => {
    expect(record.notIncluded[0]).toBe(PERFORMANCE_NOT_INCLUDED);
    expect(record.screening.caution).toBe(SCREENING_CAUTION);
    const kept = buildRecord({ ...INPUT, performanceIncluded: true }).record;
    expect(kept.notIncluded).toEqual(INPUT.notIncluded);
  });

  it("has a cue-sheet line for each version, without a price", () => {
    expect(record.cueSheetLines).toEqual([
      "Peat Smoke and Ladders / full | ISRC XXDM12300002 | ISWC T-999.000.002-7 | Writers: Ailsa Trevarrick-Moe (C, 99900000158, 100.00 %) | Publishers: Saltmarrow Music Library (E, 99900002152, 100.00 %) | Saltmarrow Music Library SM0002 | LR-2026-0103-C",
      "Peat Smoke and Ladders / bed | ISRC XXDM12301002 | ISWC T-999.000.002-7 | Writers: Ailsa Trevarrick-Moe (C, 99900000158, 100.00 %) | Publishers: Saltmarrow Music Library (E, 99900002152, 100.00 %) | Saltmarrow Music Library SM0002 | LR-2026-0103-C",
    ]);
  });

  it("holds no confidential value in its signed part, and all of them beside it", () => {
    const signed = text(record);
    for (const value of [
      "Thistlemoth Pictures",
      "Skerrymore",
      "Tide Tables",
      "1536",
      "307.20",
      "Lomond-Achebe",
    ]) {
      expect(signed.replace("I may accept for Thistlemoth Pictures.", "")).not.toContain(value);
      expect(text(disclosed)).toContain(value);
    }
    expect(Object.keys(disclosed).sort()).toEqual([...CONFIDENTIAL_FIELDS].sort());
    expect(new Set(Object.values(disclosed).map(({ salt }) => salt)).size).toBe(CONFIDENTIAL_FIELDS.length);
  });

  it("takes a fresh salt each time, so equal values cannot be recognised", () => {
    const [one, two] = [buildRecord(INPUT), buildRecord(INPUT)];
    expect(one.record.licensee.name).not.toEqual(two.record.licensee.name);
    expect(one.disclosed["licensee.name"].salt).toMatch(/^[0-9a-f]{32}$/);
  });

  it("survives being written and read, byte for byte", () => {
    expect(text(LicenceRecord.parse(JSON.parse(text(record))))).toBe(text(record));
  });

  it.each<[string, (input: LicenceRecordInput) => unknown]>([
    [
      "shares of 99.99",
      (r) => ({ ...r, shares: { ...r.shares, writers: [{ ...r.shares.writers[0]!, share: "99.99" }] } }),
    ],
    ["a wrong check character", (r) => ({ ...r, number: "LR-2026-0103-D" })],
    [
      "a wrong IPI",
      (r) => ({ ...r, shares: { ...r.shares, writers: [{ ...r.shares.writers[0]!, ipi: "99900000159" }] } }),
    ],
    ["an ISWC in its spoken form", (r) => ({ ...r, cue: { ...r.cue, iswc: "T-999.000.002-7" } })],
    ["no version", (r) => ({ ...r, cue: { ...r.cue, versions: [] } })],
    ["no terms", (r) => ({ ...r, terms: { ...r.terms, text: "" } })],
    ["a field of its own", (r) => ({ ...r, extra: true })],
    [
      "a date that does not exist",
      (r) => ({ ...r, scope: { ...r.scope, term: { ...r.scope.term, startsOn: "2026-02-30" } } }),
    ],
  ])("%s is refused", (_, change) => {
    expect(LicenceRecordInput.safeParse(INPUT).success).toBe(true);
    expect(() => buildRecord(change(INPUT) as LicenceRecordInput)).toThrow();
  });

  it("thirds of 33.34, 33.33 and 33.33 are a whole, and an unpublished work has no publisher", () => {
    const writer = INPUT.shares.writers[0]!;
    const writers = ["33.34", "33.33", "33.33"].map((share) => ({ ...writer, share }));
    const built = buildRecord({ ...INPUT, shares: { ...INPUT.shares, writers, publishers: [] } });
    expect(built.record.cueSheetLines[0]).toContain("| Unpublished |");
  });

  it("a key signs only what names it, and a history only in order", () => {
    expect(() => signRecord(record, OTHER_KEY)).toThrow(/names key test-2026-a/);
    const lines = statusLines(record.number, [
      ["2026-02-20T11:02:30.000Z", "in force"],
      ["2026-02-19T11:02:30.000Z", "refunded"],
    ]);
    expect(() => signStatus(record, lines, new Date(), KEY)).toThrow(/line 2/);
    expect(() => signStatus(record, lines.slice(1), new Date(), KEY)).toThrow(/line 1/);
  });
});

describe("verifying", () => {
  const file = inventedFile();

  it("a genuine file is genuine, however it is spaced, with its number, history and term", () => {
    for (const written of [text(file), JSON.stringify(file, null, 2)])
      expect(verifyRecord(written, KEYS)).toMatchObject({
        verdict: "genuine",
        sentence: "Genuine record.",
        failing: [],
        number: "LR-2026-0103-C",
        asOf: "2026-05-18T09:00:00.000Z",
        events: [{ kind: "in force" }, { kind: "rights question open" }],
        term: { startsOn: "2026-02-20", zone: "Europe/London", lastUseAt: "2029-02-19T23:59:59.000Z" },
      });
  });

  it("stays genuine with confidential values withheld, and says which", () => {
    const shown = { ...file, disclosed: withhold(file.disclosed, ["production.title"]) };
    const result = verifyRecord(text(shown), KEYS);
    expect(result.verdict).toBe("genuine");
    expect(result.parts.filter(({ verifies }) => verifies === "not shown").map(({ part }) => part)).toEqual(
      CONFIDENTIAL_FIELDS.filter((field) => field !== "production.title"),
    );
  });

  it("one price digit changed: altered, and it is the fee that does not verify", () => {
    const written = text(file).replace('"net":"1536.00"', '"net":"1586.00"');
    expect(verifyRecord(written, KEYS)).toMatchObject({
      verdict: "altered",
      failing: ["fee.details"],
      sentence: "Altered. Does not verify: fee details.",
    });
  });

  it("names the altered part of the signed text, and only that", () => {
    const written = text(file).replace('"episodes":6', '"episodes":9');
    expect(verifyRecord(written, KEYS)).toMatchObject({ verdict: "altered", failing: ["scope", "status"] });
    expect(verifyRecord(text({ ...file, status: null }).replace("SM0002", "SM0003"), KEYS)).toMatchObject({
      failing: ["cue"],
    });
  });

  it("a part resealed by a stranger does not verify", () => {
    const forged = { ...file.record, cue: { ...file.record.cue, title: "Another Title" } };
    const stranger = { keyId: KEY.keyId, privateKey: privateKeyFromSeed("33".repeat(32)) };
    const resealed = {
      ...file,
      record: forged,
      seal: signRecord(forged, stranger),
      status: null,
      inclusion: null,
    };
    expect(verifyRecord(text(resealed), KEYS)).toMatchObject({ verdict: "altered", failing: ["seal"] });
  });

  it("a key outside its validity does not vouch", () => {
    const early = {
      ...KEYS,
      keys: KEYS.keys.map((key) => ({ ...key, validFrom: "2026-03-01T00:00:00.000Z" })),
    };
    expect(verifyRecord(text(file), early)).toMatchObject({ verdict: "altered", failing: ["key"] });
  });

  it("a history signed after its key had ended does not verify", () => {
    const ended = KEYS.keys.map((key) =>
      key.keyId === OTHER_KEY.keyId ? { ...key, validUntil: "2026-05-01T00:00:00.000Z" } : key,
    );
    expect(verifyRecord(text(file), { ...KEYS, keys: ended })).toMatchObject({
      failing: ["status"],
      asOf: null,
    });
  });

  it("a file signed with a key that the list does not hold is unknown; its history's key missing is said", () => {
    expect(verifyRecord(text(file), { ...KEYS, keys: KEYS.keys.slice(1) })).toMatchObject({
      verdict: "unknown",
    });
    const result = verifyRecord(text(file), { ...KEYS, keys: KEYS.keys.slice(0, 1) });
    expect(result).toMatchObject({ verdict: "genuine", asOf: null, events: [] });
    expect(result.parts).toContainEqual({ part: "status", verifies: "cannot be checked" });
    expect(result.parts).toContainEqual({ part: "inclusion", verifies: "cannot be checked" });
  });

  it("a name written twice is told even though a parser would not see it", () => {
    const written = text(file).replace('"verify":{', '"verify":{"address":"https://elsewhere.example",');
    expect(verifyRecord(written, KEYS)).toMatchObject({ verdict: "altered", failing: ["file"] });
  });

  it("a history cut short does not verify", () => {
    const status = file.status!;
    const cut = {
      ...status,
      statement: { ...status.statement, events: status.statement.events.slice(0, 1) },
    };
    expect(verifyRecord(text({ ...file, status: cut }), KEYS)).toMatchObject({ failing: ["status"] });
  });

  it("the history or proof of another licence does not verify", () => {
    const other = buildRecord({ ...INPUT, number: "LR-2026-0102-E" }, () => "00").record;
    const status = signStatus(
      other,
      statusLines(other.number, [["2026-02-20T11:02:30.000Z", "in force"]]),
      new Date("2026-05-18T09:00:00Z"),
      KEY,
    );
    expect(verifyRecord(text({ ...file, status }), KEYS)).toMatchObject({ failing: ["status"] });
    expect(
      verifyRecord(text({ ...file, record: other, seal: signRecord(other, KEY), status }), KEYS).failing,
    ).toEqual(expect.arrayContaining(["inclusion"]));
  });

  it.each(["", "{}", "[]", "null", "not json", '{"record":1,"seal":2}', "[".repeat(100_000), '"x"'])(
    "what is no licence file is unknown, and nothing throws (%#)",
    (written) => expect(verifyRecord(written, KEYS).verdict).toBe("unknown"),
  );
});

describe("the day's root", () => {
  it("names the day before by its hash, without a gap", () => {
    const first = signDayRoot("2026-02-19", [], null, KEY);
    const second = signDayRoot("2026-02-20", ["a leaf"], first.statement, KEY);
    expect(second.statement.previous).toEqual({ day: "2026-02-19", sha256: dayRootSha256(first.statement) });
    expect(() => signDayRoot("2026-02-21", [], first.statement, KEY)).toThrow(/day before/);
    const rewritten = signDayRoot("2026-02-19", ["an old record"], null, KEY);
    expect(dayRootSha256(rewritten.statement)).not.toBe(second.statement.previous?.sha256);
  });

  it("a record's hash is that of its canonical text", () => {
    const { record } = inventedFile();
    expect(recordSha256(JSON.parse(JSON.stringify(record)))).toBe(recordSha256(record));
  });
});

describe("in force on a date", () => {
  const term: LicenceTerm = {
    startsOn: "2026-02-20",
    lastUseAt: "2029-02-19T23:59:59.000Z",
    zone: "Europe/London",
  };
  const lines = (...rows: Parameters<typeof statusLines>[1]) => statusLines("LR-2026-0103-C", rows);

  it("a question opened later does not change the answer and is said", () => {
    const events = lines(
      ["2026-03-03T10:00:00.000Z", "in force"],
      ["2026-05-11T14:00:00.000Z", "rights question open"],
    );
    expect(inForceOn(events, term, "2026-03-20")).toEqual({
      answer: "in force",
      sentence: "In force on 20 March 2026. Since 11 May 2026 a rights question is open.",
      open: [{ kind: "rights question open", since: "2026-05-11" }],
    });
    const closed = [...events, ...lines(["2026-06-01T10:00:00.000Z", "rights question closed"])];
    expect(inForceOn(closed, term, "2026-03-20").sentence).toBe("In force on 20 March 2026.");
  });

  it("a refund ends it from that moment", () => {
    const events = lines(["2026-03-14T10:00:00.000Z", "in force"], ["2026-04-02T10:00:00.000Z", "refunded"]);
    const on = (date: string) => inForceOn(events, { ...term, lastUseAt: null }, date);
    expect(on("2026-04-01").answer).toBe("in force");
    expect(on("2026-04-02")).toMatchObject({
      answer: "in force for part of the day",
      sentence: "In force for part of 2 April 2026: it was refunded on 2 April 2026.",
    });
    expect(on("2026-05-18").sentence).toBe("Not in force on 18 May 2026: it was refunded on 2 April 2026.");
  });

  it("a disputed payment leaves it in force until the payment is reversed, and winning puts it back", () => {
    const disputed = lines(["2026-04-20T08:00:00.000Z", "payment disputed"]);
    expect(inForceOn(disputed, term, "2026-05-18").sentence).toBe(
      "In force on 18 May 2026. Since 20 April 2026 the payment is disputed.",
    );
    const lost = [...disputed, ...lines(["2026-05-01T08:00:00.000Z", "payment reversed"])];
    expect(inForceOn(lost, term, "2026-05-18")).toMatchObject({ answer: "not in force", open: [] });
    const won = [...lost, ...lines(["2026-05-10T08:00:00.000Z", "reinstated"])];
    expect(inForceOn(won, term, "2026-05-18").answer).toBe("in force");
    expect(inForceOn(won, term, "2026-05-05").answer).toBe("not in force");
    expect(inForceOn(won, term, "2026-05-10").answer).toBe("in force for part of the day");
  });

  it("begins and expires with the days of its own zone", () => {
    const summer: LicenceTerm = {
      startsOn: "2026-04-08",
      lastUseAt: "2026-07-07T22:59:59.000Z",
      zone: "Europe/London",
    };
    const on = (date: string) => inForceOn([], summer, date);
    expect(on("2026-04-07").sentence).toBe("Not in force on 7 April 2026: its term begins on 8 April 2026.");
    expect([on("2026-04-08").answer, on("2026-07-07").answer]).toEqual(["in force", "in force"]);
    expect(on("2026-07-08").sentence).toBe("Not in force on 8 July 2026: its term ended on 7 July 2026.");
  });

  it("what happens after the term changes nothing", () => {
    const events = lines(["2030-01-01T00:00:00.000Z", "cancelled"]);
    expect(inForceOn(events, term, "2029-02-19").answer).toBe("in force");
    expect(inForceOn(events, term, "2030-02-01").sentence).toContain("its term ended on 19 February 2029");
  });
});
