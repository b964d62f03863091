import { withBusinessClock } from "@/lib/kernel/clock";
import { importLicence } from "@/lib/licensing";
import { licences } from "./data/licences";
import { companies, productions } from "./data/productions";
import { cueByNumber } from "./drafts";
import { productionOf } from "./productions";
import { familyOfCue, later } from "./turns";
import { useOf } from "./uses";
import { type DemoWorld, libraryOf, seeding } from "./world";

/** Licences that their libraries issued outside this service: their numbers kept, signed on import, no journal rows. */
const BROUGHT_IN = ["LR-2026-0103", "LR-2026-0107", "LR-2026-0108"];

export async function broughtInLicences(world: DemoWorld): Promise<void> {
  for (const row of licences.filter((candidate) => BROUGHT_IN.includes(candidate.number))) {
    const cue = cueByNumber(row.cueNumber);
    const familyId = await familyOfCue(world, row.cueNumber);
    if (!familyId) return later("licences:brought-in");
    const company = companies.find((candidate) => candidate.key === row.company);
    const production = productions.find((candidate) => candidate.key === row.production);
    const productionId = await productionOf(world, row.production, row.part);
    await withBusinessClock(new Date("2026-05-10T09:00:00Z"), () =>
      importLicence(
        seeding,
        {
          libraryId: libraryOf(world, cue.library),
          number: row.number,
          licensedOn: row.date,
          companyId: world.companies.get(row.company) ?? null,
          productionId,
          licensee: {
            name: company?.name ?? "",
            endClient: row.endClient,
            address: `1 Invented Street, ${company?.country ?? ""}`,
          },
          production: {
            title: production?.title ?? "",
            type: (production?.kind ?? "production").slice(0, 60),
            parts: row.part ?? (row.episodes > 1 ? `${row.episodes} episodes` : "all"),
          },
          familyId,
          use: useOf(row),
          net: (row.priceMinor / 100).toFixed(2),
          acceptedBy: null,
        },
        { operationId: `demo:licence:${row.number}` },
      ),
    );
  }
}
