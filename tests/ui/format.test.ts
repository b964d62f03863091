import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { STANDING_CAUTION } from "@/components/ui/caution";
import { cueFacts, fmt } from "@/components/ui/format";

const MINUS = "\u2212";

describe("facts are written in lining figures with a no-break space before the unit", () => {
  it.each([
    [fmt.time(168), "2:48"],
    [fmt.time(59.6), "1:00"],
    [fmt.time(3661), "1:01:01"],
    [fmt.time(-8), `${MINUS}0:08`],
    [fmt.timeTenths(79.04), "1:19.0"],
    [fmt.timeTenths(59.96), "1:00.0"],
    [fmt.span(7.3, 172.9), "0:07–2:53"],
    [fmt.spanTenths(7.3, 65.5), "0:07.3–1:05.5"],
    [fmt.spokenTime(154), "2 minutes 34 seconds"],
    [fmt.spokenTime(61), "1 minute 1 second"],
    [fmt.spokenTime(0), "0 seconds"],
    [fmt.seconds(30.4, 2), "30.40\u00a0s"],
    [fmt.bpm(92), "92\u00a0bpm"],
    [fmt.bpm(92.5), "92.5\u00a0bpm"],
    [fmt.lufs(-14.2), `${MINUS}14.2\u00a0LUFS`],
    [fmt.lufs(-0.04), "0.0\u00a0LUFS"],
    [fmt.dbtp(-1.3), `${MINUS}1.3\u00a0dBTP`],
    [fmt.sounding(-26.6), `${MINUS}27`],
    [fmt.semitones(2), "+2.00"],
    [fmt.semitones(-0.001), "0.00"],
    [fmt.semitones(-3), `${MINUS}3.00`],
    [fmt.speed(1.03), "×\u00a01.030"],
    [fmt.percent(15), "15\u00a0%"],
    [fmt.shareBps(3334), "33.34"],
    [fmt.hertz(44100), "44.1\u00a0kHz"],
    [fmt.hertz(48000), "48\u00a0kHz"],
    [fmt.hertz(440), "440\u00a0Hz"],
    [fmt.bits(24), "24\u00a0bit"],
    [fmt.bytes(0), "0\u00a0bytes"],
    [fmt.bytes(999), "999\u00a0bytes"],
    [fmt.bytes(999_999), "1.0\u00a0MB"],
    [fmt.bytes(34_600_000), "34.6\u00a0MB"],
    [fmt.bytes(8_589_934_592), "8.6\u00a0GB"],
    [fmt.number(-1240.5, 2), `${MINUS}1,240.50`],
    [fmt.count(1, "recording"), "1\u00a0recording"],
    [fmt.count(1120, "recording"), "1,120\u00a0recordings"],
    [fmt.countWord(3, "passage"), "three passages"],
    [fmt.countWord(1, "passage"), "one passage"],
    [fmt.list(["no drums", "bed", "sting", "stems"]), "no drums, bed, sting and stems"],
    [fmt.list(["bed"]), "bed"],
    [fmt.list([]), ""],
  ])("%s", (written, expected) => {
    expect(written).toBe(expected);
  });

  it("no figure carries a hyphen for a minus", () => {
    fc.assert(
      fc.property(fc.double({ min: -200, max: 200, noNaN: true }), (value) => {
        const figures = [
          fmt.lufs(value),
          fmt.db(value),
          fmt.semitones(value),
          fmt.sounding(value),
          fmt.number(value, 1),
        ];
        for (const written of figures) {
          expect(written).not.toContain("-");
          expect(written).not.toMatch(/^\u22120(\.0+)?(\u00a0|$)/);
        }
      }),
    );
  });

  it("a time reads back as the seconds it was made of", () => {
    fc.assert(
      fc.property(fc.nat(20_000), (tenths) => {
        const [rest, minutes, hours] = fmt
          .timeTenths(tenths / 10)
          .split(":")
          .reverse()
          .map(Number);
        expect(Math.round(((hours ?? 0) * 3600 + minutes! * 60 + rest!) * 10)).toBe(tenths);
      }),
    );
  });
});

describe("keys are written out", () => {
  it.each([
    ["Ebm", "E\u00a0flat minor"],
    ["F#m", "F\u00a0sharp minor"],
    ["G", "G major"],
    ["A mix", "A mixolydian"],
    ["D phr", "D phrygian"],
    ["Db", "D\u00a0flat major"],
    ["E flat minor", "E\u00a0flat minor"],
  ])("%s", (key, words) => {
    expect(fmt.key(key)).toBe(words);
  });

  it.each(["-", "", null, undefined, "H", "free"])("%s is no key", (key) => {
    expect(fmt.key(key)).toBeNull();
  });
});

describe("dates carry their zone where a time is said", () => {
  const at = "2026-05-18T09:14:00Z";
  it.each([
    [fmt.date(at), "18\u00a0May 2026"],
    [fmt.date(at, { weekday: true }), "Monday 18\u00a0May 2026"],
    [fmt.dayMonth(at, { weekday: true }), "Monday 18\u00a0May"],
    [fmt.dateTime(at, { weekday: true }), "Monday 18\u00a0May 2026, 09:14\u00a0UTC"],
    // British Summer Time is an hour ahead of UTC in May.
    [fmt.dateTime(at, { zone: "Europe/London" }), "18\u00a0May 2026, 10:14\u00a0London time"],
    [fmt.timeOfDay("2026-05-18T00:05:00Z"), "00:05\u00a0UTC"],
  ])("%s", (written, expected) => {
    expect(written).toBe(expected);
  });
});

describe("the facts of a cue are a sentence", () => {
  const plain = (text: string) => text.replaceAll("\u00a0", " ");

  it("with everything known", () => {
    const facts = {
      durationS: 168,
      bpm: 84,
      musicalKey: "Cm",
      ending: "button" as const,
      fromPrice: "£40.00",
    };
    expect(plain(cueFacts({ ...facts, also: ["no drums", "bed", "sting", "stems"] }))).toBe(
      "2:48 at 84 bpm in C minor, ends on a button; also no drums, bed, sting and stems. From £40.00",
    );
  });

  it("without tempo, key or versions", () => {
    expect(plain(cueFacts({ durationS: 140, musicalKey: "-", ending: "ring-out" }))).toBe(
      "2:20 in free time, rings out.",
    );
  });
});

it("the standing sentence is worded as it must be", () => {
  expect(STANDING_CAUTION).toBe(
    "Similarity evidence is technical. It is not a finding of infringement or of originality, and absence of a match is not clearance.",
  );
});
