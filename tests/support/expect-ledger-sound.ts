import { expect } from "vitest";
import { db } from "@/db/client";
import { verifyLedger } from "@/lib/ledger";

/** At the end of every test of money: each invariant that the stored rows can show. */
export async function expectLedgerSound(): Promise<void> {
  expect(await verifyLedger(db())).toEqual([]);
}
