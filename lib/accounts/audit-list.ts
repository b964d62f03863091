import { eq, inArray } from "drizzle-orm";
import type { Reader } from "@/db/client";
import { invitations, memberships, people } from "@/db/schema/accounts";
import type { ActorOf } from "@/lib/kernel/actor";
import { type AuditRow, listAuditRows } from "@/lib/kernel/audit-list";
import { open, query } from "@/lib/kernel/verb";
import { peopleByIds } from "./reads";
import { AuditPage } from "./schemas";

export interface AuditLine {
  id: string;
  at: Date;
  /** The trade's own time, where it differs: in a demonstration. */
  businessAt: Date;
  who: string;
  role: string;
  /** "catalogue: place hold" */
  did: string;
  subject: string;
  /** The subject as a name, where it is a person, a role or an invitation. */
  subjectName: string | null;
}

const PAGE_ROWS = 50;

/** "catalogue.placeHold" becomes "catalogue: place hold". */
export function verbInWords(verb: string): string {
  const [room = "", name = ""] = verb.split(".");
  return `${room}: ${name.replace(/[A-Z]/g, (letter) => ` ${letter.toLowerCase()}`)}`;
}

/** Names for this room's own subjects. The rows are the looker's to read, so these names are too. */
async function subjectNames(reader: Reader, subjects: readonly string[]): Promise<Map<string, string>> {
  const of = (prefix: string) => [...new Set(subjects.filter((subject) => subject.startsWith(`${prefix}_`)))];
  const names = new Map<string, string>();
  for (const person of (await peopleByIds(reader, of("per"))).values()) names.set(person.id, person.name);
  const roles = of("mem");
  if (roles.length > 0) {
    const rows = await reader
      .select({ id: memberships.id, name: people.name, role: memberships.role })
      .from(memberships)
      .innerJoin(people, eq(people.id, memberships.personId))
      .where(inArray(memberships.id, roles));
    for (const row of rows) names.set(row.id, `${row.name}, ${row.role}`);
  }
  const invited = of("inv");
  if (invited.length > 0) {
    const rows = await reader
      .select({ id: invitations.id, name: invitations.name, role: invitations.role })
      .from(invitations)
      .where(inArray(invitations.id, invited));
    for (const row of rows) names.set(row.id, `${row.name}, ${row.role}`);
  }
  return names;
}

type Looker = ActorOf<"owner" | "auditor" | "admin">;

/** A library reads the names of its own people; of the marketplace's and of strangers it reads the role. */
function whoFor(looker: Looker, row: AuditRow, names: ReadonlyMap<string, { name: string }>): string {
  if (row.actorKind === "system") return "Sedgewren";
  if (row.actorKind === "anonymous") return "somebody not signed in";
  if (row.actorKind === "guest") return "a guest";
  const isWithin =
    looker.kind === "admin" || looker.libraryId === null || row.actorScope === looker.libraryId;
  const isMarketplace = row.actorScope === null && ["moderator", "accountant"].includes(row.actorKind);
  const name = row.actorPersonId ? names.get(row.actorPersonId)?.name : undefined;
  if (isWithin && name) return name;
  const role = `${/^[aeiou]/.test(row.actorKind) ? "an" : "a"} ${row.actorKind}`;
  return isMarketplace ? `${role} of the marketplace` : role;
}

export const auditList = query({
  name: "accounts.auditList",
  who: ["owner", "auditor", "admin"],
  input: AuditPage,
  authorise: open("an owner and an auditor read what concerns their library, an admin everything"),
  run: async ({ reader, actor, input }): Promise<{ lines: AuditLine[]; next: string | null }> => {
    const libraryId = actor.kind === "admin" ? null : actor.libraryId;
    const rows = await listAuditRows(reader, {
      ...(libraryId ? { libraryId } : {}),
      ...(input.subject ? { subject: input.subject } : {}),
      ...(input.after ? { after: input.after } : {}),
      limit: PAGE_ROWS + 1,
    });
    const shown = rows.slice(0, PAGE_ROWS);
    const names = await peopleByIds(
      reader,
      shown.flatMap((row) => row.actorPersonId ?? []),
    );
    const subjects = await subjectNames(
      reader,
      shown.map((row) => row.subject),
    );
    return {
      lines: shown.map((row) => ({
        id: row.id,
        at: row.systemAt,
        businessAt: row.businessAt,
        who: whoFor(actor, row, names),
        role: row.actorKind,
        did: verbInWords(row.verb),
        subject: row.subject,
        subjectName: subjects.get(row.subject) ?? null,
      })),
      next: rows.length > PAGE_ROWS ? (shown.at(-1)?.id ?? null) : null,
    };
  },
});
