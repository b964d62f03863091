import { desc, eq, inArray } from "drizzle-orm";
import { z } from "zod";
import type { Reader } from "@/db/client";
import { payees, payoutRuns, payouts } from "@/db/schema/ledger";
import { peopleByIds } from "@/lib/accounts";
import type { ActorOf } from "@/lib/kernel/actor";
import { NotFound } from "@/lib/kernel/errors";
import { query } from "@/lib/kernel/verb";
import { type AccountLine, accountLines, type Holder, holderBalances } from "./account-lines";
import { type StatementLine, statementLines } from "./get-statement";
import { libraryNames } from "./library-names";
import { availableBalances } from "./payout-run";
import type { PayoutState, RunState } from "./states";

export interface PayoutOfRun {
  payoutId: string;
  kind: "library" | "person";
  name: string;
  amountMinor: bigint;
  state: PayoutState;
  reason: string;
  paidAt: Date | null;
  bankLast4: string | null;
}

export interface PayoutRunView {
  runId: string;
  libraryName: string;
  currency: string;
  state: RunState;
  preparedAt: Date;
  preparedBy: string;
  released: { by: string; at: Date } | null;
  confirmed: { by: string; at: Date } | null;
  payouts: PayoutOfRun[];
}

export interface DueNow {
  currency: string;
  payees: { kind: "library" | "person"; name: string; balanceMinor: bigint }[];
}

export interface Payouts {
  runs: PayoutRunView[];
  /** What is available now and in no confirmed run; empty for the marketplace, whose libraries prepare their own. */
  due: DueNow[];
}

type PayoutActor = ActorOf<"owner" | "staff" | "accountant" | "auditor">;

/** The library whose payouts an actor may see; null for all of them. */
function scopeOf(actor: PayoutActor): string | null {
  if (actor.kind === "staff" && !actor.granted.includes("payouts")) throw new NotFound();
  if (actor.libraryId === null && actor.kind !== "accountant") throw new NotFound();
  return actor.libraryId;
}

type RunRow = typeof payoutRuns.$inferSelect;
type PayoutRow = typeof payouts.$inferSelect;

async function namesFor(reader: Reader, runs: readonly RunRow[], rows: readonly PayoutRow[]) {
  const persons = [
    ...rows.filter(({ kind }) => kind === "person").map(({ holderId }) => holderId),
    ...runs.flatMap((run) => [run.preparedBy, run.releasedBy, run.confirmedBy].filter((id) => id !== null)),
  ];
  const people = await peopleByIds(reader, persons);
  const libraries = await libraryNames(
    reader,
    runs.map(({ libraryId }) => libraryId),
  );
  return {
    person: (id: string | null) => (id ? (people.get(id)?.name ?? "somebody") : "somebody"),
    library: (id: string) => libraries.get(id) ?? "a library",
  };
}

type Names = Awaited<ReturnType<typeof namesFor>>;
const RUNS_SHOWN = 24;

async function payeeBanks(reader: Reader, rows: readonly PayoutRow[]): Promise<Map<string, string | null>> {
  const ids = rows.flatMap(({ payeeId }) => payeeId ?? []);
  if (ids.length === 0) return new Map();
  const found = await reader
    .select({ id: payees.id, last4: payees.bankLast4 })
    .from(payees)
    .where(inArray(payees.id, ids));
  return new Map(found.map(({ id, last4 }) => [id, last4]));
}

function payoutView(row: PayoutRow, names: Names, banks: ReadonlyMap<string, string | null>): PayoutOfRun {
  return {
    payoutId: row.id,
    kind: row.kind === "library" ? "library" : "person",
    name: row.kind === "library" ? names.library(row.holderId) : names.person(row.holderId),
    amountMinor: row.amountMinor,
    state: row.state as PayoutState,
    reason: row.reason,
    paidAt: row.paidAt,
    bankLast4: row.payeeId ? (banks.get(row.payeeId) ?? null) : null,
  };
}

function runView(
  run: RunRow,
  rows: readonly PayoutRow[],
  names: Names,
  banks: ReadonlyMap<string, string | null>,
): PayoutRunView {
  const step = (by: string | null, at: Date | null) => (by && at ? { by: names.person(by), at } : null);
  return {
    runId: run.id,
    libraryName: names.library(run.libraryId),
    currency: run.currency,
    state: run.state as RunState,
    preparedAt: run.preparedAt,
    preparedBy: names.person(run.preparedBy),
    released: step(run.releasedBy, run.releasedAt),
    confirmed: step(run.confirmedBy, run.confirmedAt),
    payouts: rows.filter(({ runId }) => runId === run.id).map((row) => payoutView(row, names, banks)),
  };
}

async function dueNow(reader: Reader, libraryId: string): Promise<DueNow[]> {
  const holder: Holder = { kind: "library", holderId: libraryId, libraryId };
  const due: DueNow[] = [];
  for (const { currency } of await holderBalances(reader, holder, {})) {
    const rows = (await availableBalances(reader, libraryId, currency)).filter(
      (one) => one.balanceMinor !== 0n,
    );
    const people = await peopleByIds(
      reader,
      rows.filter(({ kind }) => kind === "person").map(({ holderId }) => holderId),
    );
    const libraries = await libraryNames(reader, [libraryId]);
    due.push({
      currency,
      payees: rows.map(({ kind, holderId, balanceMinor }) => ({
        kind,
        name: (kind === "library" ? libraries.get(holderId) : people.get(holderId)?.name) ?? "a payee",
        balanceMinor,
      })),
    });
  }
  return due;
}

/** Payout runs, newest first, with what each payee got or why not; and what is due now. */
export const getPayouts = query({
  name: "ledger.getPayouts",
  who: ["owner", "staff", "accountant", "auditor"],
  input: z.object({}),
  authorise: async ({ actor }) => ({ libraryId: scopeOf(actor) }),
  run: async ({ reader, subject: { libraryId } }): Promise<Payouts> => {
    const runs = await reader
      .select()
      .from(payoutRuns)
      .where(libraryId === null ? undefined : eq(payoutRuns.libraryId, libraryId))
      .orderBy(desc(payoutRuns.preparedAt), desc(payoutRuns.id))
      .limit(RUNS_SHOWN);
    const rows = runs.length
      ? await reader
          .select()
          .from(payouts)
          .where(
            inArray(
              payouts.runId,
              runs.map(({ id }) => id),
            ),
          )
          .orderBy(payouts.kind, desc(payouts.amountMinor))
      : [];
    const names = await namesFor(reader, runs, rows);
    const banks = await payeeBanks(reader, rows);
    return {
      runs: runs.map((run) => runView(run, rows, names, banks)),
      due: libraryId === null ? [] : await dueNow(reader, libraryId),
    };
  },
});

export interface PayoutView extends PayoutOfRun {
  currency: string;
  libraryName: string;
  run: Omit<PayoutRunView, "payouts">;
  transferId: string | null;
  entryId: string | null;
  /** What was available before the first line: the rest of an earlier payout, or what was carried forward with it. */
  openingMinor: bigint;
  lines: StatementLine[];
  /** What became available after it was prepared, and waits for the next. */
  leftMinor: bigint;
}

const isPayoutOf = (line: AccountLine, payoutId: string) =>
  line.code === "payout" && line.facts.payoutId === payoutId;

/** The lines between the payout before and this one. A payout that was not paid shows what it was prepared from. */
function behindPayout(moved: readonly AccountLine[], payoutId: string) {
  const paidAt = moved.findIndex((line) => isPayoutOf(line, payoutId));
  const until = paidAt === -1 ? moved.length : paidAt;
  const before = moved.slice(0, until);
  const start = before.findLastIndex(({ code }) => code === "payout") + 1;
  const opening = before.slice(0, start).reduce((sum, line) => sum + line.availableMinor, 0n);
  return { opening, lines: before.slice(start) };
}

/** One payout, opened into the licence lines, refunds and repaid advances that it is the sum of. */
export const getPayout = query({
  name: "ledger.getPayout",
  who: ["owner", "staff", "accountant", "auditor", "composer"],
  input: z.object({ payoutId: z.string().max(40) }),
  authorise: async ({ reader, actor, input }) => {
    const [row] = await reader.select().from(payouts).where(eq(payouts.id, input.payoutId));
    if (!row) throw new NotFound();
    if (actor.kind === "composer") {
      if (row.kind !== "person" || row.holderId !== actor.personId) throw new NotFound();
      return row;
    }
    const libraryId = scopeOf(actor);
    if (libraryId !== null && libraryId !== row.libraryId) throw new NotFound();
    return row;
  },
  run: async ({ reader, subject: row }): Promise<PayoutView> => {
    const [run] = await reader.select().from(payoutRuns).where(eq(payoutRuns.id, row.runId));
    if (!run) throw new NotFound();
    const holder: Holder = {
      kind: row.kind === "library" ? "library" : "composer",
      holderId: row.holderId,
      libraryId: row.libraryId,
    };
    const until = row.paidAt ?? run.preparedAt;
    const moved = (await accountLines(reader, holder, { until })).filter(
      ({ currency, availableMinor }) => currency === row.currency && availableMinor !== 0n,
    );
    const { opening, lines } = behindPayout(moved, row.id);
    const available = lines.map((line) => ({ ...line, heldMinor: 0n }));
    const names = await namesFor(reader, [run], [row]);
    const { payouts: _payouts, ...runOnly } = runView(run, [], names, new Map());
    const total = available.reduce((sum, line) => sum + line.availableMinor, opening);
    return {
      ...payoutView(row, names, await payeeBanks(reader, [row])),
      currency: row.currency,
      libraryName: names.library(row.libraryId),
      run: runOnly,
      transferId: row.processorTransfer,
      entryId: row.entryId,
      openingMinor: opening,
      lines: await statementLines(reader, holder, available, opening, until),
      leftMinor: total - row.amountMinor,
    };
  },
});
