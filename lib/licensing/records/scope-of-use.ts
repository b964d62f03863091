import type { CivilDate } from "@/lib/kernel/calendar";
import { MEDIA } from "../media";
import type { RateCard, Use } from "../rate-card";
import type { LicenceRecordInput } from "../record/schema";
import {
  ARCHIVE_RULE,
  CUE_SHEET_DAYS,
  EDITS_ALLOWED,
  EDITS_NOT_ALLOWED,
  NON_EXCLUSIVE,
  PROMO_RULE,
  TOP_UP_DAYS,
} from "../terms";

type Scope = LicenceRecordInput["scope"];

const countryNames = new Intl.DisplayNames("en-GB", { type: "region" });

export function countryName(code: string): string {
  return countryNames.of(code) ?? code;
}

function territoryOf(card: RateCard, use: Use): Scope["territory"] {
  const row = card.classes.find(({ code }) => code === use.mediaClass);
  if (row?.worldIncluded || use.territory.kind === "world")
    return { kind: "world", words: "The World", countries: [], listVersion: null };
  if (use.territory.kind === "country") {
    const { country } = use.territory;
    return { kind: "country", words: countryName(country), countries: [country], listVersion: null };
  }
  const wanted = use.territory.region;
  const region = card.regions.find(({ code }) => code === wanted);
  if (!region) throw new RangeError(`the card has no region ${wanted}`);
  return {
    kind: "region",
    words: region.words,
    countries: region.countries,
    listVersion: card.version,
  };
}

function audienceOf(card: RateCard, use: Use): Scope["audience"] {
  const tier = card.classes.find(({ code }) => code === use.mediaClass)?.tier;
  if (tier?.kind !== "bands" || !use.tier) return null;
  const chosen = use.tier;
  const band =
    "band" in chosen
      ? tier.bands[chosen.band]
      : tier.bands.find(
          ({ limit, including }) =>
            limit === null || chosen.amount < limit || (including && chosen.amount === limit),
        );
  return band ? { measure: tier.measure, band: band.words, topUpDays: TOP_UP_DAYS } : null;
}

/** Every dimension of the grant for one use of one cue, as it stands in the record. */
export function scopeOfUse(args: {
  card: RateCard;
  use: Use;
  startsOn: CivilDate;
  zone: string;
  refusedUses: readonly string[];
  creditLine: string;
  voice: string;
}): Scope {
  const { card, use } = args;
  const row = card.classes.find(({ code }) => code === use.mediaClass);
  if (!row) throw new RangeError(`the card has no class ${use.mediaClass}`);
  const media = MEDIA[row.code];
  return {
    media: { code: row.code, words: row.words, included: [...media.included] },
    territory: territoryOf(card, use),
    term: {
      startEvent: "licence date",
      startsOn: args.startsOn,
      months: use.termMonths,
      zone: args.zone,
      archiveRule: ARCHIVE_RULE,
    },
    exclusivity: { kind: "none", words: NON_EXCLUSIVE },
    quantity: {
      productions: 1,
      episodes: use.episodes,
      cutdowns: use.cutdowns,
      tagChanges: use.tagChanges,
    },
    audience: audienceOf(card, use),
    use: {
      placement: "any",
      lyricsHeard: args.voice !== "none",
      maxDurationS: use.musicS === undefined ? null : Math.ceil(use.musicS / 30) * 30,
    },
    edits: { allowed: [...EDITS_ALLOWED], notAllowed: [...EDITS_NOT_ALLOWED] },
    contextLimits: [...args.refusedUses],
    credit: media.credit ? args.creditLine : null,
    cueSheetDays: media.cueSheet ? CUE_SHEET_DAYS : null,
    options: [],
    promo: PROMO_RULE,
  };
}
