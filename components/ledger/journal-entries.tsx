import { fmt } from "@/components/ui/format";
import { Section, Sentence } from "@/components/ui/sentence";
import { Table } from "@/components/ui/table";
import { formatMoney } from "@/lib/kernel/money";
import type { JournalEntry } from "@/lib/ledger";
import { accountInWords } from "./trial-table";

type Net = JournalEntry["nets"][number];

/** Each entry with one net debit or credit an account, debits first. */
export function JournalEntries({ entries }: { entries: readonly JournalEntry[] }) {
  return entries.map((entry) => {
    const money = (minor: bigint) => formatMoney({ minor, currency: entry.currency });
    const size = ({ debitMinor }: Net) => money(debitMinor < 0n ? -debitMinor : debitMinor);
    const nets = [...entry.nets].sort((a, b) => Number(b.debitMinor > 0n) - Number(a.debitMinor > 0n));
    return (
      <Section
        className="mt-8"
        head={`${fmt.date(entry.eventAt)}: ${entry.name}`}
        key={entry.entryId}
        note={entry.currency}
      >
        <Sentence className="mb-2">{entry.words}</Sentence>
        <Table
          caption={`${entry.name}, posted ${fmt.dateTime(entry.postedAt)}, ${entry.entryId}`}
          captionHidden
          columns={[
            { key: "account", head: "Account", cell: (net) => accountInWords(net.account) },
            {
              key: "debit",
              head: "Debit",
              cell: (net) => (net.debitMinor > 0n ? size(net) : ""),
              figures: true,
            },
            {
              key: "credit",
              head: "Credit",
              cell: (net) => (net.debitMinor < 0n ? size(net) : ""),
              figures: true,
            },
          ]}
          rowKey={(net) => net.account}
          rows={nets}
          sentence={(net) => (
            <>
              {accountInWords(net.account)}, {net.debitMinor > 0n ? "debit" : "credit"}:{" "}
              <b className="font-strong">{size(net)}</b>
            </>
          )}
        />
        <Sentence className="mt-1" size="small" soft>
          Posted {fmt.dateTime(entry.postedAt)} as {entry.entryId}.
        </Sentence>
      </Section>
    );
  });
}
