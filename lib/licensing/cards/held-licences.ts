import { and, eq } from "drizzle-orm";
import type { Reader } from "@/db/client";
import { licenceRecords } from "@/db/schema/licensing";
import { civilDateIn } from "@/lib/kernel/calendar";
import type { RateCard, Use } from "../rate-card";
import { inForceOn } from "../record/in-force";
import type { LicenceRecord, LicenceScope } from "../record/schema";
import { statusHistory } from "../records/record-log";

function coversTerritory(scope: LicenceScope, card: RateCard, use: Use): boolean {
  if (scope.territory.kind === "world") return true;
  const { territory } = use;
  if (territory.kind === "world") return false;
  const wanted =
    territory.kind === "country"
      ? [territory.country]
      : (card.regions.find(({ code }) => code === territory.region)?.countries ?? []);
  return wanted.every((country) => scope.territory.countries.includes(country));
}

/** Whether a licence already gives what is wanted, or less is wanted of the same media. */
function covers(scope: LicenceScope, card: RateCard, use: Use): boolean {
  return (
    scope.media.code === use.mediaClass &&
    coversTerritory(scope, card, use) &&
    scope.quantity.episodes >= use.episodes &&
    scope.quantity.cutdowns >= use.cutdowns
  );
}

/** Numbers of the company's licences in force for the same cue, production and scope. */
export async function heldLicences(
  reader: Reader,
  wish: { companyId: string; productionId: string; familyId: string; card: RateCard; use: Use; now: Date },
): Promise<string[]> {
  const rows = await reader
    .select({ number: licenceRecords.number, canonical: licenceRecords.canonical })
    .from(licenceRecords)
    .where(
      and(
        eq(licenceRecords.companyId, wish.companyId),
        eq(licenceRecords.productionId, wish.productionId),
        eq(licenceRecords.familyId, wish.familyId),
      ),
    );
  const held: string[] = [];
  for (const { number, canonical } of rows) {
    const { scope } = JSON.parse(canonical) as LicenceRecord;
    if (!covers(scope, wish.card, wish.use)) continue;
    const today = civilDateIn(wish.now, scope.term.zone);
    const { answer } = inForceOn(await statusHistory(reader, number), scope.term, today);
    if (answer !== "not in force") held.push(number);
  }
  return held;
}
