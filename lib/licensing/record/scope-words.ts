import { formatCivilDate } from "@/lib/kernel/calendar";
import type { LicenceScope } from "./schema";

type Facts = Omit<LicenceScope, "words">;

function count(number: number, noun: string): string {
  return `${number} ${noun}${number === 1 ? "" : "s"}`;
}

function listOf(items: readonly string[]): string {
  return items.length < 2 ? items.join("") : `${items.slice(0, -1).join(", ")} and ${items.at(-1)}`;
}

function termWords({ term }: Facts): string {
  const start = `From ${formatCivilDate(term.startsOn)} (${term.startEvent})`;
  if (term.months === null || term.lastUseAt === null) return `${start}, without end. ${term.archiveRule}`;
  const length = term.months % 12 === 0 ? count(term.months / 12, "year") : count(term.months, "month");
  const last = `last use ${term.lastUseAt.slice(0, 10)} ${term.lastUseAt.slice(11, 19)} UTC`;
  return `${start} for ${length}; ${last}, which is the end of the day in ${term.zone}. ${term.archiveRule}`;
}

function quantityWords({ quantity }: Facts): string {
  const parts = [count(quantity.productions, "production"), count(quantity.episodes, "episode")];
  if (quantity.cutdowns > 0) parts.push(count(quantity.cutdowns, "extra cutdown"));
  if (quantity.tagChanges > 0) parts.push(count(quantity.tagChanges, "tag change"));
  return `${listOf(parts)}.`;
}

function placementWords({ use }: Facts): string {
  const placement = use.placement === "any" ? "Any placement" : `Placement: ${use.placement}`;
  const lyrics = use.lyricsHeard ? "lyrics may be heard" : "no lyrics heard";
  const length = use.maxDurationS === null ? "any length" : `at most ${use.maxDurationS} seconds`;
  return `${placement}; ${lyrics}; ${length}.`;
}

/** Every dimension of the grant as a sentence, made from the data so that the two cannot disagree. */
export function scopeWords(scope: Facts): Array<{ row: string; says: string }> {
  const { media, territory, exclusivity, audience, edits, contextLimits, credit, cueSheetDays, options } =
    scope;
  const countries = territory.countries.length > 0 ? ` (${territory.countries.join(", ")})` : "";
  const list = territory.listVersion === null ? "" : `, list ${territory.listVersion}`;
  const rows: Array<readonly [string, string]> = [
    ["Media", `${media.words}${media.included.length > 0 ? `: ${listOf(media.included)}` : ""}.`],
    ["Territory", `${territory.words}${countries}${list}.`],
    ["Term", termWords(scope)],
    ["Exclusivity", exclusivity.words],
    ["Productions, episodes and versions", quantityWords(scope)],
    [
      "Audience",
      audience === null
        ? "Not limited by audience."
        : `${audience.band} (${audience.measure}); beyond it, the licensee tops up within ${audience.topUpDays} days.`,
    ],
    ["Use", placementWords(scope)],
    ["Edits", `Allowed: ${listOf(edits.allowed)}. Not allowed: ${listOf(edits.notAllowed)}.`],
    [
      "Context",
      contextLimits.length > 0 ? `Not for ${listOf(contextLimits)}.` : "No limits of context stated.",
    ],
    ["Credit", credit ?? "No credit is required."],
    [
      "Cue sheet",
      cueSheetDays === null
        ? "No cue sheet is required."
        : `The licensee files a cue sheet within ${cueSheetDays} days of first transmission.`,
    ],
    ["Options", options.length > 0 ? options.join(" ") : "None."],
    ["Promotion", scope.promo],
  ];
  return rows.map(([row, says]) => ({ row, says }));
}
