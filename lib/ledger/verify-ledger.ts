import { type SQL, sql } from "drizzle-orm";
import { z } from "zod";
import type { Reader } from "@/db/client";
import { Forbidden } from "@/lib/kernel/errors";
import { query } from "@/lib/kernel/verb";

/** Every invariant that stored rows can show, as a query for the rows that break it. */
const BREACHES: ReadonlyArray<readonly [invariant: string, query: SQL]> = [
  [
    "LEDGER-1 an entry has legs, numbered from 1, each above 0 between two accounts",
    sql`select e.id as id from ledger_entries e left join ledger_transfers t on t.entry_id = e.id
      group by e.id
      having count(t.id) = 0 or max(t.number) <> count(t.id) or min(t.number) <> 1
        or min(t.amount_minor) <= 0 or sum(t.debit_account_id = t.credit_account_id) > 0`,
  ],
  [
    "LEDGER-1 in each currency the accounts sum to nothing",
    sql`select currency as id from (
        select a.currency, coalesce((select sum(amount_minor) from ledger_transfers where credit_account_id = a.id), 0)
          - coalesce((select sum(amount_minor) from ledger_transfers where debit_account_id = a.id), 0) as owed
        from ledger_accounts a) balances
      group by currency having sum(owed) <> 0`,
  ],
  [
    "LEDGER-2 a leg, its entry and both its accounts have one currency",
    sql`select t.id as id from ledger_transfers t
      left join ledger_entries e on e.id = t.entry_id
      left join ledger_accounts d on d.id = t.debit_account_id
      left join ledger_accounts c on c.id = t.credit_account_id
      where e.id is null or d.id is null or c.id is null
        or t.currency <> e.currency or t.currency <> d.currency or t.currency <> c.currency`,
  ],
  [
    "LEDGER-3 a reversal turns round exactly the entry it points to",
    sql`select r.id as id from ledger_entries r left join ledger_entries o on o.id = r.reverses
      where r.code = 'reversal' and (o.id is null or exists (
        select 1 from ledger_transfers x left join ledger_transfers y on y.entry_id = r.id and y.number = x.number
          and y.debit_account_id = x.credit_account_id and y.credit_account_id = x.debit_account_id
          and y.amount_minor = x.amount_minor
        where x.entry_id = o.id and y.id is null)
        or (select count(*) from ledger_transfers where entry_id = r.id)
          <> (select count(*) from ledger_transfers where entry_id = o.id))`,
  ],
  [
    "LEDGER-7 a leg of a line names the licence's family, and no line gives back more than it brought",
    sql`select t.order_line_id as id from ledger_transfers t
      join ledger_accounts d on d.id = t.debit_account_id join ledger_accounts c on c.id = t.credit_account_id
      where t.order_line_id is not null
      group by t.order_line_id
      having min(t.family_id is not null) = 0 or sum(case
        when d.kind = 'processor clearing' then t.amount_minor
        when c.kind = 'processor clearing' then -t.amount_minor else 0 end) < 0`,
  ],
  [
    "LEDGER-8 what the processor took for a payment is recharged to its lines, to the unit",
    sql`select e.id as id from ledger_entries e join ledger_transfers t on t.entry_id = e.id
      join ledger_accounts d on d.id = t.debit_account_id join ledger_accounts c on c.id = t.credit_account_id
      where e.code = 'capture' group by e.id
      having sum(case when d.kind = 'processor fee cost' then t.amount_minor else 0 end)
        <> sum(case when c.kind = 'processor fee recharged' then t.amount_minor else 0 end)`,
  ],
  [
    "LEDGER-9 a line that was released has nothing held",
    sql`select r.order_line_id as id
      from (select distinct t.order_line_id from ledger_transfers t join ledger_entries e on e.id = t.entry_id
        where e.code = 'hold ends') r
      join ledger_transfers t on t.order_line_id = r.order_line_id
      join ledger_accounts a on a.id in (t.debit_account_id, t.credit_account_id) and a.kind in ('library held', 'composer held')
      group by r.order_line_id, a.id
      having sum(case when t.credit_account_id = a.id then t.amount_minor else -t.amount_minor end) <> 0`,
  ],
  [
    "LEDGER-10 no more of an advance has come back than was paid, and never less than nothing",
    sql`select concat(back.person_id, ' ', back.library_id) as id
      from (select c.holder_id as person_id, l.holder_id as library_id, c.currency as currency,
          sum(case when t.debit_account_id = c.id then t.amount_minor else -t.amount_minor end) as amount
        from ledger_transfers t
        join ledger_accounts c on c.kind = 'composer available' and c.id in (t.debit_account_id, t.credit_account_id)
        join ledger_accounts l on l.kind = 'library available' and l.id in (t.debit_account_id, t.credit_account_id)
        group by c.holder_id, l.holder_id, c.currency) back
      left join (select person_id, library_id, currency, sum(amount_minor) as amount from advances
        group by person_id, library_id, currency) paid
        on paid.person_id = back.person_id and paid.library_id = back.library_id and paid.currency = back.currency
      where back.amount < 0 or back.amount > coalesce(paid.amount, 0)`,
  ],
  [
    "LEDGER-11 a paid payout is one entry of its amount, from its own account to the bank",
    sql`select p.id as id from payouts p
      left join ledger_entries e on e.id = p.entry_id and e.code = 'payout' and e.library_id = p.library_id
      left join ledger_transfers t on t.entry_id = e.id
      left join ledger_accounts d on d.id = t.debit_account_id and d.holder_id = p.holder_id
      left join ledger_accounts c on c.id = t.credit_account_id and c.kind = 'bank'
      where p.state = 'paid' group by p.id, p.amount_minor
      having count(t.id) <> 1 or count(d.id) <> 1 or count(c.id) <> 1 or sum(t.amount_minor) <> p.amount_minor`,
  ],
  [
    "LEDGER-11 every payout entry belongs to one paid payout",
    sql`select e.id as id from ledger_entries e left join payouts p on p.entry_id = e.id and p.state = 'paid'
      where e.code = 'payout' group by e.id having count(p.id) <> 1`,
  ],
  [
    "LEDGER-12 a run whose money may move was released and confirmed by two persons",
    sql`select r.id as id from payout_runs r where
      (r.state = 'confirmed' and (r.released_by is null or r.confirmed_by is null or r.released_by = r.confirmed_by))
      or (r.state <> 'confirmed' and exists (
        select 1 from payouts p where p.run_id = r.id and p.state in ('sending', 'paid', 'failed')))`,
  ],
];

export interface Breach {
  invariant: string;
  /** A few of the rows that break it. */
  rows: string[];
}

/** Checks the whole journal. An empty answer is a sound one. */
export async function verifyLedger(reader: Reader): Promise<Breach[]> {
  const breaches: Breach[] = [];
  for (const [invariant, breach] of BREACHES) {
    const [rows] = (await reader.execute(sql`${breach} limit 5`)) as unknown as [{ id: string }[]];
    if (rows.length > 0) breaches.push({ invariant, rows: rows.map(({ id }) => id) });
  }
  return breaches;
}

/** The same for a job, and for the accountant's page. */
export const checkLedger = query({
  name: "ledger.checkLedger",
  who: ["system", "accountant"],
  input: z.object({}),
  authorise: async ({ actor }) => {
    if (actor.kind === "accountant" && actor.libraryId !== null)
      throw new Forbidden("The whole journal is the marketplace accountant's.");
    return null;
  },
  run: async ({ reader }) => verifyLedger(reader),
});
