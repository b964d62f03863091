const NBSP = "\u00a0";
const MINUS = "\u2212";

function fixed(value: number, digits: number): string {
  const text = Math.abs(value).toFixed(digits);
  return value < 0 && Number(text) !== 0 ? `${MINUS}${text}` : text;
}

function signed(value: number, digits: number): string {
  const text = fixed(value, digits);
  return text.startsWith(MINUS) || Number(text) === 0 ? text : `+${text}`;
}

function clock(totalUnits: number, unitsPerSecond: number, digits: number): string {
  const whole = Math.abs(totalUnits);
  const seconds = Math.floor(whole / unitsPerSecond);
  const hours = Math.floor(seconds / 3600);
  const minutes = Math.floor(seconds / 60) % 60;
  const rest = (whole - Math.floor(seconds / 60) * 60 * unitsPerSecond) / unitsPerSecond;
  const head = hours > 0 ? `${hours}:${String(minutes).padStart(2, "0")}` : String(minutes);
  const tail = rest.toFixed(digits).padStart(digits > 0 ? 3 + digits : 2, "0");
  return `${totalUnits < 0 ? MINUS : ""}${head}:${tail}`;
}

const MODES: Record<string, string> = {
  "": "major",
  maj: "major",
  major: "major",
  m: "minor",
  min: "minor",
  minor: "minor",
  dor: "dorian",
  dorian: "dorian",
  phr: "phrygian",
  phrygian: "phrygian",
  lyd: "lydian",
  lydian: "lydian",
  mix: "mixolydian",
  mixolydian: "mixolydian",
  aeo: "aeolian",
  aeolian: "aeolian",
  loc: "locrian",
  locrian: "locrian",
};

function key(written: string | null | undefined): string | null {
  const parts = written?.trim().match(/^([A-G])\s*(#|♯|b|♭|sharp|flat)?\s*([a-z]*)$/);
  const mode = parts ? MODES[parts[3] ?? ""] : undefined;
  if (!parts || !mode) return null;
  const accidental = {
    "#": " sharp",
    "♯": " sharp",
    sharp: " sharp",
    b: " flat",
    "♭": " flat",
    flat: " flat",
  };
  const sign = parts[2] ? accidental[parts[2] as keyof typeof accidental] : "";
  return `${parts[1]}${sign.replace(" ", NBSP)} ${mode}`;
}

const BYTE_UNITS = ["bytes", "kB", "MB", "GB", "TB"];

function bytes(count: number): string {
  let value = count;
  let unit = 0;
  while (value >= 999.5 && unit < BYTE_UNITS.length - 1) {
    value /= 1000;
    unit += 1;
  }
  const digits = unit === 0 || value >= 99.95 ? 0 : 1;
  return `${value.toFixed(digits)}${NBSP}${BYTE_UNITS[unit]}`;
}

interface DateOptions {
  zone?: string;
  weekday?: boolean;
}

/** A zone by itself, or with how to write the day. */
type DateWay = string | DateOptions;

function way(given: DateWay): Required<DateOptions> {
  const { zone = "UTC", weekday = false } = typeof given === "string" ? { zone: given } : given;
  return { zone, weekday };
}

function zoneName(zone: string): string {
  if (zone === "UTC") return "UTC";
  const place = zone.slice(zone.lastIndexOf("/") + 1).replaceAll("_", " ");
  return `${place} time`;
}

function date(value: Date | string | number, given: DateWay = {}): string {
  const { zone, weekday } = way(given);
  return new Intl.DateTimeFormat("en-GB", {
    timeZone: zone,
    day: "numeric",
    month: "long",
    year: "numeric",
    ...(weekday ? { weekday: "long" as const } : {}),
  })
    .format(new Date(value))
    .replace(",", "")
    .replace(/(\d) (?=[A-Z])/, `$1${NBSP}`);
}

function dayMonth(
  value: Date | string | number,
  { zone = "UTC", weekday = false }: DateOptions = {},
): string {
  return date(value, { zone, weekday }).replace(/ \d{4}$/, "");
}

function timeOfDay(value: Date | string | number, given: DateWay = {}): string {
  const { zone } = way(given);
  const text = new Intl.DateTimeFormat("en-GB", {
    timeZone: zone,
    hour: "2-digit",
    minute: "2-digit",
    hourCycle: "h23",
  }).format(new Date(value));
  return `${text}${NBSP}${zoneName(zone)}`;
}

function count(value: number, one: string, many = `${one}s`): string {
  return `${value.toLocaleString("en-GB")}${NBSP}${value === 1 ? one : many}`;
}

const SMALL = ["no", "one", "two", "three", "four", "five", "six", "seven", "eight", "nine", "ten"];

/** Facts as the site writes them: lining figures, a no-break space before the unit, a true minus. */
export const fmt = {
  /** 168.4 → "2:48" */
  time: (seconds: number): string => clock(Math.round(seconds), 1, 0),
  /** 79.04 → "1:19.0" */
  timeTenths: (seconds: number): string => clock(Math.round(seconds * 10), 10, 1),
  /** 7.3, 65.5 → "0:07–1:06" */
  span: (fromS: number, toS: number): string => `${fmt.time(fromS)}–${fmt.time(toS)}`,
  spanTenths: (fromS: number, toS: number): string => `${fmt.timeTenths(fromS)}–${fmt.timeTenths(toS)}`,
  /** 168 → "2 minutes 48 seconds", for text that is heard */
  spokenTime: (seconds: number): string => {
    const whole = Math.round(seconds);
    const minutes = Math.floor(whole / 60);
    const rest = whole % 60;
    const parts = [
      ...(minutes > 0 ? [`${minutes} ${minutes === 1 ? "minute" : "minutes"}`] : []),
      ...(rest > 0 || minutes === 0 ? [`${rest} ${rest === 1 ? "second" : "seconds"}`] : []),
    ];
    return parts.join(" ");
  },
  seconds: (value: number, digits = 1): string => `${fixed(value, digits)}${NBSP}s`,
  bpm: (value: number): string => `${fixed(value, Number.isInteger(value) ? 0 : 1)}${NBSP}bpm`,
  lufs: (value: number): string => `${fixed(value, 1)}${NBSP}LUFS`,
  /** A sounding: whole LUFS without the unit, which the chart states once. */
  sounding: (value: number): string => fixed(Math.round(value), 0),
  dbtp: (value: number): string => `${fixed(value, 1)}${NBSP}dBTP`,
  db: (value: number, digits = 1): string => `${fixed(value, digits)}${NBSP}dB`,
  /** 2 → "+2.00" */
  semitones: (value: number): string => signed(value, 2),
  /** 1.03 → "× 1.030" */
  speed: (ratio: number): string => `×${NBSP}${ratio.toFixed(3)}`,
  percent: (value: number, digits = 0): string => `${fixed(value, digits)}${NBSP}%`,
  /** Shares in basis points: 3334 → "33.34" */
  shareBps: (bps: number): string => (bps / 100).toFixed(2),
  hertz: (value: number): string =>
    value >= 1000 ? `${Number((value / 1000).toFixed(3))}${NBSP}kHz` : `${value}${NBSP}Hz`,
  bits: (value: number): string => `${value}${NBSP}bit`,
  /** 1240.5 → "1,240.50" */
  number: (value: number, digits = 0): string => {
    const text = Math.abs(value).toLocaleString("en-GB", {
      minimumFractionDigits: digits,
      maximumFractionDigits: digits,
    });
    return value < 0 && /[1-9]/.test(text) ? `${MINUS}${text}` : text;
  },
  bytes,
  key,
  date,
  dayMonth,
  timeOfDay,
  /** "18 May 2026, 09:14 UTC" */
  dateTime: (value: Date | string | number, given: DateWay = {}): string =>
    `${date(value, given)}, ${timeOfDay(value, given)}`,
  count,
  /** Small counts as words: 3, "passage" → "three passages" */
  countWord: (value: number, one: string, many = `${one}s`): string => {
    const word = Number.isInteger(value) && value >= 0 ? SMALL[value] : undefined;
    return word ? `${word} ${value === 1 ? one : many}` : count(value, one, many);
  },
  /** "no drums, bed, sting and stems" */
  /** The same words at the head of a sentence. */
  opening: (words: string): string => words.charAt(0).toLocaleUpperCase("en-GB") + words.slice(1),
  list: (items: readonly string[], last = "and"): string =>
    items.length < 2
      ? (items[0] ?? "")
      : `${items.slice(0, -1).join(", ")} ${last} ${items[items.length - 1]}`,
};

export type Ending = "button" | "ring-out" | "fade" | "loop";

const ENDINGS: Record<Ending, string> = {
  button: "ends on a button",
  "ring-out": "rings out",
  fade: "fades",
  loop: "loops",
};

export interface CueFacts {
  durationS: number;
  bpm?: number | null;
  musicalKey?: string | null;
  ending?: Ending | null;
  /** The other versions, as words: "no drums", "bed", "60", "stems". */
  also?: readonly string[];
  /** A price already written out: "£40.00". */
  fromPrice?: string | null;
}

/** "2:48 at 84 bpm in C minor, ends on a button; also no drums, bed, sting and stems. From £40.00" */
export function cueFacts(facts: CueFacts): string {
  const keyName = key(facts.musicalKey);
  const body = [
    fmt.time(facts.durationS),
    facts.bpm ? ` at ${fmt.bpm(facts.bpm)}` : " in free time",
    keyName ? `${facts.bpm ? "" : ","} in ${keyName}` : "",
    facts.ending ? `, ${ENDINGS[facts.ending]}` : "",
    facts.also?.length ? `; also ${fmt.list(facts.also)}` : "",
    ".",
  ].join("");
  return facts.fromPrice ? `${body} From${NBSP}${facts.fromPrice}` : body;
}
