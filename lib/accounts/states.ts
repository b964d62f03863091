export const ROLES = [
  "composer",
  "owner",
  "staff",
  "moderator",
  "buyer",
  "accountant",
  "auditor",
  "admin",
] as const;
export type Role = (typeof ROLES)[number];

/** Roles that act only after a second factor. */
export const SECOND_FACTOR_ROLES: readonly Role[] = ["owner", "moderator", "accountant", "admin"];

/** Roles a library's owner may give. */
export const OWNER_GIVES = [
  "composer",
  "staff",
  "moderator",
  "accountant",
] as const satisfies readonly Role[];

/** What a library's staff may do besides preparing prices and quotes, if the owner has said so. */
export const STAFF_GRANTS = ["list", "editorial", "payouts"] as const;
export type StaffGrant = (typeof STAFF_GRANTS)[number];

export const STAFF_GRANT_WORDS: Readonly<Record<StaffGrant, string>> = {
  list: "list and unlist cues",
  editorial: "accept cues for listing",
  payouts: "see payouts",
};

export const ROLE_WORDS: Readonly<Record<Role, string>> = {
  composer: "composer",
  owner: "owner",
  staff: "staff",
  moderator: "moderator",
  buyer: "buyer",
  accountant: "accountant",
  auditor: "auditor",
  admin: "admin",
};

/** What a role is for, as a sentence to somebody who is offered it. */
export const ROLE_DUTIES: Readonly<Record<Role, string>> = {
  composer: "You deliver cues, follow their screening, answer questions about them and read your statements.",
  owner: "You run the library: its rate card, roster, editorial acceptance, sales and payouts.",
  staff: "You prepare prices and quotes for the library, and do what its owner grants beside that.",
  moderator: "You answer what screening has held, and confirm a colleague's refusals.",
  buyer:
    "You find, shortlist and propose music for the company's productions, and approve and pay where your seat says so.",
  accountant: "You reconcile the books and release payouts together with a second person.",
  auditor: "You read the journal, records and decisions for a stated time. Those audited see your access.",
  admin: "You look after accounts, keys and settings. You touch no money and take no decisions.",
};

/** As it reads after "as" and "you are now". */
export function roleInWords(role: Role, mayApprove: boolean): string {
  switch (role) {
    case "staff":
      return "a member of staff";
    case "buyer":
      return mayApprove ? "a buyer who may also approve and pay" : "a buyer who may propose";
    case "composer":
    case "moderator":
      return `a ${role}`;
    default:
      return `an ${role}`;
  }
}

export const MARKETPLACE = "the marketplace";

const BEFORE_SCOPE: Readonly<Record<Role, string>> = {
  composer: "at",
  owner: "of",
  staff: "at",
  moderator: "for",
  buyer: "for",
  accountant: "for",
  auditor: "of",
  admin: "of",
};

/** "composer at Saltmarrow Music Library", "moderator for the marketplace". */
export function roleLabel(role: Role, scopeName: string): string {
  return `${ROLE_WORDS[role]} ${BEFORE_SCOPE[role]} ${scopeName}`;
}

export const LINK_MINUTES = 10;
export const INVITATION_DAYS = 14;
export const SECOND_FACTOR_MINUTES = 10;
export const PASSWORD_LENGTH_ALONE = 15;
export const PASSWORD_LENGTH_WITH_SECOND_FACTOR = 8;
export const PASSWORD_LENGTH_MAX = 256;

/** Password of every person of the demonstration. Live mode knows no such people. */
export const DEMO_PASSWORD = "sedge by the water, 18 May";
