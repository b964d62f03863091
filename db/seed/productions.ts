import type { ActorOf } from "@/lib/kernel/actor";
import { withBusinessClock } from "@/lib/kernel/clock";
import { createProduction, setProductionUse } from "@/lib/productions";
import type { CompanyKey } from "./data/people";
import { productions } from "./data/productions";
import { type DemoWorld, personOf } from "./world";

/** The seat that acts for each company in the demonstration. */
const SEATS: Partial<Record<CompanyKey, string>> = {
  thistlemoth: "beatrix",
  quillbeck: "ysolde",
  "plumb-ferrule": "yevgenia",
  lorne: "lorne",
};

export function buyerActor(world: DemoWorld, company: CompanyKey): ActorOf<"buyer"> | null {
  const key = SEATS[company];
  const companyId = world.companies.get(company);
  if (!key || !companyId) return null;
  const person = personOf(world, key);
  return { kind: "buyer", personId: person.id, name: person.name, companyId, mayApprove: true };
}

/** The production of a licence, made on first use by a seat of its company; companies without a seat have none here. */
export async function productionOf(
  world: DemoWorld,
  key: string,
  part: string | null = null,
): Promise<string | null> {
  const row = productions.find((candidate) => candidate.key === key);
  const actor = row ? buyerActor(world, row.company) : null;
  if (!row || !actor) return null;
  const name = `demo:production:${key}${part ? `:${part}` : ""}`;
  return withBusinessClock(new Date("2026-01-12T09:00:00Z"), async () => {
    const { productionId } = await createProduction(
      actor,
      { title: row.title, codeName: null, episode: part, kind: row.kind.slice(0, 60), client: row.client },
      { operationId: name },
    );
    if (key === "tide-tables" && part === "episode 4") {
      await setProductionUse(
        actor,
        {
          productionId,
          use: {
            mediaClass: "MC06",
            territory: { kind: "region", region: "UK+IE" },
            termMonths: 36,
            episodes: 1,
          },
        },
        { operationId: `${name}:use` },
      );
    }
    return productionId;
  });
}
