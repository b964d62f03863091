import { formatMoney } from "@/lib/kernel/money";
import type { Amount } from "./prop-types";

/** "18 May 2026 at 09:14 UTC", "27 May 2026 at 17:00 BST". */
export function timeInWords(instant: string, zone: string): string {
  const parts = new Intl.DateTimeFormat("en-GB", {
    timeZone: zone,
    day: "numeric",
    month: "long",
    year: "numeric",
    hour: "2-digit",
    minute: "2-digit",
    hourCycle: "h23",
    timeZoneName: "short",
  }).formatToParts(new Date(instant));
  const part = (type: Intl.DateTimeFormatPartTypes) => parts.find((one) => one.type === type)?.value ?? "";
  return `${part("day")}\u00a0${part("month")} ${part("year")} at ${part("hour")}:${part("minute")}\u00a0${part("timeZoneName")}`;
}

export function dateInWords(instant: string, zone: string): string {
  return new Intl.DateTimeFormat("en-GB", {
    timeZone: zone,
    day: "numeric",
    month: "long",
    year: "numeric",
  }).format(new Date(instant));
}

export function amountInWords({ minor, currency }: Amount): string {
  return formatMoney({ minor: BigInt(minor), currency });
}

export function sizeInWords(bytes: number): string {
  if (bytes < 1000) return `${bytes}\u00a0B`;
  if (bytes < 1_000_000) return `${(bytes / 1000).toFixed(1)}\u00a0kB`;
  return `${(bytes / 1_000_000).toFixed(1)}\u00a0MB`;
}

export function countInWords(count: number, one: string, many: string): string {
  return `${count}\u00a0${count === 1 ? one : many}`;
}

/** "Dov", "Dov and Ilse", "Dov, Ilse and Farrukh". */
export function listInWords(names: readonly string[]): string {
  if (names.length < 2) return names.join("");
  return `${names.slice(0, -1).join(", ")} and ${names.at(-1)}`;
}
