import type { Reader } from "@/db/client";
import { minorUnits } from "@/lib/kernel/currencies";
import { readSettings } from "@/lib/kernel/settings";
import { HOLD_DAYS, PAYOUT_THRESHOLD, PLATFORM_FEE_BPS } from "./states";

const DEFAULTS = {
  "ledger.holdDays": HOLD_DAYS,
  "ledger.platformFeeBps": PLATFORM_FEE_BPS,
  "ledger.payoutThreshold": PAYOUT_THRESHOLD,
} as const;

export interface LedgerSettings {
  holdDays: number;
  platformFeeBps: number;
  thresholdMinor: (currency: string) => bigint;
}

/** What an administrator has set, else the defaults of states.ts. */
export async function ledgerSettings(reader: Reader): Promise<LedgerSettings> {
  const set = await readSettings(reader, Object.keys(DEFAULTS));
  const read = (name: keyof typeof DEFAULTS): number => {
    const value = set.get(name);
    return typeof value === "number" ? value : DEFAULTS[name];
  };
  const threshold = read("ledger.payoutThreshold");
  return {
    holdDays: read("ledger.holdDays"),
    platformFeeBps: read("ledger.platformFeeBps"),
    thresholdMinor: (currency) => BigInt(threshold) * 10n ** BigInt(minorUnits(currency)),
  };
}
