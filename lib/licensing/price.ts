import { minorUnits } from "@/lib/kernel/currencies";
import {
  addFractions,
  type Fraction,
  formatFraction,
  fraction,
  isOne,
  multiplyFractions,
  parseFraction,
  roundHalfUp,
} from "@/lib/kernel/fraction";
import { compareMoney, decimalOf, type Money, money, subtractMoney } from "@/lib/kernel/money";
import { type RateCard, type RateCardClass, Use, type UseInput } from "./rate-card";

export type FactorKind =
  | "base"
  | "territory"
  | "term"
  | "tier"
  | "episodes"
  | "versions"
  | "units"
  | "student or charity";

export interface PriceFactor {
  kind: FactorKind;
  label: string;
  /** Exact: "1.6", or "7/3" where no decimal is. */
  value: string;
}

/** `quote`: the owner answers. `not offered`: the card rules it out. `incomplete`: the buyer has not said enough. */
export type NoPrice = { ok: false; reason: "quote" | "not offered" | "incomplete"; sentence: string };

export type Price =
  | {
      ok: true;
      total: Money;
      factors: PriceFactor[];
      /** "150 × 1.6 × 1.6": the base and every factor that is not 1. */
      sentence: string;
      minimumApplied: boolean;
      inputs: Use;
      cardVersion: string;
    }
  | NoPrice;

type Step = { kind: FactorKind; label: string; value: Fraction };
type StepResult = Step | NoPrice;

const ONE = fraction(1n);

function quote(sentence: string): NoPrice {
  return { ok: false, reason: "quote", sentence: `${sentence} Ask for a quote.` };
}

function isNoPrice(result: StepResult): result is NoPrice {
  return "ok" in result;
}

function territoryStep(card: RateCard, row: RateCardClass, use: Use): StepResult {
  const step = (label: string, value: Fraction): Step => ({ kind: "territory", label, value });
  if (row.worldIncluded) return step("World, included in this class", ONE);
  if (use.territory.kind === "world") return step("World", parseFraction(card.territory.world));
  if (use.territory.kind === "country")
    return step(use.territory.country, parseFraction(card.territory.country));
  const wanted = use.territory.region;
  const region = card.regions.find(({ code }) => code === wanted);
  if (!region) return quote(`The card has no region “${wanted}”.`);
  return step(region.words, parseFraction(card.territory.region));
}

/** A term between two rows takes the next longer row. */
function termStep(card: RateCard, use: Use): StepResult {
  const row = card.terms.find(({ months }) =>
    use.termMonths === null ? months === null : months === null || months >= use.termMonths,
  );
  if (!row) return quote("The card has no row for so long a term.");
  return { kind: "term", label: row.words, value: parseFraction(row.factor) };
}

function tierStep(row: RateCardClass, use: Use): StepResult {
  const { tier } = row;
  if (tier.kind === "quote") return quote(`${row.words} is priced by the library for each use.`);
  if (tier.kind === "none") return { kind: "tier", label: "No size scale for this class", value: ONE };
  const chosen = use.tier;
  if (!chosen)
    return { ok: false, reason: "incomplete", sentence: `Say how large the use is: ${tier.measure}.` };
  const band =
    "band" in chosen
      ? tier.bands[chosen.band]
      : tier.bands.find(
          ({ limit, including }) =>
            limit === null || chosen.amount < limit || (including && chosen.amount === limit),
        );
  if (!band) {
    const largest = tier.bands.at(-1)?.words ?? "";
    return quote(`The card's largest size is ${largest} (${tier.measure}).`);
  }
  return { kind: "tier", label: `${band.words} (${tier.measure})`, value: parseFraction(band.factor) };
}

function episodesStep(card: RateCard, row: RateCardClass, use: Use): StepResult {
  if (!row.perEpisode) {
    if (use.episodes > 1) return quote("The card has no scale of episodes for this class.");
    return { kind: "episodes", label: "One production", value: ONE };
  }
  const scale = card.episodes.find(({ upTo }) => upTo >= use.episodes);
  if (!scale) return quote(`The card has no price for ${use.episodes} episodes.`);
  const label = scale.upTo === 1 ? "1 episode" : `Up to ${scale.upTo} episodes`;
  return { kind: "episodes", label, value: parseFraction(scale.factor) };
}

function versionsStep(card: RateCard, row: RateCardClass, use: Use): StepResult {
  const { cutdowns, tagChanges } = use;
  if (cutdowns + tagChanges === 0) return { kind: "versions", label: "One version", value: ONE };
  if (!row.cutdowns) return quote("The card prices extra versions for adverts only.");
  const extra = (count: number, factor: string) =>
    multiplyFractions(fraction(BigInt(count)), parseFraction(factor));
  const plural = (count: number, noun: string) => `${count} ${noun}${count === 1 ? "" : "s"}`;
  const label = [
    cutdowns > 0 && plural(cutdowns, "extra cutdown"),
    tagChanges > 0 && plural(tagChanges, "tag change"),
  ]
    .filter(Boolean)
    .join(", ");
  const value = addFractions(ONE, extra(cutdowns, card.cutdown), extra(tagChanges, card.tagChange));
  return { kind: "versions", label, value };
}

function unitsStep(card: RateCard, use: Use): StepResult {
  if (card.unit !== "30 seconds") return { kind: "units", label: `Per ${card.unit}`, value: ONE };
  if (use.musicS === undefined)
    return { ok: false, reason: "incomplete", sentence: "Say how many seconds of music are used." };
  const units = Math.ceil(use.musicS / 30);
  return { kind: "units", label: `${units} × 30 seconds of music`, value: fraction(BigInt(units)) };
}

function reductionStep(card: RateCard, row: RateCardClass, use: Use): StepResult {
  if (!use.studentOrCharity) return { kind: "student or charity", label: "No reduction", value: ONE };
  if (!row.studentOrCharity)
    return {
      ok: false,
      reason: "not offered",
      sentence: "The student and charity price is not offered for this class.",
    };
  return {
    kind: "student or charity",
    label: "Student or charity, against proof",
    value: parseFraction(card.studentOrCharity),
  };
}

function inMinorUnits(card: RateCard, amount: Fraction): Money {
  const scale = fraction(10n ** BigInt(minorUnits(card.currency)));
  return money(roundHalfUp(multiplyFractions(amount, scale)), card.currency);
}

/**
 * The card's price of one use: base × territory × term × tier × quantity × reduction as exact fractions, rounded
 * half-up once to the minor unit, never below the card's minimum. The same card and use give the same integer for
 * ever; what was sold is stored and not priced again.
 */
export function price(card: RateCard, wanted: UseInput): Price {
  const use = Use.parse(wanted);
  const row = card.classes.find(({ code }) => code === use.mediaClass);
  if (!row) return quote("This card has no price for that kind of media.");
  if (use.exclusive) return quote("An exclusive licence is a transfer of rights and is signed by the owner.");
  if (use.themeOrTitle) return quote("Theme and title music is priced by the library for each use.");
  const results = [
    territoryStep(card, row, use),
    termStep(card, use),
    tierStep(row, use),
    episodesStep(card, row, use),
    versionsStep(card, row, use),
    unitsStep(card, use),
    reductionStep(card, row, use),
  ];
  const refusal = results.find(isNoPrice);
  if (refusal) return refusal;
  const steps = results as Step[];
  const base = parseFraction(row.base);
  const computed = inMinorUnits(card, multiplyFractions(base, ...steps.map(({ value }) => value)));
  const minimum = inMinorUnits(card, parseFraction(card.minimumFee));
  const minimumApplied = compareMoney(computed, minimum) < 0;
  const product = [base, ...steps.map(({ value }) => value).filter((value) => !isOne(value))]
    .map(formatFraction)
    .join(" × ");
  return {
    ok: true,
    total: minimumApplied ? minimum : computed,
    factors: [{ kind: "base" as const, label: row.words, value: base }, ...steps].map((step) => ({
      ...step,
      value: formatFraction(step.value),
    })),
    sentence: minimumApplied
      ? `${product} = ${decimalOf(computed)}, raised to the minimum fee of ${decimalOf(minimum)}`
      : product,
    minimumApplied,
    inputs: use,
    cardVersion: card.version,
  };
}

/** What "from" means beside a cue: the lowest base, one year, one country, lowest tier, no reduction. */
export function fromPrice(card: RateCard): Money | null {
  const priced = card.classes.filter(({ tier }) => tier.kind !== "quote");
  const amount = (row: RateCardClass) => inMinorUnits(card, parseFraction(row.base));
  const lowest = priced.reduce<RateCardClass | null>(
    (best, row) => (best && compareMoney(amount(best), amount(row)) <= 0 ? best : row),
    null,
  );
  if (!lowest) return null;
  const result = price(card, {
    mediaClass: lowest.code,
    territory: { kind: "country", country: "GB" },
    termMonths: 12,
    tier: { band: 0 },
    musicS: 30,
  });
  return result.ok ? result.total : null;
}

export type TopUp = { ok: true; due: Money; credit: Money; price: Extract<Price, { ok: true }> } | NoPrice;

/** A wider licence for the same cue and production: today's price less the fee already paid, never below nothing. */
export function topUp(card: RateCard, wanted: UseInput, paid: Money): TopUp {
  const wider = price(card, wanted);
  if (!wider.ok) return wider;
  const due = subtractMoney(wider.total, paid);
  return { ok: true, due: due.minor > 0n ? due : money(0n, due.currency), credit: paid, price: wider };
}
