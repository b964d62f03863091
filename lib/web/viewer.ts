import "server-only";
import { cookies } from "next/headers";
import { getServerSession } from "next-auth";
import { cache } from "react";
import { authOptions, type RoleChoice, resolveViewer } from "@/lib/accounts";
import { type Actor, ANONYMOUS } from "@/lib/kernel/actor";

export interface Viewer {
  actor: Actor;
  person: { id: string; name: string; email: string } | null;
  /** Every role this person holds; the one in use has `current`. */
  roles: readonly RoleChoice[];
}

export const roleCookieName = "sedgewren-role";

/** Who is looking, in which role. Checked against the database on every request: a signed-out session stops at once. */
export const viewer = cache(async (): Promise<Viewer> => {
  const session = await getServerSession(authOptions);
  const claim = session?.sedgewren;
  if (!claim) return { actor: ANONYMOUS, person: null, roles: [] };
  const chosen = (await cookies()).get(roleCookieName)?.value ?? null;
  return (
    (await resolveViewer({ ...claim, membershipId: chosen })) ?? { actor: ANONYMOUS, person: null, roles: [] }
  );
});
