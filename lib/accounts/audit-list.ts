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
}

const PAGE_ROWS = 50;

/** "catalogue.placeHold" becomes "catalogue: place hold". */
export function verbInWords(verb: string): string {
  const [room = "", name = ""] = verb.split(".");
  return `${room}: ${name.replace(/[A-Z]/g, (letter) => ` ${letter.toLowerCase()}`)}`;
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
    return {
      lines: shown.map((row) => ({
        id: row.id,
        at: row.systemAt,
        businessAt: row.businessAt,
        who: whoFor(actor, row, names),
        role: row.actorKind,
        did: verbInWords(row.verb),
        subject: row.subject,
      })),
      next: rows.length > PAGE_ROWS ? (shown.at(-1)?.id ?? null) : null,
    };
  },
});
