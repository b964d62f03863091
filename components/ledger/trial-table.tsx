import { Table } from "@/components/ui/table";
import { formatMoney } from "@/lib/kernel/money";
import type { TrialBalance, TrialRow } from "@/lib/ledger";

/** "VAT payable, GB" */
export const accountInWords = (name: string) =>
  name.startsWith("vat ") ? `VAT ${name.slice(4)}` : name.charAt(0).toUpperCase() + name.slice(1);

const nameOf = ({ kind, holder }: TrialRow) => {
  const name = accountInWords(kind);
  return holder === null ? name : `${name}, ${holder}`;
};

/** Accounts of one currency with a balance; those at nothing are left out. */
export function TrialTable({ balance, isWhole }: { balance: TrialBalance; isWhole: boolean }) {
  const money = (minor: bigint) => (minor === 0n ? "" : formatMoney({ minor, currency: balance.currency }));
  return (
    <Table
      caption={`Accounts in ${balance.currency}`}
      columns={[
        { key: "account", head: "Account", cell: nameOf },
        { key: "debit", head: "Debit", cell: (row) => money(row.debitMinor), figures: true },
        { key: "credit", head: "Credit", cell: (row) => money(row.creditMinor), figures: true },
      ]}
      rowKey={nameOf}
      rows={balance.rows}
      sentence={(row) => (
        <>
          {nameOf(row)}: <b className="font-strong">{money(row.debitMinor) || money(row.creditMinor)}</b>{" "}
          {row.debitMinor > 0n ? "debit" : "credit"}
        </>
      )}
      {...(isWhole ? { foot: ["Together", money(balance.debitMinor), money(balance.creditMinor)] } : {})}
    />
  );
}
