import { fmt } from "@/components/ui/format";

interface TermStripProps {
  startsOn: string;
  /** null: without end */
  lastUseAt: string | null;
  zone: string;
  /** The day asked about. */
  onDate: string;
  today: string;
  /** Stretches in which it is in force, as instants; an open end is null. */
  stretches: readonly { from: number; to: number | null }[];
}

const DAY_MS = 86_400_000;
const at = (date: string) => Date.parse(`${date}T12:00:00Z`);

/** The term on an axis of time: when it is in force, the day asked about, today. Its words stand beside it. */
export function TermStrip({ startsOn, lastUseAt, zone, onDate, today, stretches }: TermStripProps) {
  const marks = [at(startsOn), at(onDate), at(today), ...(lastUseAt ? [Date.parse(lastUseAt)] : [])];
  const firstYear = new Date(Math.min(...marks)).getUTCFullYear();
  const lastYear = new Date(Math.max(...marks)).getUTCFullYear() + (lastUseAt ? 1 : 3);
  const from = Date.UTC(firstYear, 0, 1);
  const to = Date.UTC(lastYear, 0, 1);
  const x = (time: number) => `${(((time - from) / (to - from)) * 100).toFixed(3)}%`;
  const width = (a: number, b: number) => `${(((b - a) / (to - from)) * 100).toFixed(3)}%`;
  const years = Array.from({ length: lastYear - firstYear }, (_, index) => firstYear + index);
  const step = Math.max(1, Math.ceil(years.length / 5));
  const isNear = (a: number, b: number) => Math.abs(a - b) / (to - from) < 0.08;
  const isLate = (time: number) => (time - from) / (to - from) > 0.55;
  const longest = [...stretches].sort((a, b) => (b.to ?? to) - b.from - ((a.to ?? to) - a.from))[0];
  const isShort = (one: { from: number; to: number | null }) =>
    (Math.min(one.to ?? to, to) - one.from) / (to - from) < 0.4;
  const until = lastUseAt ? `until ${fmt.date(lastUseAt, zone)}` : "without end";
  return (
    <svg
      aria-label={`The term from ${fmt.date(`${startsOn}T12:00:00Z`)} ${until}; the day asked about is ${fmt.date(`${onDate}T12:00:00Z`)}.`}
      className="block w-full overflow-visible"
      height="96"
      role="img"
    >
      {stretches.map((stretch) => {
        const end = Math.min(stretch.to ?? to, to);
        return (
          <rect
            className="fill-flat-1 stroke-flat-2"
            height="34"
            key={stretch.from}
            width={width(stretch.from, end)}
            x={x(stretch.from)}
            y="24"
          />
        );
      })}
      <line className="stroke-line" x1="0" x2="100%" y1="58" y2="58" />
      {years.flatMap((year) =>
        [0, 1, 2, 3].map((quarter) => {
          const start = Date.UTC(year, quarter * 3, 1);
          const end = Date.UTC(year, quarter * 3 + 3, 1);
          return (
            <rect
              className={quarter % 2 === 0 ? "fill-ink stroke-ink" : "fill-page stroke-ink"}
              height="5"
              key={start}
              width={width(start, end)}
              x={x(start)}
              y="66"
            />
          );
        }),
      )}
      {years
        .filter((year, index) => index % step === 0 && !isNear(Date.UTC(year, 0, 1), at(today)))
        .map((year) => (
          <text className="fill-ink-soft" key={year} x={x(Date.UTC(year, 0, 1))} y="90">
            {year}
          </text>
        ))}
      {longest && (
        <svg aria-hidden className="overflow-visible" x={x(Math.min(longest.to ?? to, to))} y="46">
          <text
            className={isShort(longest) ? "case-page" : ""}
            textAnchor={isShort(longest) ? "start" : "end"}
            x={isShort(longest) ? 8 : -9}
          >
            In force {endWords(longest.to, lastUseAt, zone)}
          </text>
        </svg>
      )}
      {onDate !== today && (
        <svg aria-hidden className="overflow-visible" x={x(at(today))} y="90">
          <text textAnchor="middle">today</text>
        </svg>
      )}
      <line
        className="stroke-ink"
        strokeDasharray="2 3"
        x1={x(at(today))}
        x2={x(at(today))}
        y1="18"
        y2="71"
      />
      <g>
        <line className="stroke-page" strokeWidth="4" x1={x(at(onDate))} x2={x(at(onDate))} y1="12" y2="71" />
        <line className="stroke-ink" strokeWidth="2" x1={x(at(onDate))} x2={x(at(onDate))} y1="12" y2="71" />
        <svg aria-hidden className="overflow-visible" x={x(at(onDate))} y="6">
          <path className="fill-ink" d="M-5 0h10L0 8z" />
          <text textAnchor={isLate(at(onDate)) ? "end" : "start"} x={isLate(at(onDate)) ? -11 : 11} y="8">
            {fmt.date(`${onDate}T12:00:00Z`)}
            {onDate === today ? ", today" : ", the day you asked about"}
          </text>
        </svg>
      </g>
    </svg>
  );
}

function endWords(to: number | null, lastUseAt: string | null, zone: string): string {
  if (to === null) return "without end";
  return lastUseAt && Date.parse(lastUseAt) === to
    ? `until ${fmt.date(lastUseAt, zone)}`
    : `until it ended on ${fmt.date(to, zone)}`;
}

/** When it is in force, drawn from the dated lines of its history. The answer in words comes from the check itself. */
export function stretchesOf(
  startsOn: string,
  lastUseAt: string | null,
  history: readonly { at: string; kind: string }[],
): { from: number; to: number | null }[] {
  const ending = new Set(["payment reversed", "refunded", "rescinded", "cancelled", "superseded"]);
  const expiry = lastUseAt ? Date.parse(lastUseAt) : null;
  const found: { from: number; to: number | null }[] = [];
  let from: number | null = at(startsOn) - DAY_MS / 2;
  for (const { at: time, kind } of history) {
    const moment = Date.parse(time);
    if (from !== null && ending.has(kind) && (expiry === null || moment < expiry)) {
      found.push({ from, to: Math.max(from, moment) });
      from = null;
    } else if (from === null && kind === "reinstated") from = moment;
  }
  if (from !== null && (expiry === null || from < expiry)) found.push({ from, to: expiry });
  return found;
}
