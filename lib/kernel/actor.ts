/** Who is acting, in which role. One person may hold several roles; an actor is one of them in use. */
export type Actor =
  | { kind: "anonymous" }
  | Person<"person", object>
  | Person<"composer", { libraryId: string }>
  | Person<"owner", { libraryId: string }>
  | Person<"staff", { libraryId: string; granted: readonly string[] }>
  | Person<"moderator", { libraryId: string | null }>
  | Person<"buyer", { companyId: string; mayApprove: boolean }>
  | Person<"accountant", { libraryId: string | null }>
  | Person<"auditor", { libraryId: string | null; untilAt: string }>
  | Person<"admin", object>
  | { kind: "guest"; linkId: string; name: string }
  | { kind: "system"; job: string };

type Person<K extends string, Scope> = {
  kind: K;
  personId: string;
  name: string;
  /** When the second factor was last given; money, keys and roles ask for it within ten minutes. */
  secondFactorAt?: string | null;
} & Scope;

export type ActorKind = Actor["kind"];
export type ActorOf<K extends ActorKind> = Extract<Actor, { kind: K }>;
/** Any actor behind whom stands a signed-in person. */
export type SignedIn = Exclude<Actor, { kind: "anonymous" | "guest" | "system" }>;

export const SIGNED_IN = [
  "person",
  "composer",
  "owner",
  "staff",
  "moderator",
  "buyer",
  "accountant",
  "auditor",
  "admin",
] as const satisfies readonly SignedIn["kind"][];

export const EVERYONE = [
  "anonymous",
  "guest",
  ...SIGNED_IN,
  "system",
] as const satisfies readonly ActorKind[];

export const ANONYMOUS: Actor = { kind: "anonymous" };

export const system = (job: string): ActorOf<"system"> => ({ kind: "system", job });

export function isSignedIn(actor: Actor): actor is SignedIn {
  return "personId" in actor;
}

/** A moderator or accountant of the marketplace itself belongs to no library. */
export function isMarketplace(actor: Actor): boolean {
  return (actor.kind === "moderator" || actor.kind === "accountant") && actor.libraryId === null;
}

/** One line for the audit log: kind, person or job, scope. */
export function describeActor(actor: Actor): {
  kind: ActorKind;
  personId: string | null;
  scope: string | null;
} {
  switch (actor.kind) {
    case "anonymous":
      return { kind: actor.kind, personId: null, scope: null };
    case "guest":
      return { kind: actor.kind, personId: null, scope: actor.linkId };
    case "system":
      return { kind: actor.kind, personId: null, scope: actor.job };
    case "person":
    case "admin":
      return { kind: actor.kind, personId: actor.personId, scope: null };
    case "buyer":
      return { kind: actor.kind, personId: actor.personId, scope: actor.companyId };
    case "composer":
    case "owner":
    case "staff":
    case "moderator":
    case "accountant":
    case "auditor":
      return { kind: actor.kind, personId: actor.personId, scope: actor.libraryId };
  }
}
