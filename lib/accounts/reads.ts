import { and, asc, eq, inArray } from "drizzle-orm";
import type { Reader } from "@/db/client";
import { companies, confirmedNames, memberships, people } from "@/db/schema/accounts";
import { checkIpiNameNumber } from "@/lib/kernel/identifiers";
import { isLive } from "./live";
import type { Role } from "./states";

/** For other rooms' verbs, within their own authorisation. */
export interface PersonRef {
  id: string;
  name: string;
  email: string;
  timeZone: string;
}

const REF = { id: people.id, name: people.name, email: people.email, timeZone: people.timeZone };

export async function personName(reader: Reader, id: string): Promise<string | null> {
  const [row] = await reader.select({ name: people.name }).from(people).where(eq(people.id, id));
  return row?.name ?? null;
}

export async function peopleByIds(reader: Reader, ids: readonly string[]): Promise<Map<string, PersonRef>> {
  if (ids.length === 0) return new Map();
  const rows = await reader
    .select(REF)
    .from(people)
    .where(inArray(people.id, [...new Set(ids)]));
  return new Map(rows.map((row) => [row.id, row]));
}

export interface ConfirmedName {
  personId: string;
  legalName: string;
  creditName: string;
  ipi: string | null;
  society: string | null;
  confirmedAt: Date;
}

const CONFIRMED = {
  personId: confirmedNames.personId,
  legalName: confirmedNames.legalName,
  creditName: confirmedNames.creditName,
  ipi: confirmedNames.ipi,
  society: confirmedNames.society,
  confirmedAt: confirmedNames.confirmedAt,
};

/** A writer's name and IPI as this library has confirmed them, or null. */
export async function confirmedName(
  reader: Reader,
  libraryId: string,
  personId: string,
): Promise<ConfirmedName | null> {
  return (await confirmedNamesOf(reader, libraryId, [personId])).get(personId) ?? null;
}

export async function confirmedNamesOf(
  reader: Reader,
  libraryId: string,
  personIds: readonly string[],
): Promise<Map<string, ConfirmedName>> {
  if (personIds.length === 0) return new Map();
  const rows = await reader
    .select(CONFIRMED)
    .from(confirmedNames)
    .where(
      and(eq(confirmedNames.libraryId, libraryId), inArray(confirmedNames.personId, [...new Set(personIds)])),
    );
  return new Map(rows.map((row) => [row.personId, row]));
}

/** Everybody who holds a role now in a library, or for the marketplace where `libraryId` is null. */
export async function peopleWithRole(
  reader: Reader,
  role: Role,
  libraryId: string | null,
): Promise<PersonRef[]> {
  const rows = await reader
    .select({ ...REF, libraryId: memberships.libraryId, disabledAt: people.disabledAt })
    .from(memberships)
    .innerJoin(people, eq(people.id, memberships.personId))
    .where(and(eq(memberships.role, role), isLive()))
    .orderBy(asc(memberships.createdAt), asc(memberships.id));
  return rows
    .filter((row) => row.libraryId === libraryId && row.disabledAt === null)
    .map(({ libraryId: _libraryId, disabledAt: _disabledAt, ...ref }) => ref);
}

export interface Seat extends PersonRef {
  membershipId: string;
  mayApprove: boolean;
}

export async function seatsOf(reader: Reader, companyId: string): Promise<Seat[]> {
  return reader
    .select({ ...REF, membershipId: memberships.id, mayApprove: memberships.mayApprove })
    .from(memberships)
    .innerJoin(people, eq(people.id, memberships.personId))
    .where(and(eq(memberships.companyId, companyId), eq(memberships.role, "buyer"), isLive()))
    .orderBy(asc(people.name));
}

export interface Company {
  id: string;
  name: string;
  address: string;
  countryCode: string;
  taxNumber: string | null;
}

export async function companiesByIds(reader: Reader, ids: readonly string[]): Promise<Map<string, Company>> {
  if (ids.length === 0) return new Map();
  const rows = await reader
    .select({
      id: companies.id,
      name: companies.name,
      address: companies.address,
      countryCode: companies.countryCode,
      taxNumber: companies.taxNumber,
    })
    .from(companies)
    .where(inArray(companies.id, [...new Set(ids)]));
  return new Map(rows.map((row) => [row.id, row]));
}

export async function companyById(reader: Reader, id: string): Promise<Company | null> {
  return (await companiesByIds(reader, [id])).get(id) ?? null;
}

export async function holdsRole(
  reader: Reader,
  personId: string,
  role: Role,
  libraryId: string,
): Promise<boolean> {
  const [row] = await reader
    .select({ id: memberships.id })
    .from(memberships)
    .where(
      and(
        eq(memberships.personId, personId),
        eq(memberships.role, role),
        eq(memberships.libraryId, libraryId),
        isLive(),
      ),
    )
    .limit(1);
  return row !== undefined;
}

export interface WriterRef {
  personId: string;
  name: string;
  /** Null until the library has confirmed name and IPI. */
  confirmed: { creditName: string; ipi: string | null } | null;
}

/** A writer of this library by exact IPI or exact address; nobody else is found. */
export async function writerOnRoster(
  reader: Reader,
  by: { libraryId: string; ipi?: string | undefined; email?: string | undefined },
): Promise<WriterRef | null> {
  const ipi = by.ipi ? checkIpiNameNumber(by.ipi) : null;
  if (ipi && !ipi.ok) return null;
  const [row] = await reader
    .select({
      personId: people.id,
      name: people.name,
      creditName: confirmedNames.creditName,
      ipi: confirmedNames.ipi,
    })
    .from(memberships)
    .innerJoin(people, eq(people.id, memberships.personId))
    .leftJoin(
      confirmedNames,
      and(eq(confirmedNames.personId, people.id), eq(confirmedNames.libraryId, memberships.libraryId)),
    )
    .where(
      and(
        eq(memberships.libraryId, by.libraryId),
        eq(memberships.role, "composer"),
        isLive(),
        ...(ipi?.ok ? [eq(confirmedNames.ipi, ipi.normalised)] : []),
        ...(by.email ? [eq(people.email, by.email)] : []),
      ),
    )
    .limit(1);
  if (!row) return null;
  const { personId, name, creditName } = row;
  return { personId, name, confirmed: creditName === null ? null : { creditName, ipi: row.ipi } };
}
