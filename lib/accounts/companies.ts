import { eq } from "drizzle-orm";
import { companies, people } from "@/db/schema/accounts";
import { systemNow } from "@/lib/kernel/clock";
import { NotFound } from "@/lib/kernel/errors";
import { newId } from "@/lib/kernel/ids";
import { command } from "@/lib/kernel/verb";
import { addMembership } from "./memberships";
import { RegisterCompany } from "./schemas";

/** The person who registers a company gets its first seat and may approve. The system registers it without a seat. */
export const registerCompany = command({
  name: "accounts.registerCompany",
  who: [
    "person",
    "composer",
    "owner",
    "staff",
    "moderator",
    "buyer",
    "accountant",
    "auditor",
    "admin",
    "system",
  ],
  input: RegisterCompany,
  authorise: async ({ tx, actor }) => {
    if (actor.kind === "system") return null;
    const [row] = await tx
      .select({ id: people.id })
      .from(people)
      .where(eq(people.id, actor.personId))
      .for("update");
    if (!row) throw new NotFound();
    return row;
  },
  run: async ({ tx, input, subject: person }) => {
    const companyId = newId("com");
    await tx.insert(companies).values({ id: companyId, ...input, createdAt: systemNow() });
    const membershipId = person
      ? await addMembership(tx, person.id, {
          role: "buyer",
          libraryId: null,
          companyId,
          scopeName: input.name,
          mayApprove: true,
          granted: [],
          endsAt: null,
        })
      : null;
    return { companyId, membershipId };
  },
  audit: ({ result }) => ({ subject: result.companyId }),
});
