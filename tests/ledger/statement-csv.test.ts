import { describe, expect, test } from "vitest";
import type { Statement } from "@/lib/ledger";
import { csvCell, statementCsv } from "@/lib/ledger/statement-csv";

/*
 * Quoting as in RFC 4180, section 2 (fields with commas, quotes or line breaks are quoted, quotes doubled, rows end in CRLF).
 * What a spreadsheet takes for a formula: OWASP, "CSV Injection" (=, +, -, @, tab, carriage return at the start).
 */
describe("a statement as CSV", () => {
  test.each([
    ["=1+1", "'=1+1"],
    ["+44 20", "'+44 20"],
    ["-cmd", "'-cmd"],
    ["@SUM(A1)", "'@SUM(A1)"],
    ["\t=1", "'\t=1"],
    ["  =1", "'  =1"],
    ['=HYPERLINK("x","y")', `"'=HYPERLINK(""x"",""y"")"`],
    ["-59.87", "-59.87"],
    ["0.00", "0.00"],
    ["Salt on the Window Frame", "Salt on the Window Frame"],
    ["Dusk, Again", '"Dusk, Again"'],
    ["two\nlines", '"two\nlines"'],
  ])("the cell %j is written %j", (given, written) => expect(csvCell(given)).toBe(written));

  test("opening, lines and closing; a title made as a formula stays text, amounts stay numbers that add up", () => {
    const statement: Statement = {
      currency: "GBP",
      openingMinor: 1000n,
      closingMinor: -4987n,
      heldMinor: 0n,
      availableMinor: -4987n,
      advance: null,
      lines: [
        {
          key: "k",
          entryId: "ent_1",
          code: "dispute",
          name: "Payment dispute",
          reason: "The buyer's bank took it back.",
          eventAt: new Date("2026-04-20T08:00:00Z"),
          postedAt: new Date("2026-04-20T08:00:01Z"),
          amountMinor: -5987n,
          balanceMinor: -4987n,
          payoutId: null,
          advancesOf: [],
          sale: {
            orderNumber: "O-1041",
            licenceNumber: "LR-2026-0101-X",
            cueTitle: "=cmd|' /C calc'!A0",
            scopeWords: "TV, the UK",
            buyer: null,
            productionTitle: null,
            netMinor: 24_000n,
            platformFeeMinor: 3600n,
            processorFeeMinor: 445n,
            receiptsMinor: 19_955n,
            poolBps: 5000,
            shareBps: 6000,
          },
        },
      ],
    };
    const text = statementCsv([statement]);
    expect(text.startsWith("\uFEFFCurrency,Date,")).toBe(true);
    const rows = text.trimEnd().split("\r\n");
    expect(rows).toHaveLength(4);
    const [head, opening, line, closing] = rows.map((row) => row.split(","));
    expect(new Set([opening?.length, closing?.length, head?.length]).size).toBe(1);
    const amount = head?.indexOf("Amount") ?? -1;
    expect(line?.[6]).toBe("'=cmd|' /C calc'!A0");
    // The scope's own comma shifts a naive split by one.
    expect(line?.[amount + 1]).toBe("-59.87");
    expect([opening?.[amount + 1], closing?.[amount + 1]]).toEqual(["10.00", "-49.87"]);
  });
});
