import { addDays, type CivilDate, civilDateIn, formatCivilDate, startOfDay } from "@/lib/kernel/calendar";
import type { StatusEvent, StatusKind } from "./schema";

export interface LicenceTerm {
  readonly startsOn: CivilDate;
  /** The last second of use as an ISO instant; null is perpetual. */
  readonly lastUseAt: string | null;
  readonly zone: string;
}

export interface InForce {
  answer: "in force" | "in force for part of the day" | "not in force";
  /** "In force on 20 March 2026. Since 11 May 2026 a rights question is open." */
  sentence: string;
  /** Questions open at the end of the history, with the date since when. */
  open: Array<{ kind: StatusKind; since: CivilDate }>;
}

const ENDINGS: Partial<Record<StatusKind, string>> = {
  "payment reversed": "the payment was reversed",
  refunded: "it was refunded",
  rescinded: "it was rescinded",
  cancelled: "it was cancelled",
  superseded: "it was superseded",
};

const QUESTIONS: Partial<Record<StatusKind, { words: string; closedBy: readonly StatusKind[] }>> = {
  "payment due": { words: "payment is due", closedBy: ["paid", "payment reversed", "cancelled", "refunded"] },
  "payment disputed": {
    words: "the payment is disputed",
    closedBy: ["dispute withdrawn", "payment reversed", "refunded", "reinstated"],
  },
  "rights question open": {
    words: "a rights question is open",
    closedBy: ["rights question closed", "rescinded"],
  },
};

interface Ending {
  at: number;
  words: string;
}

/** The stretches of time in which the licence is in force, each with what ended it. */
function stretches(
  events: readonly StatusEvent[],
  term: LicenceTerm,
): Array<{ from: number; end: Ending | null }> {
  const expiry: Ending | null =
    term.lastUseAt === null ? null : { at: Date.parse(term.lastUseAt) + 1000, words: "its term ended" };
  let from: number | null = startOfDay(term.startsOn, term.zone).getTime();
  const found: Array<{ from: number; end: Ending | null }> = [];
  for (const event of events) {
    const at = Date.parse(event.at);
    const words = ENDINGS[event.kind];
    if (words && from !== null && (expiry === null || at < expiry.at)) {
      found.push({ from, end: { at: Math.max(at, from), words } });
      from = null;
    } else if (event.kind === "reinstated" && from === null) {
      from = at;
    }
  }
  if (from !== null && (expiry === null || from < expiry.at)) found.push({ from, end: expiry });
  return found;
}

/** Whether a licence is in force on a date of its own zone, and what else its history says. Events in order. */
export function inForceOn(events: readonly StatusEvent[], term: LicenceTerm, date: CivilDate): InForce {
  const dayFrom = startOfDay(date, term.zone).getTime();
  const dayTo = startOfDay(addDays(date, 1), term.zone).getTime();
  const all = stretches(events, term);
  const touching = all.filter(({ from, end }) => from < dayTo && (end === null || end.at > dayFrom));
  const whole = touching.some(({ from, end }) => from <= dayFrom && (end === null || end.at >= dayTo));
  const on = formatCivilDate(date);
  const ended = all.filter(({ end }) => end !== null && end.at <= dayTo).at(-1)?.end;
  const why = ended
    ? `: ${ended.words} on ${formatCivilDate(civilDateIn(new Date(ended.at - 1), term.zone))}`
    : "";
  const open = openQuestions(events, term.zone);
  const notes = open.map(
    ({ kind, since }) => ` Since ${formatCivilDate(since)} ${QUESTIONS[kind]?.words ?? kind}.`,
  );
  const starts = `: its term begins on ${formatCivilDate(term.startsOn)}`;
  const [answer, sentence]: [InForce["answer"], string] = whole
    ? ["in force", `In force on ${on}.`]
    : touching.length > 0
      ? ["in force for part of the day", `In force for part of ${on}${why}.`]
      : ["not in force", `Not in force on ${on}${why || starts}.`];
  return { answer, sentence: sentence + notes.join(""), open };
}

function openQuestions(events: readonly StatusEvent[], zone: string): InForce["open"] {
  const open = new Map<StatusKind, CivilDate>();
  for (const event of events) {
    for (const [kind, { closedBy }] of Object.entries(QUESTIONS))
      if (closedBy.includes(event.kind)) open.delete(kind as StatusKind);
    if (QUESTIONS[event.kind] && !open.has(event.kind))
      open.set(event.kind, civilDateIn(new Date(event.at), zone));
  }
  return [...open].map(([kind, since]) => ({ kind, since }));
}
