import type { Sale } from "@/lib/ledger/split";

export const minor = (amount: string) => BigInt(amount.replace(".", ""));
export const sum = (values: readonly bigint[]) => values.reduce((a, b) => a + b, 0n);
export const show = (value: bigint) => {
  const digits = (value < 0n ? -value : value).toString().padStart(3, "0");
  return `${value < 0n ? "-" : ""}${digits.slice(0, -2)}.${digits.slice(-2)}`;
};

/** Order O-1041 of the demonstration world: two cues of one library, sold on 14 March 2026. */
export const ORDER: Sale = {
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
