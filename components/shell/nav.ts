import type { ActorKind } from "@/lib/kernel/actor";
import type { NavItem } from "./nav-links";

const CHECK: NavItem = { href: "/check", words: "Check a licence" };
const REPORT: NavItem = { href: "/report", words: "Report a work" };
const FIND: NavItem = { href: "/find", words: "Find a cue", also: ["/", "/cues", "/libraries"] };
const PRODUCTIONS: NavItem = { href: "/productions", words: "Productions" };
const LICENCES: NavItem = { href: "/records", words: "Licences", also: ["/orders"] };
const DELIVERIES: NavItem = { href: "/deliveries", words: "Deliveries", also: ["/deliver"] };
const MONEY: NavItem = { href: "/statements", words: "Statements" };

/** The areas of each role, in the order of their day. Every one of them is a screen that is there. */
export function navFor(kind: ActorKind, isMarketplace: boolean): NavItem[] {
  switch (kind) {
    case "composer":
      return [DELIVERIES, MONEY, FIND];
    case "owner":
      return [
        { href: "/sales", words: "Sales" },
        { href: "/payouts", words: "Payouts" },
        DELIVERIES,
        { href: "/rate-card", words: "Rate card" },
        { href: "/roster", words: "Roster" },
        { href: "/log", words: "Log" },
        FIND,
      ];
    case "staff":
      return [DELIVERIES, { href: "/roster", words: "Roster" }, FIND];
    case "moderator":
      return isMarketplace
        ? [
            { href: "/cases", words: "Review" },
            { href: "/reported-works", words: "Reported works" },
            { href: "/registers", words: "Registers" },
          ]
        : [
            { href: "/cases", words: "Review" },
            { href: "/registers", words: "Registers" },
          ];
    case "accountant":
      return isMarketplace
        ? [
            { href: "/payouts", words: "Payouts" },
            { href: "/trial-balance", words: "Trial balance" },
          ]
        : [
            { href: "/sales", words: "Sales" },
            { href: "/payouts", words: "Payouts" },
            { href: "/trial-balance", words: "Trial balance" },
          ];
    case "auditor":
      return [{ href: "/trial-balance", words: "Trial balance" }];
    case "admin":
      return [
        { href: "/people", words: "People" },
        { href: "/log", words: "Log" },
      ];
    case "buyer":
      return [FIND, PRODUCTIONS, LICENCES, CHECK, REPORT];
    case "anonymous":
    case "person":
    case "guest":
    case "system":
      return [FIND, CHECK, REPORT];
  }
}

export const FOOTER_LINKS = [
  { href: "/check", words: "Check a licence" },
  { href: "/report", words: "Report a work" },
] as const;
