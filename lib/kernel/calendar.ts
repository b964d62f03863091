import type { HolidayCalendar } from "./holidays";

/** A date of the proleptic Gregorian calendar without a zone, "2026-05-18". */
export type CivilDate = string;

const DAY_MS = 86_400_000;
const SECOND_MS = 1_000;
/** No zone has ever been further than this from UTC. */
const WIDEST_OFFSET_MS = 26 * 3_600_000;

function utcMidnight(date: CivilDate): number {
  const match = /^(\d{4})-(\d{2})-(\d{2})$/.exec(date);
  const time = match ? Date.parse(`${date}T00:00:00Z`) : Number.NaN;
  if (!match || Number.isNaN(time) || civil(time) !== date) throw new RangeError(`not a date: ${date}`);
  return time;
}

function civil(utcMs: number): CivilDate {
  return new Date(utcMs).toISOString().slice(0, 10);
}

export function isCivilDate(text: string): boolean {
  const time = /^\d{4}-\d{2}-\d{2}$/.test(text) ? Date.parse(`${text}T00:00:00Z`) : Number.NaN;
  return !Number.isNaN(time) && civil(time) === text;
}

export function addDays(date: CivilDate, days: number): CivilDate {
  return civil(utcMidnight(date) + days * DAY_MS);
}

/** The same day so many months later; where that day is missing, the first of the next month. */
export function anniversary(date: CivilDate, months: number): CivilDate {
  utcMidnight(date);
  const [year = 0, month = 0, day = 0] = date.split("-").map(Number);
  const wanted = Date.UTC(year, month - 1 + months, 1) + (day - 1) * DAY_MS;
  return civil(Math.min(wanted, Date.UTC(year, month + months, 1)));
}

/** The same day so many months later; where that day is missing, the last of that month. */
export function sameDayOrLast(date: CivilDate, months: number): CivilDate {
  const day = anniversary(date, months);
  return day.slice(8) === date.slice(8) ? day : addDays(day, -1);
}

/** 0 is Sunday, 6 is Saturday. */
export function weekday(date: CivilDate): number {
  return new Date(utcMidnight(date)).getUTCDay();
}

/** Recorded stretches in which an internal clock stood still, both days included. */
export interface Pause {
  readonly from: CivilDate;
  readonly through: CivilDate;
}

/** Throws RangeError for a year that the holiday table does not cover. */
export function isBusinessDay(date: CivilDate, calendar: HolidayCalendar): boolean {
  const year = Number(date.slice(0, 4));
  if (year < calendar.firstYear || year > calendar.lastYear)
    throw new RangeError(
      `the ${calendar.name} holiday table covers ${calendar.firstYear} to ${calendar.lastYear}, not ${date}`,
    );
  const day = weekday(date);
  return day !== 0 && day !== 6 && calendar.days[date] === undefined;
}

/** The nth business day after `date`; the day itself is not counted, nor is any day of a pause. */
export function addBusinessDays(
  date: CivilDate,
  businessDays: number,
  calendar: HolidayCalendar,
  pauses: readonly Pause[] = [],
): CivilDate {
  if (!Number.isInteger(businessDays) || businessDays < 1)
    throw new RangeError(`business days must be a whole number from 1, got ${businessDays}`);
  let day = date;
  for (let left = businessDays; left > 0; ) {
    day = addDays(day, 1);
    const paused = pauses.some((pause) => pause.from <= day && day <= pause.through);
    if (!paused && isBusinessDay(day, calendar)) left--;
  }
  return day;
}

const formatters = new Map<string, Intl.DateTimeFormat>();

/** The date that a wall calendar in `zone` (IANA) shows at `instant`. */
export function civilDateIn(instant: Date, zone: string): CivilDate {
  let formatter = formatters.get(zone);
  if (!formatter) {
    formatter = new Intl.DateTimeFormat("en-CA", {
      timeZone: zone,
      calendar: "gregory",
      numberingSystem: "latn",
      year: "numeric",
      month: "2-digit",
      day: "2-digit",
    });
    formatters.set(zone, formatter);
  }
  const parts = Object.fromEntries(formatter.formatToParts(instant).map(({ type, value }) => [type, value]));
  return `${parts.year?.padStart(4, "0")}-${parts.month}-${parts.day}`;
}

/**
 * The first instant of a date in a zone. Not always midnight: where clocks go forward at midnight the day begins
 * at 01:00, and a date that a zone skipped begins with the next one.
 */
export function startOfDay(date: CivilDate, zone: string): Date {
  let [before, after] = [utcMidnight(date) - WIDEST_OFFSET_MS, utcMidnight(date) + WIDEST_OFFSET_MS];
  while (after - before > SECOND_MS) {
    const middle = before + Math.floor((after - before) / (2 * SECOND_MS)) * SECOND_MS;
    if (civilDateIn(new Date(middle), zone) >= date) after = middle;
    else before = middle;
  }
  return new Date(after);
}

/** 23:59:59 of a date in a zone, or the last second it has. */
export function endOfDay(date: CivilDate, zone: string): Date {
  return new Date(startOfDay(addDays(date, 1), zone).getTime() - SECOND_MS);
}

const MONTHS = "January February March April May June July August September October November December".split(
  " ",
);

/** "20 March 2026" */
export function formatCivilDate(date: CivilDate): string {
  utcMidnight(date);
  return `${Number(date.slice(8))} ${MONTHS[Number(date.slice(5, 7)) - 1]} ${Number(date.slice(0, 4))}`;
}
