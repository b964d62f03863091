import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  addBusinessDays,
  addDays,
  anniversary,
  civilDateIn,
  endOfDay,
  isBusinessDay,
  isCivilDate,
  startOfDay,
  weekday,
} from "@/lib/kernel/calendar";
import {
  complaintOpenThrough,
  holdEndsAt,
  lastDayOfPeriod,
  lastUseAt,
  putBackWindow,
  workingDaysDueAt,
} from "@/lib/kernel/deadlines";
import { type HolidayCalendar, UK_HOLIDAYS, US_FEDERAL_HOLIDAYS } from "@/lib/kernel/holidays";

const LONDON = "Europe/London";

describe("holiday tables", () => {
  const nth = (year: number, month: number, day: number, n: number) => {
    const first = `${year}-${String(month).padStart(2, "0")}-01`;
    return addDays(first, ((day - weekday(first) + 7) % 7) + 7 * (n - 1));
  };
  const last = (year: number, month: number, day: number) => {
    const end = addDays(anniversary(`${year}-${String(month).padStart(2, "0")}-01`, 1), -1);
    return addDays(end, -((weekday(end) - day + 7) % 7));
  };
  // The anonymous Gregorian computus (Meeus, Astronomical Algorithms, 2nd ed. 1998, ch. 8).
  const easter = (year: number) => {
    const [a, b, c] = [year % 19, Math.floor(year / 100), year % 100];
    const h = (19 * a + b - Math.floor(b / 4) - Math.floor((b - Math.floor((b + 8) / 25) + 1) / 3) + 15) % 30;
    const l = (32 + 2 * (b % 4) + 2 * Math.floor(c / 4) - h - (c % 4)) % 7;
    const m = Math.floor((a + 11 * h + 22 * l) / 451);
    const n = h + l - 7 * m + 114;
    return `${year}-${String(Math.floor(n / 31)).padStart(2, "0")}-${String((n % 31) + 1).padStart(2, "0")}`;
  };

  it.each([2026, 2027])("UK %i follows its rules", (year) => {
    const weekdayOnOrAfter = (date: string, taken: string[]): string =>
      [0, 6].includes(weekday(date)) || taken.includes(date)
        ? weekdayOnOrAfter(addDays(date, 1), taken)
        : date;
    const christmas = weekdayOnOrAfter(`${year}-12-25`, []);
    const boxing = weekdayOnOrAfter(`${year}-12-26`, [christmas]);
    const expected = [
      weekdayOnOrAfter(`${year}-01-01`, []),
      addDays(easter(year), -2),
      addDays(easter(year), 1),
      nth(year, 5, 1, 1),
      last(year, 5, 1),
      last(year, 8, 1),
      christmas,
      boxing,
    ];
    const listed = Object.keys(UK_HOLIDAYS.days).filter((date) => date.startsWith(String(year)));
    expect(listed).toEqual(expected.sort());
  });

  it.each([2026, 2027])("US federal %i follows its rules", (year) => {
    const observed = (date: string) =>
      weekday(date) === 6 ? addDays(date, -1) : weekday(date) === 0 ? addDays(date, 1) : date;
    const expected = [
      observed(`${year}-01-01`),
      nth(year, 1, 1, 3),
      nth(year, 2, 1, 3),
      last(year, 5, 1),
      observed(`${year}-06-19`),
      observed(`${year}-07-04`),
      nth(year, 9, 1, 1),
      nth(year, 10, 1, 2),
      observed(`${year}-11-11`),
      nth(year, 11, 4, 4),
      observed(`${year}-12-25`),
      observed(`${year + 1}-01-01`),
    ].filter((date) => date.startsWith(String(year)));
    const listed = Object.keys(US_FEDERAL_HOLIDAYS.days).filter((date) => date.startsWith(String(year)));
    expect(listed).toEqual(expected.sort());
  });

  it("a year outside the table is refused, not guessed", () => {
    expect(() => isBusinessDay("2028-01-03", UK_HOLIDAYS)).toThrow(/covers 2026 to 2027, not 2028-01-03/);
    expect(() => addBusinessDays("2027-12-29", 5, UK_HOLIDAYS)).toThrow(RangeError);
  });
});

describe("deadlines", () => {
  it("D1: a US counter-notice of 21 May 2026 opens the window on 5 June and closes it on 11 June", () => {
    expect(putBackWindow("2026-05-21", US_FEDERAL_HOLIDAYS)).toEqual({
      opensOn: "2026-06-05",
      closesOn: "2026-06-11",
      stopped: false,
    });
    expect(putBackWindow("2026-05-21", US_FEDERAL_HOLIDAYS, "2026-06-08").stopped).toBe(true);
    expect(putBackWindow("2026-05-21", US_FEDERAL_HOLIDAYS, "2026-06-12").stopped).toBe(false);
  });

  it("D2: without the holiday table the same window would be one day early, and is not what we answer", () => {
    const none: HolidayCalendar = { ...US_FEDERAL_HOLIDAYS, days: {} };
    const wrong = putBackWindow("2026-05-21", none);
    expect(wrong).toMatchObject({ opensOn: "2026-06-04", closesOn: "2026-06-10" });
    expect(putBackWindow("2026-05-21", US_FEDERAL_HOLIDAYS)).not.toEqual(wrong);
  });

  it("D3: two working days after Friday 22 May 2026, 15:00, in a UK office end on Wednesday 27 May", () => {
    const due = workingDaysDueAt({
      from: new Date("2026-05-22T14:00:00Z"),
      workingDays: 2,
      zone: LONDON,
      holidays: UK_HOLIDAYS,
    });
    expect(due.toISOString()).toBe("2026-05-27T22:59:59.000Z");
  });

  const fifteen = {
    from: new Date("2026-05-18T09:00:00Z"),
    workingDays: 15,
    zone: LONDON,
    holidays: UK_HOLIDAYS,
  };

  it("D4: fifteen working days from Monday 18 May 2026 end on Tuesday 9 June", () => {
    expect(civilDateIn(workingDaysDueAt(fifteen), LONDON)).toBe("2026-06-09");
  });

  it("D5: a restriction notified on 31 August 2026 stays open to complaint at least through 28 February 2027", () => {
    expect(complaintOpenThrough("2026-08-31")).toBe("2027-02-28");
    expect(complaintOpenThrough("2027-08-31")).toBe("2028-02-29");
    expect(complaintOpenThrough("2026-05-18")).toBe("2026-11-18");
  });

  it("D6: earnings captured on 14 March 2026 with a hold of 14 days are available on 28 March", () => {
    expect(holdEndsAt(new Date("2026-03-14T16:20:00Z"), 14, "UTC").toISOString()).toBe(
      "2026-03-28T00:00:00.000Z",
    );
    // Over the change to summer time a day of the hold has 23 hours; the date still decides.
    expect(holdEndsAt(new Date("2026-03-20T23:30:00Z"), 14, LONDON).toISOString()).toBe(
      "2026-04-02T23:00:00.000Z",
    );
  });

  it("D7: three months from 8 April 2026 in London end on 7 July at 23:59:59 BST", () => {
    expect(lastUseAt("2026-04-08", 3, LONDON).toISOString()).toBe("2026-07-07T22:59:59.000Z");
  });

  it("D8: one year from 29 February 2028 ends on 28 February 2029 at 23:59:59", () => {
    expect(lastUseAt("2028-02-29", 12, "UTC").toISOString()).toBe("2029-02-28T23:59:59.000Z");
    expect(lastUseAt("2028-02-29", 48, "UTC").toISOString()).toBe("2032-02-28T23:59:59.000Z");
    expect(lastDayOfPeriod("2025-06-01", 12)).toBe("2026-05-31");
    expect(lastDayOfPeriod("2026-01-31", 1)).toBe("2026-02-28");
  });

  it("D9: a pause of 3 to 9 June moves an internal date by its five working days, a later pause by none", () => {
    const pauses = [{ from: "2026-06-03", through: "2026-06-09" }];
    expect(civilDateIn(workingDaysDueAt({ ...fifteen, pauses }), LONDON)).toBe("2026-06-16");
    const later = [{ from: "2026-06-10", through: "2026-06-30" }];
    expect(civilDateIn(workingDaysDueAt({ ...fifteen, pauses: later }), LONDON)).toBe("2026-06-09");
  });

  it("D10: a finding upheld on 18 May 2026 counts for 24 months, through 17 May 2028", () => {
    expect(lastDayOfPeriod("2026-05-18", 24)).toBe("2028-05-17");
  });
});

describe("dates and zones", () => {
  it("a licence's last second follows the zone's own clock changes", () => {
    expect(lastUseAt("2025-10-27", 12, LONDON).toISOString()).toBe("2026-10-26T23:59:59.000Z");
    expect(lastUseAt("2025-10-26", 12, LONDON).toISOString()).toBe("2026-10-25T23:59:59.000Z");
    expect(lastUseAt("2025-10-25", 12, LONDON).toISOString()).toBe("2026-10-24T22:59:59.000Z");
    expect(lastUseAt("2026-01-01", 12, "America/Toronto").toISOString()).toBe("2027-01-01T04:59:59.000Z");
    expect(lastUseAt("2026-01-01", 12, "Pacific/Kiritimati").toISOString()).toBe("2026-12-31T09:59:59.000Z");
  });

  it("a day without a midnight begins when it begins, and a skipped date with the next", () => {
    // IANA time zone database: São Paulo put its clocks forward at 00:00 on 4 November 2018; Apia skipped 30 December 2011.
    expect(startOfDay("2018-11-04", "America/Sao_Paulo").toISOString()).toBe("2018-11-04T03:00:00.000Z");
    expect(endOfDay("2018-11-03", "America/Sao_Paulo").toISOString()).toBe("2018-11-04T02:59:59.000Z");
    expect(startOfDay("2011-12-30", "Pacific/Apia")).toEqual(startOfDay("2011-12-31", "Pacific/Apia"));
    expect(startOfDay("2018-02-18", "America/Sao_Paulo").toISOString()).toBe("2018-02-18T03:00:00.000Z");
  });

  it("refuses what is not a date", () => {
    for (const text of ["2026-02-29", "2026-13-01", "2026-1-1", "yesterday", "", "2026-05-18T00:00"]) {
      expect(isCivilDate(text)).toBe(false);
      expect(() => addDays(text, 1)).toThrow(RangeError);
    }
    expect(isCivilDate("2028-02-29")).toBe(true);
    expect(() => lastDayOfPeriod("2026-01-01", 0)).toThrow(RangeError);
    expect(() => addBusinessDays("2026-01-01", 0, UK_HOLIDAYS)).toThrow(RangeError);
  });

  const date = fc
    .date({
      min: new Date("1990-01-01T00:00:00Z"),
      max: new Date("2099-12-31T00:00:00Z"),
      noInvalidDate: true,
    })
    .map((d) => d.toISOString().slice(0, 10));

  it("the first instant of a day is on that day and the second before is not", () => {
    const zone = fc.constantFrom(LONDON, "America/Toronto", "Asia/Kathmandu", "Australia/Lord_Howe", "UTC");
    fc.assert(
      fc.property(date, zone, (day, where) => {
        const start = startOfDay(day, where);
        expect(civilDateIn(start, where)).toBe(day);
        expect(civilDateIn(new Date(start.getTime() - 1000), where)).toBe(addDays(day, -1));
        expect(civilDateIn(endOfDay(day, where), where)).toBe(day);
      }),
    );
  });

  it("consecutive periods of whole months neither overlap nor leave a gap unless a day is missing", () => {
    fc.assert(
      fc.property(date, fc.integer({ min: 1, max: 60 }), (day, months) => {
        const next = anniversary(day, months);
        expect(addDays(lastDayOfPeriod(day, months), 1)).toBe(next);
        expect(["01", day.slice(8)]).toContain(next.slice(8));
      }),
    );
  });
});
