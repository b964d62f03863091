import { gt, isNull, or } from "drizzle-orm";
import { memberships } from "@/db/schema/accounts";
import { businessNow } from "@/lib/kernel/clock";
import { Bug } from "@/lib/kernel/errors";
import { ROLES, type Role } from "./states";

/** Roles have terms, so their end is read on the business clock. */
export const isLive = () => or(isNull(memberships.endsAt), gt(memberships.endsAt, businessNow()));

export function roleOf(text: string): Role {
  const role = ROLES.find((one) => one === text);
  if (!role) throw new Bug(`no role is called ${text}`);
  return role;
}
