/**
 * Days on which an office is closed besides Saturdays and Sundays: common practice, copied from no official feed.
 * A table ends with its last full year, and arithmetic beyond it is refused rather than guessed.
 */
export interface HolidayCalendar {
  readonly name: string;
  readonly firstYear: number;
  readonly lastYear: number;
  readonly days: Readonly<Record<string, string>>;
}

/** Bank holidays in England and Wales. */
export const UK_HOLIDAYS: HolidayCalendar = {
  name: "UK (England and Wales)",
  firstYear: 2026,
  lastYear: 2027,
  days: {
    "2026-01-01": "New Year's Day",
    "2026-04-03": "Good Friday",
    "2026-04-06": "Easter Monday",
    "2026-05-04": "Early May bank holiday",
    "2026-05-25": "Spring bank holiday",
    "2026-08-31": "Summer bank holiday",
    "2026-12-25": "Christmas Day",
    "2026-12-28": "Boxing Day (substitute)",
    "2027-01-01": "New Year's Day",
    "2027-03-26": "Good Friday",
    "2027-03-29": "Easter Monday",
    "2027-05-03": "Early May bank holiday",
    "2027-05-31": "Spring bank holiday",
    "2027-08-30": "Summer bank holiday",
    "2027-12-27": "Christmas Day (substitute)",
    "2027-12-28": "Boxing Day (substitute)",
  },
};

/** Federal holidays of the United States as observed: a Saturday's on the Friday before, a Sunday's on the Monday. */
export const US_FEDERAL_HOLIDAYS: HolidayCalendar = {
  name: "US federal",
  firstYear: 2026,
  lastYear: 2027,
  days: {
    "2026-01-01": "New Year's Day",
    "2026-01-19": "Birthday of Martin Luther King, Jr.",
    "2026-02-16": "Washington's Birthday",
    "2026-05-25": "Memorial Day",
    "2026-06-19": "Juneteenth National Independence Day",
    "2026-07-03": "Independence Day (observed)",
    "2026-09-07": "Labor Day",
    "2026-10-12": "Columbus Day",
    "2026-11-11": "Veterans Day",
    "2026-11-26": "Thanksgiving Day",
    "2026-12-25": "Christmas Day",
    "2027-01-01": "New Year's Day",
    "2027-01-18": "Birthday of Martin Luther King, Jr.",
    "2027-02-15": "Washington's Birthday",
    "2027-05-31": "Memorial Day",
    "2027-06-18": "Juneteenth National Independence Day (observed)",
    "2027-07-05": "Independence Day (observed)",
    "2027-09-06": "Labor Day",
    "2027-10-11": "Columbus Day",
    "2027-11-11": "Veterans Day",
    "2027-11-25": "Thanksgiving Day",
    "2027-12-24": "Christmas Day (observed)",
    "2027-12-31": "New Year's Day 2028 (observed)",
  },
};
