import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { captureLegs, netByAccount, takeBackLegs } from "@/lib/ledger/legs";
import {
  grossOf,
  type LineSplit,
  payoutOf,
  poolOf,
  receiptsOf,
  recoupable,
  recoupmentToReverse,
  type Sale,
  splitSale,
  takeBack,
} from "@/lib/ledger/split";
import { minor, ORDER, show, sum } from "./invented-sale";

describe("the worked sale, to the penny", () => {
  const sale = splitSale(ORDER);
  const row = (of: (line: LineSplit) => bigint) => [...sale.lines.map(of), sum(sale.lines.map(of))].map(show);
  const writer = (payeeId: string) => (line: LineSplit) =>
    sum(line.writers.filter((part) => part.payeeId === payeeId).map(({ amountMinor }) => amountMinor));

  it.each<[string, (line: LineSplit) => bigint, string[]]>([
    ["tax", (line) => line.taxMinor, ["48.00", "25.00", "73.00"]],
    ["gross paid", grossOf, ["288.00", "150.00", "438.00"]],
    ["platform fee", (line) => line.platformFeeMinor, ["36.00", "18.75", "54.75"]],
    ["processor fee", (line) => line.processorFeeMinor, ["4.45", "2.32", "6.77"]],
    ["library receipts", receiptsOf, ["199.55", "103.93", "303.48"]],
    ["composer pool", poolOf, ["99.78", "51.97", "151.75"]],
    ["library keeps", (line) => line.libraryMinor, ["99.77", "51.96", "151.73"]],
    ["A", writer("A"), ["59.87", "17.33", "77.20"]],
    ["C", writer("C"), ["39.91", "17.32", "57.23"]],
    ["E", writer("E"), ["0.00", "17.32", "17.32"]],
  ])("%s", (_, of, figures) => expect(row(of)).toEqual(figures));

  it("the processor's 1.5 % of gross and 0.20 is 6.77", () => {
    expect(show((sum(sale.lines.map(grossOf)) * 15n + 500n) / 1000n + 20n)).toBe("6.77");
  });
});

describe("other worked figures", () => {
  const sell = (net: string, poolBps: number, writers: Array<[string, number]>, processor = "0.00") =>
    splitSale({
      ...ORDER,
      processorFeeMinor: minor(processor),
      lines: [
        {
          orderLineId: "line",
          netMinor: minor(net),
          taxMinor: 0n,
          poolBps,
          writers: writers.map(([payeeId, shareBps]) => ({ payeeId, shareBps })),
        },
      ],
    }).lines[0]!;

  it("a later sale of 100.00 without a processor's fee gives A 42.50 and the library 42.50", () => {
    const line = sell("100.00", 5000, [["A", 10_000]]);
    expect(
      [line.platformFeeMinor, receiptsOf(line), line.writers[0]!.amountMinor, line.libraryMinor].map(show),
    ).toEqual(["15.00", "85.00", "42.50", "42.50"]);
    expect(show(-minor("77.20") + line.writers[0]!.amountMinor)).toBe("-34.70");
    expect(show(-minor("196.73") + line.libraryMinor)).toBe("-154.23");
  });

  it("of a pool of one penny the first of three equal writers gets it, and nothing is rounded away", () => {
    const line = sell("0.01", 10_000, [
      ["A", 3334],
      ["C", 3333],
      ["E", 3333],
    ]);
    expect(line.writers.map(({ amountMinor }) => amountMinor)).toEqual([1n, 0n, 0n]);
    expect(grossOf(line)).toBe(1n);
  });

  it("where fees exceed a tiny price the library bears it and no writer is charged", () => {
    const line = sell("0.10", 5000, [["A", 10_000]], "0.25");
    expect([poolOf(line), line.libraryMinor, grossOf(line)]).toEqual([0n, -17n, 10n]);
    const net = netByAccount(captureLegs({ ...ORDER, processorFeeMinor: 25n, lines: [line] }));
    expect(net.find(({ kind }) => kind === "library held")?.debitMinor).toBe(17n);
    expect(() => takeBack(line, 5n)).toThrow(RangeError);
    expect(takeBack(line, 10n).taken).toEqual(line);
  });

  it("a payout waits for the threshold and never goes to somebody below nothing", () => {
    expect([2499n, 2500n, -5n, 0n].map((balance) => payoutOf(balance, 2500n))).toEqual([0n, 2500n, 0n, 0n]);
    expect(payoutOf(0n, 0n)).toBe(0n);
  });

  it("an advance is recovered from what there is, and put back only below nothing", () => {
    expect([recoupable(4500n, 1000n), recoupable(4500n, -1n), recoupable(0n, 100n)]).toEqual([1000n, 0n, 0n]);
    expect([recoupmentToReverse(4500n, -1000n), recoupmentToReverse(4500n, 1n)]).toEqual([1000n, 0n]);
    expect(recoupmentToReverse(4500n, -9000n)).toBe(4500n);
  });

  it("refuses shares that do not total 100.00, negative amounts and a pool above the receipts", () => {
    const line = ORDER.lines[0]!;
    const broken = [
      { ...line, writers: [{ payeeId: "A", shareBps: 9999 }] },
      { ...line, writers: [] },
      {
        ...line,
        writers: [
          { payeeId: "A", shareBps: 10_001 },
          { payeeId: "C", shareBps: -1 },
        ],
      },
      { ...line, netMinor: -1n },
      { ...line, poolBps: 10_001 },
    ];
    for (const bad of broken) expect(() => splitSale({ ...ORDER, lines: [bad] })).toThrow(RangeError);
    expect(() => splitSale({ ...ORDER, processorFeeMinor: -1n })).toThrow(RangeError);
  });
});

describe("any sale", () => {
  const shares = fc
    .array(fc.integer({ min: 1, max: 1000 }), { minLength: 1, maxLength: 6 })
    .map((weights) => {
      const total = weights.reduce((a, b) => a + b, 0);
      const bps = weights.map((weight) => Math.floor((weight * 10_000) / total));
      bps[0] = bps[0]! + 10_000 - bps.reduce((a, b) => a + b, 0);
      return bps.map((shareBps, index) => ({ payeeId: `payee ${index}`, shareBps }));
    });
  const sale: fc.Arbitrary<Sale> = fc.record({
    libraryId: fc.constant("library"),
    taxCountry: fc.constant("GB"),
    platformFeeBps: fc.integer({ min: 0, max: 5000 }),
    processorFeeMinor: fc.bigInt(0n, 2000n),
    lines: fc.array(
      fc.record({
        orderLineId: fc.uuid(),
        netMinor: fc.bigInt(1n, 10n ** 7n),
        taxMinor: fc.bigInt(0n, 10n ** 6n),
        poolBps: fc.integer({ min: 0, max: 10_000 }),
        writers: shares,
      }),
      { minLength: 1, maxLength: 5 },
    ),
  });

  it("loses and makes no unit: each line's parts are its gross, and the fees are the processor's", () => {
    fc.assert(
      fc.property(sale, (order) => {
        const { lines } = splitSale(order);
        for (const [i, line] of lines.entries())
          expect(grossOf(line)).toBe(order.lines[i]!.netMinor + order.lines[i]!.taxMinor);
        expect(sum(lines.map(({ processorFeeMinor }) => processorFeeMinor))).toBe(order.processorFeeMinor);
      }),
    );
  });

  it("pays every writer within one unit of the exact share of the pool, and the pool within half a unit", () => {
    fc.assert(
      fc.property(sale, (order) => {
        for (const [i, line] of splitSale(order).lines.entries()) {
          const [pool, receipts] = [poolOf(line), receiptsOf(line)];
          for (const { shareBps, amountMinor } of line.writers) {
            const error = amountMinor * 10_000n - pool * BigInt(shareBps);
            expect(amountMinor >= 0n && error < 10_000n && error > -10_000n).toBe(true);
          }
          if (receipts <= 0n) expect(pool).toBe(0n);
          else {
            const twice = 2n * (pool * 10_000n - receipts * BigInt(order.lines[i]!.poolBps));
            expect(twice <= 10_000n && twice > -10_000n).toBe(true);
          }
        }
      }),
    );
  });

  it("a full refund is the exact negation of the capture but for the processor's fee", () => {
    fc.assert(
      fc.property(sale, (order) => {
        const split = splitSale(order);
        const back = split.lines.flatMap((line) =>
          takeBackLegs(split, takeBack(line, grossOf(line)).taken, "held"),
        );
        const rest = netByAccount([...captureLegs(split), ...back]);
        const fee = order.processorFeeMinor;
        expect(rest.map(({ kind, debitMinor }) => [kind, debitMinor]).sort()).toEqual(
          fee === 0n
            ? []
            : [
                ["processor clearing", -fee],
                ["processor fee cost", fee],
              ],
        );
      }),
    );
  });

  it("refunds in any number of steps take back exactly the line, never more than a part holds", () => {
    fc.assert(
      fc.property(
        sale,
        fc.array(fc.double({ min: 0, max: 1, noNaN: true }), { maxLength: 6 }),
        (order, steps) => {
          for (const line of splitSale(order).lines) {
            if (line.libraryMinor < 0n) continue;
            let left = line;
            const taken: LineSplit[] = [];
            for (const step of [...steps, 1]) {
              const amount = step === 1 ? grossOf(left) : BigInt(Math.floor(Number(grossOf(left)) * step));
              const result = takeBack(left, amount);
              expect(grossOf(result.taken)).toBe(amount);
              for (const part of [
                result.left.taxMinor,
                result.left.libraryMinor,
                result.left.platformFeeMinor,
              ])
                expect(part >= 0n).toBe(true);
              for (const { amountMinor } of result.left.writers) expect(amountMinor >= 0n).toBe(true);
              taken.push(result.taken);
              left = result.left;
            }
            expect(grossOf(left)).toBe(0n);
            for (const [i, { amountMinor }] of line.writers.entries())
              expect(sum(taken.map((part) => part.writers[i]!.amountMinor))).toBe(amountMinor);
            expect(() => takeBack(left, 1n)).toThrow(RangeError);
          }
        },
      ),
    );
  });
});
