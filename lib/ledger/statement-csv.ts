import { decimalOf } from "@/lib/kernel/money";
import type { Statement } from "./get-statement";

const HEAD = [
  "Currency",
  "Date",
  "Posted",
  "Kind",
  "Order",
  "Licence",
  "Cue",
  "Scope",
  "Net sale",
  "Platform fee",
  "Card fee",
  "Library receipts",
  "Pool %",
  "Share %",
  "Amount",
  "Balance",
  "Reason",
];

/**
 * One cell (RFC 4180 quoting). Text that a spreadsheet would take for a formula gets an apostrophe in front; plain numbers
 * stay numbers.
 */
export function csvCell(value: string): string {
  const isNumber = /^-?\d+(\.\d+)?$/.test(value);
  const safe = !isNumber && /^\s*[=+\-@|%]|^[\t\r\n]/.test(value) ? `'${value}` : value;
  return /[",\r\n]/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe;
}

const percent = (bps: number) => (bps / 100).toFixed(2);

function rowsOf(statement: Statement): string[][] {
  const { currency } = statement;
  const money = (minor: bigint) => decimalOf({ minor, currency });
  const balanceRow = (kind: string, minor: bigint) => [
    currency,
    "",
    "",
    kind,
    ...Array.from({ length: 11 }, () => ""),
    money(minor),
    "",
  ];
  const lines = statement.lines.map((line) => {
    const { sale } = line;
    return [
      currency,
      line.eventAt.toISOString().slice(0, 10),
      line.postedAt.toISOString(),
      line.name,
      sale?.orderNumber ?? "",
      sale?.licenceNumber ?? "",
      sale?.cueTitle ?? "",
      sale?.scopeWords ?? "",
      sale ? money(sale.netMinor) : "",
      sale ? money(sale.platformFeeMinor) : "",
      sale ? money(sale.processorFeeMinor) : "",
      sale ? money(sale.receiptsMinor) : "",
      sale ? percent(sale.poolBps) : "",
      sale?.shareBps ? percent(sale.shareBps) : "",
      money(line.amountMinor),
      money(line.balanceMinor),
      line.reason,
    ];
  });
  return [
    balanceRow("Opening balance", statement.openingMinor),
    ...lines,
    balanceRow("Closing balance", statement.closingMinor),
  ];
}

/** A statement as comma-separated values, with a byte-order mark so that spreadsheets read the titles right. */
export function statementCsv(statements: readonly Statement[]): string {
  const rows = [HEAD, ...statements.flatMap(rowsOf)];
  return `\uFEFF${rows.map((row) => row.map(csvCell).join(",")).join("\r\n")}\r\n`;
}
