import type { Reader } from "@/db/client";
import { type libraryById, openHolds, splitAt } from "@/lib/catalogue";
import { certificateOf } from "@/lib/screening";
import type { RateCard, Use } from "../rate-card";

type Library = NonNullable<Awaited<ReturnType<typeof libraryById>>>;

export interface FamilyForSale {
  id: string;
  state: string;
  headRecordingId: string | null;
  restrictedTerritories: string[];
}

/** Why a cue cannot be sold now for a use: the library must answer, or nobody can have it now. */
export interface Obstacle {
  reason: "quote" | "not available";
  sentence: string;
}

const WHOLE_BPS = 10_000;
const total = (rows: ReadonlyArray<{ shareBps: number }>) => rows.reduce((sum, row) => sum + row.shareBps, 0);

async function shareObstacle(
  reader: Reader,
  family: FamilyForSale,
  library: Library,
  at: Date,
): Promise<Obstacle | null> {
  const quote = (sentence: string): Obstacle => ({ reason: "quote", sentence });
  const split = await splitAt(reader, family.id, at);
  const isWhole = split !== null && total(split.writers) === WHOLE_BPS;
  if (!isWhole || split.writers.some((writer) => writer.acceptedAt === null || writer.personId === null))
    return quote(`Not every writer's share of this cue is settled; ${library.name} has to answer.`);
  const others = split.publishers.filter(
    ({ ipi, name }) => ipi !== library.publisherIpi && name !== library.name,
  );
  if (others.length > 0 || (split.publishers.length > 0 && total(split.publishers) !== WHOLE_BPS))
    return quote(
      `A share of this cue is not ${library.name}'s to license; it has to ask the other publisher.`,
    );
  return null;
}

function countriesOf(card: RateCard, use: Use): "World" | readonly string[] {
  const row = card.classes.find(({ code }) => code === use.mediaClass);
  const { territory } = use;
  if (row?.worldIncluded || territory.kind === "world") return "World";
  if (territory.kind === "country") return [territory.country];
  return card.regions.find(({ code }) => code === territory.region)?.countries ?? [];
}

function territoryObstacle(family: FamilyForSale, card: RateCard, use: Use): Obstacle | null {
  const countries = countriesOf(card, use);
  const restricted = family.restrictedTerritories.filter(
    (country) => countries === "World" || countries.includes(country),
  );
  if (restricted.length === 0) return null;
  return {
    reason: "quote",
    sentence: `The rights in ${restricted.join(", ")} are not the library's alone; it has to answer for that territory.`,
  };
}

/**
 * LICENSING-2, the sale guard: listed, no hold (an exclusive licence of another is one), screened, every share controlled,
 * the territory not restricted. Asked for a price, again when an order is approved, and again under the family's lock when
 * its payment has come.
 */
export async function saleObstacle(
  reader: Reader,
  sale: { family: FamilyForSale; library: Library; card: RateCard; use: Use; at: Date },
): Promise<Obstacle | null> {
  const { family, library, card, use, at } = sale;
  if (family.state !== "listed")
    return { reason: "not available", sentence: "This cue is not listed any more." };
  const [hold] = await openHolds(reader, family.id);
  if (hold)
    return {
      reason: "not available",
      sentence:
        hold.cause === "exclusive"
          ? "This cue is licensed exclusively to somebody else for now."
          : "This cue is on hold: a question about its rights is open.",
    };
  if (!family.headRecordingId || !(await certificateOf(reader, family.headRecordingId)))
    return { reason: "not available", sentence: "This cue has no screening certificate yet." };
  return (await shareObstacle(reader, family, library, at)) ?? territoryObstacle(family, card, use);
}
