import {
  confirmName,
  DEMO_PASSWORD,
  grantMembership,
  registerCompany,
  registerPerson,
  setUpDemonstrationFactor,
} from "@/lib/accounts";
import { createLibrary } from "@/lib/catalogue";
import { type ActorOf, system } from "@/lib/kernel/actor";
import { withBusinessClock } from "@/lib/kernel/clock";
import { assert } from "@/lib/kernel/errors";
import { recordAdvance } from "@/lib/ledger";
import { setRateCard } from "@/lib/licensing";
import { libraries } from "./data/libraries";
import { composers, type PersonRow, people, type RoleRow } from "./data/people";
import { companies } from "./data/productions";
import { demoRateCard } from "./rate-cards";

/*
 * Who and what is there before the first delivery. Every call carries an operation id of its own, so that asking again
 * returns the first result: the worker finds the same people by the same call.
 */
export const seeding = system("demonstration");

export interface DemoPerson {
  id: string;
  name: string;
  email: string;
  ipi: string | null;
  row: PersonRow;
}

export interface DemoWorld {
  libraries: ReadonlyMap<string, string>;
  companies: ReadonlyMap<string, string>;
  people: ReadonlyMap<string, DemoPerson>;
}

const once = (key: string) => ({ operationId: `demo:${key}` });
const NEEDS_CODE = ["owner", "moderator", "accountant", "admin"];
const SOCIETY = "demonstration society";

let world: Promise<DemoWorld> | null = null;

export function demoWorld(): Promise<DemoWorld> {
  world ??= build();
  return world;
}

async function build(): Promise<DemoWorld> {
  const libraryIds = new Map<string, string>();
  for (const row of libraries) {
    const { libraryId } = await createLibrary(
      seeding,
      {
        code: row.code,
        name: row.name,
        place: row.city,
        countryCode: row.country,
        currency: row.currency,
        timeZone: row.timeZone,
        publisherIpi: row.ipi,
        composerPoolBps: row.writersShareBps,
        character: row.character,
      },
      once(`library:${row.code}`),
    );
    libraryIds.set(row.code, libraryId);
    await withBusinessClock(new Date("2026-01-01T00:00:00Z"), () =>
      setRateCard(seeding, { libraryId, card: demoRateCard(row.currency) }, once(`card:${row.code}`)),
    );
  }
  const companyIds = new Map<string, string>();
  for (const row of companies) {
    const { companyId } = await registerCompany(
      seeding,
      {
        name: row.name,
        address: `1 Invented Street, ${row.country}`,
        countryCode: row.country,
        taxNumber: "",
      },
      once(`company:${row.key}`),
    );
    companyIds.set(row.key, companyId);
  }
  const demoPeople = new Map<string, DemoPerson>();
  for (const row of people) demoPeople.set(row.key, await bringPerson(row, libraryIds, companyIds));
  for (const row of composers) {
    const person = demoPeople.get(row.key);
    const libraryId = libraryIds.get("SM");
    if (row.unrecoupedAdvanceMinor > 0 && person && libraryId) {
      await recordAdvance(
        seeding,
        { libraryId, personId: person.id, amountMinor: BigInt(row.unrecoupedAdvanceMinor), currency: "GBP" },
        once(`advance:${row.key}`),
      );
    }
  }
  return { libraries: libraryIds, companies: companyIds, people: demoPeople };
}

async function bringPerson(
  row: PersonRow,
  libraryIds: ReadonlyMap<string, string>,
  companyIds: ReadonlyMap<string, string>,
): Promise<DemoPerson> {
  const { personId } = await registerPerson(
    seeding,
    { email: row.email, name: row.name, password: DEMO_PASSWORD, timeZone: row.timeZone, demo: true },
    once(`person:${row.key}`),
  );
  const roles = row.roles.filter((role) => role.role !== "client-guest");
  for (const [index, role] of roles.entries()) {
    await grantMembership(
      seeding,
      { personId, ...membershipOf(role, libraryIds, companyIds) },
      once(`role:${row.key}:${index}`),
    );
  }
  if (roles.some((role) => NEEDS_CODE.includes(role.role)))
    await setUpDemonstrationFactor(seeding, { personId }, once(`factor:${row.key}`));
  for (const role of roles) {
    if (role.role !== "composer") continue;
    const libraryId = libraryIds.get(role.library);
    if (row.ipi && libraryId) {
      await confirmName(
        seeding,
        { personId, libraryId, legalName: row.name, creditName: row.name, ipi: row.ipi, society: SOCIETY },
        once(`name:${row.key}:${role.library}`),
      );
    }
  }
  return { id: personId, name: row.name, email: row.email, ipi: row.ipi, row };
}

function membershipOf(
  role: RoleRow,
  libraryIds: ReadonlyMap<string, string>,
  companyIds: ReadonlyMap<string, string>,
) {
  const nameOf = (code: string) => libraries.find((library) => library.code === code)?.name ?? code;
  switch (role.role) {
    case "buyer":
      return {
        role: "buyer" as const,
        companyId: companyIds.get(role.company) ?? null,
        mayApprove: role.seat === "approve",
        scopeName: companies.find((company) => company.key === role.company)?.name ?? "",
      };
    case "admin":
      return { role: "admin" as const };
    case "moderator":
    case "accountant":
      return role.library === null
        ? { role: role.role }
        : {
            role: role.role,
            libraryId: libraryIds.get(role.library) ?? null,
            scopeName: nameOf(role.library),
          };
    case "library-staff":
      return {
        role: "staff" as const,
        libraryId: libraryIds.get(role.library) ?? null,
        scopeName: nameOf(role.library),
      };
    case "composer":
    case "owner":
      return {
        role: role.role,
        libraryId: libraryIds.get(role.library) ?? null,
        scopeName: nameOf(role.library),
      };
    case "client-guest":
      throw new Error("a client has no account");
  }
}

export function personOf(demo: DemoWorld, key: string): DemoPerson {
  const person = demo.people.get(key);
  assert(person, `nobody is called ${key} in the demonstration`);
  return person;
}

export function libraryOf(demo: DemoWorld, code: string): string {
  const id = demo.libraries.get(code);
  assert(id, `no library ${code} in the demonstration`);
  return id;
}

export function composerActor(demo: DemoWorld, key: string, code: string): ActorOf<"composer"> {
  const person = personOf(demo, key);
  return { kind: "composer", personId: person.id, name: person.name, libraryId: libraryOf(demo, code) };
}

export function ownerActor(demo: DemoWorld, code: string): ActorOf<"owner"> {
  const key = { SM: "morag", BC: "harriet", OA: "odile" }[code] ?? "morag";
  const person = personOf(demo, key);
  return {
    kind: "owner",
    personId: person.id,
    name: person.name,
    libraryId: libraryOf(demo, code),
    secondFactorAt: new Date().toISOString(),
  };
}
