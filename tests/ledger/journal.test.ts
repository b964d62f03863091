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
  recoupable,
  recoupmentToReverse,
  splitSale,
  takeBack,
} from "@/lib/ledger/split";
import { minor, ORDER, show, sum } from "./invented-sale";

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

describe("the worked sale's journal, to the penny", () => {
  const sale = splitSale(ORDER);
  const [line1, line2] = sale.lines as [LineSplit, LineSplit];

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
