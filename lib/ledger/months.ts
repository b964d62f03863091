import { type CivilDate, civilDateIn, formatCivilDate, startOfDay } from "@/lib/kernel/calendar";
import { JOURNAL_ZONE } from "./states";

/** "2026-03" */
export type Month = string;

export function monthOf(instant: Date): Month {
  return civilDateIn(instant, JOURNAL_ZONE).slice(0, 7);
}

export function nextMonth(month: Month): Month {
  const [year = 0, number = 0] = month.split("-").map(Number);
  return new Date(Date.UTC(year, number, 1)).toISOString().slice(0, 7);
}

/** The instants a month lies between; the second is not part of it. */
export function boundsOf(month: Month): { from: Date; before: Date } {
  const first = (of: Month): CivilDate => `${of}-01`;
  return {
    from: startOfDay(first(month), JOURNAL_ZONE),
    before: startOfDay(first(nextMonth(month)), JOURNAL_ZONE),
  };
}

/** "March 2026" */
export function monthInWords(month: Month): string {
  return formatCivilDate(`${month}-01`).slice(2);
}
