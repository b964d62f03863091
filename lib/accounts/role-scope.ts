import { and, desc, eq } from "drizzle-orm";
import type { Tx } from "@/db/client";
import { companies, memberships } from "@/db/schema/accounts";
import type { Actor } from "@/lib/kernel/actor";
import { businessNow } from "@/lib/kernel/clock";
import { Forbidden, Invalid, NotFound } from "@/lib/kernel/errors";
import type { GrantMembership } from "./schemas";
import { MARKETPLACE, OWNER_GIVES, type Role } from "./states";

export type RoleFields = Omit<GrantMembership, "personId">;
export type Scoped = Omit<RoleFields, "scopeName"> & { scopeName: string };

const LIBRARY_ONLY: readonly Role[] = ["composer", "owner", "staff"];
const LIBRARY_OR_MARKETPLACE: readonly Role[] = ["moderator", "accountant", "auditor"];

/** The role as this actor may give it: an owner in the own library, an approver in the own company, an admin anywhere. */
export function roleWithinReach(actor: Actor, given: RoleFields): RoleFields {
  switch (actor.kind) {
    case "admin":
    case "system":
      return given;
    case "owner": {
      if (given.libraryId !== null && given.libraryId !== actor.libraryId) throw new NotFound();
      if (!(OWNER_GIVES as readonly Role[]).includes(given.role)) {
        throw new Forbidden(`A library's owner gives these roles: ${OWNER_GIVES.join(", ")}.`);
      }
      return { ...given, libraryId: actor.libraryId, scopeName: null };
    }
    case "buyer": {
      if (given.companyId !== null && given.companyId !== actor.companyId) throw new NotFound();
      if (given.role !== "buyer" || !actor.mayApprove) {
        throw new Forbidden("Seats in a company are given by those who may approve in it, and nothing else.");
      }
      return { ...given, companyId: actor.companyId, scopeName: null };
    }
    default:
      throw new Forbidden();
  }
}

function checkScope({ role, libraryId, companyId, endsAt }: RoleFields): void {
  const isWrong = (field: string, message: string) => new Invalid(message, { [field]: message });
  if (LIBRARY_ONLY.includes(role) && !libraryId)
    throw isWrong("libraryId", `The role ${role} is held in a library.`);
  if (role === "buyer" && !companyId) throw isWrong("companyId", "A buyer has a seat in a company.");
  if (role !== "buyer" && companyId) throw isWrong("companyId", "Only buyers belong to a company.");
  if ((role === "admin" || role === "buyer") && libraryId) {
    throw isWrong("libraryId", `The role ${role} is not held in a library.`);
  }
  if (role === "auditor" && !endsAt) throw isWrong("endsAt", "An auditor's access has a stated end.");
  if (endsAt && endsAt <= businessNow()) throw isWrong("endsAt", "The end lies in the past.");
}

async function nameOfScope(tx: Tx, given: RoleFields): Promise<string> {
  if (given.role === "admin") return "Sedgewren";
  if (given.companyId) {
    const [company] = await tx.select().from(companies).where(eq(companies.id, given.companyId));
    if (!company) throw new NotFound();
    return company.name;
  }
  if (!given.libraryId) return LIBRARY_OR_MARKETPLACE.includes(given.role) ? MARKETPLACE : "";
  if (given.scopeName) return given.scopeName;
  const [known] = await tx
    .select({ scopeName: memberships.scopeName })
    .from(memberships)
    .where(and(eq(memberships.libraryId, given.libraryId)))
    .orderBy(desc(memberships.createdAt))
    .limit(1);
  if (!known)
    throw new Invalid("The first role in a library is given together with the library's name.", {
      scopeName: "The library's name is needed.",
    });
  return known.scopeName;
}

/** Checks that role and scope belong together, and names the scope. */
export async function scopeRole(tx: Tx, given: RoleFields): Promise<Scoped> {
  checkScope(given);
  return {
    role: given.role,
    libraryId: given.libraryId,
    companyId: given.companyId,
    mayApprove: given.role === "buyer" && given.mayApprove,
    granted: given.role === "staff" ? given.granted : [],
    scopeName: await nameOfScope(tx, given),
    endsAt: given.endsAt,
  };
}
