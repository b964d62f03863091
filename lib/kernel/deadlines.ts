import {
  addBusinessDays,
  addDays,
  anniversary,
  type CivilDate,
  civilDateIn,
  endOfDay,
  type Pause,
  sameDayOrLast,
  startOfDay,
} from "./calendar";
import type { HolidayCalendar } from "./holidays";

/** The last date of a period of whole months: a year from 1 June ends on 31 May. */
export function lastDayOfPeriod(start: CivilDate, months: number): CivilDate {
  if (!Number.isInteger(months) || months < 1)
    throw new RangeError(`a period has a whole number of months from 1, got ${months}`);
  return addDays(anniversary(start, months), -1);
}

/** The last second in which a licence may be used: 23:59:59 in its stated zone. */
export function lastUseAt(start: CivilDate, months: number, zone: string): Date {
  return endOfDay(lastDayOfPeriod(start, months), zone);
}

/** When earnings captured at `capturedAt` become available: the start of the day so many days later. */
export function holdEndsAt(capturedAt: Date, days: number, zone: string): Date {
  return startOfDay(addDays(civilDateIn(capturedAt, zone), days), zone);
}

/** An internal promise: the end of the nth working day after `from` in the office's zone, pauses not counted. */
export function workingDaysDueAt(input: {
  from: Date;
  workingDays: number;
  zone: string;
  holidays: HolidayCalendar;
  pauses?: readonly Pause[];
}): Date {
  const from = civilDateIn(input.from, input.zone);
  return endOfDay(addBusinessDays(from, input.workingDays, input.holidays, input.pauses), input.zone);
}

/**
 * When material is put back after a counter-notice: not less than 10 nor more than 14 business days after its
 * receipt, unless the reporter tells of a court action before then (17 USC 512(g)(2)(C)). The clock of a statute
 * takes no pauses.
 */
export function putBackWindow(
  receivedOn: CivilDate,
  holidays: HolidayCalendar,
  courtNoticeOn: CivilDate | null = null,
): { opensOn: CivilDate; closesOn: CivilDate; stopped: boolean } {
  const closesOn = addBusinessDays(receivedOn, 14, holidays);
  return {
    opensOn: addBusinessDays(receivedOn, 10, holidays),
    closesOn,
    stopped: courtNoticeOn !== null && courtNoticeOn <= closesOn,
  };
}

/**
 * The earliest last day on which a complaint must still be possible: six months after the notice of a decision
 * (Regulation (EU) 2022/2065, Article 20(1)), the day of the notice not counted, the last of the month where the
 * day is missing. A statute's clock takes no pauses.
 */
export function complaintOpenThrough(notifiedOn: CivilDate, months = 6): CivilDate {
  return sameDayOrLast(notifiedOn, months);
}
