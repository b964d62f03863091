import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  type AccountRef,
  captureLegs,
  composerAccount,
  disputeChargeLegs,
  type Leg,
  libraryAccount,
  netByAccount,
  payoutLegs,
  recoupmentLegs,
  recoupmentReversalLegs,
  releaseLegs,
  reverseLegs,
  settlementLegs,
  takeBackLegs,
} from "@/lib/ledger/legs";
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

const minor = (amount: string) => BigInt(amount.replace(".", ""));
const sum = (values: readonly bigint[]) => values.reduce((a, b) => a + b, 0n);
const show = (value: bigint) => {
  const digits = (value < 0n ? -value : value).toString().padStart(3, "0");
  return `${value < 0n ? "-" : ""}${digits.slice(0, -2)}.${digits.slice(-2)}`;
};

/** Order O-1041 of the demonstration world: two cues of one library, sold on 14 March 2026. */
const ORDER: Sale = {
  libraryId: "SM",
  taxCountry: "GB",
  platformFeeBps: 1500,
  processorFeeMinor: minor("6.77"),
  lines: [
    {
      orderLineId: "line 1",
      netMinor: minor("240.00"),
      taxMinor: minor("48.00"),
      poolBps: 5000,
      writers: [
        { payeeId: "A", shareBps: 6000 },
        { payeeId: "C", shareBps: 4000 },
      ],
    },
    {
      orderLineId: "line 2",
      netMinor: minor("125.00"),
      taxMinor: minor("25.00"),
      poolBps: 5000,
      writers: [
        { payeeId: "A", shareBps: 3334 },
        { payeeId: "C", shareBps: 3333 },
        { payeeId: "E", shareBps: 3333 },
      ],
    },
  ],
};

class Books {
  readonly balances = new Map<string, bigint>();
  post(legs: readonly Leg[]): Record<string, string> {
    const nets = netByAccount(legs);
    expect(sum(nets.map(({ debitMinor }) => debitMinor))).toBe(0n);
    for (const leg of legs) expect(leg.amountMinor > 0n).toBe(true);
    for (const { debitMinor, ...account } of nets)
      this.balances.set(nameOf(account), (this.balances.get(nameOf(account)) ?? 0n) + debitMinor);
    return Object.fromEntries(
      nets.map((net) => [
        nameOf(net),
        `${net.debitMinor > 0n ? "Dr" : "Cr"} ${show(net.debitMinor).replace("-", "")}`,
      ]),
    );
  }
  /** Debit balances positive, as for bank; payables are shown as what is owed. */
  debit(account: string): string {
    return show(this.balances.get(account) ?? 0n);
  }
  owed(account: string): string {
    return show(-(this.balances.get(account) ?? 0n));
  }
}

function nameOf({ kind, holderId }: AccountRef): string {
  return holderId === "-" ? kind : `${kind} ${holderId}`;
}

describe("the worked sale, to the penny", () => {
  const sale = splitSale(ORDER);
  const [line1, line2] = sale.lines as [LineSplit, LineSplit];
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

  it("journal entries 1 to 9 and every balance after them", () => {
    const books = new Books();
    // 1: capture, 14 March
    expect(books.post(captureLegs(sale))).toEqual({
      "processor clearing": "Dr 431.23",
      "processor fee cost": "Dr 6.77",
      "vat payable GB": "Cr 73.00",
      "platform fee income": "Cr 54.75",
      "processor fee recharged": "Cr 6.77",
      "library held SM": "Cr 151.73",
      "composer held A": "Cr 77.20",
      "composer held C": "Cr 57.23",
      "composer held E": "Cr 17.32",
    });
    // 2: settlement, 17 March
    expect(books.post(settlementLegs(minor("431.23")))).toEqual({
      bank: "Dr 431.23",
      "processor clearing": "Cr 431.23",
    });
    // 3: the hold ends, 28 March
    expect(books.post(sale.lines.flatMap((line) => releaseLegs(sale, line)))).toEqual({
      "library held SM": "Dr 151.73",
      "composer held A": "Dr 77.20",
      "composer held C": "Dr 57.23",
      "composer held E": "Dr 17.32",
      "library available SM": "Cr 151.73",
      "composer available A": "Cr 77.20",
      "composer available C": "Cr 57.23",
      "composer available E": "Cr 17.32",
    });
    // 4: C's advance of 45.00 is recouped
    const recouped = recoupable(minor("45.00"), minor("57.23"));
    expect(books.post(recoupmentLegs("SM", "C", recouped))).toEqual({
      "composer available C": "Dr 45.00",
      "library available SM": "Cr 45.00",
    });
    // 5: payout, 31 March, threshold 25.00
    const payees = [
      libraryAccount("SM", "available"),
      ...["A", "C", "E"].map((p) => composerAccount(p, "available")),
    ];
    const due = (payee: AccountRef) => payoutOf(-(books.balances.get(nameOf(payee)) ?? 0n), minor("25.00"));
    expect(books.post(payees.flatMap((payee) => payoutLegs(payee, due(payee))))).toEqual({
      "library available SM": "Dr 196.73",
      "composer available A": "Dr 77.20",
      bank: "Cr 273.93",
    });
    expect([books.owed("composer available C"), books.owed("composer available E")]).toEqual([
      "12.23",
      "17.32",
    ]);
    expect([books.debit("bank"), books.owed("vat payable GB"), books.owed("platform fee income")]).toEqual([
      "157.30",
      "73.00",
      "54.75",
    ]);

    // 6: refund of line 2, 2 April
    const refund = takeBack(line2, minor("150.00"));
    expect(books.post(takeBackLegs(sale, refund.taken, "available"))).toEqual({
      "vat payable GB": "Dr 25.00",
      "platform fee income": "Dr 18.75",
      "processor fee recharged": "Dr 2.32",
      "library available SM": "Dr 51.96",
      "composer available A": "Dr 17.33",
      "composer available C": "Dr 17.32",
      "composer available E": "Dr 17.32",
      "processor clearing": "Cr 150.00",
    });
    // 7: chargeback of line 1, 20 April
    const chargeback = takeBack(line1, grossOf(line1)).taken;
    const chargebackLegs = takeBackLegs(sale, chargeback, "available");
    expect(books.post(chargebackLegs)).toEqual({
      "vat payable GB": "Dr 48.00",
      "platform fee income": "Dr 36.00",
      "processor fee recharged": "Dr 4.45",
      "library available SM": "Dr 99.77",
      "composer available A": "Dr 59.87",
      "composer available C": "Dr 39.91",
      "processor clearing": "Cr 288.00",
    });
    expect(books.owed("composer available C")).toBe("-45.00");
    // 8: the recoupment is put back as far as C is below nothing
    const back = recoupmentToReverse(recouped, -(books.balances.get("composer available C") ?? 0n));
    const backLegs = recoupmentReversalLegs("SM", "C", back);
    expect(books.post(backLegs)).toEqual({
      "library available SM": "Dr 45.00",
      "composer available C": "Cr 45.00",
    });
    // 9: the dispute's charge
    expect(books.post(disputeChargeLegs(minor("15.00")))).toEqual({
      "dispute cost": "Dr 15.00",
      "processor clearing": "Cr 15.00",
    });
    const owed = (account: string) => books.owed(account);
    expect(["composer available A", "composer available C", "composer available E"].map(owed)).toEqual([
      "-77.20",
      "0.00",
      "0.00",
    ]);
    expect(owed("library available SM")).toBe("-196.73");
    expect(["vat payable GB", "platform fee income", "processor fee recharged"].map(owed)).toEqual([
      "0.00",
      "0.00",
      "0.00",
    ]);
    expect(books.debit("processor clearing")).toBe("-453.00");
    books.post(settlementLegs(minor("453.00")).flatMap((leg) => reverseLegs([leg])));
    expect(books.debit("bank")).toBe("-295.70");
    expect(minor("295.70")).toBe(minor("273.93") + minor("6.77") + minor("15.00"));

    // Were the dispute won, entries 7 and 8 are turned round.
    books.post(reverseLegs([...chargebackLegs, ...backLegs]));
    expect(["composer available A", "composer available C", "library available SM"].map(owed)).toEqual([
      "-17.33",
      "-5.09",
      "-51.96",
    ]);
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
