import type { Actor } from "@/lib/kernel/actor";
import type { ErrorCode } from "@/lib/kernel/errors";

/** Two libraries, two buyer companies, and a person for every role in each. */
export interface World {
  libraryId: string;
  otherLibraryId: string;
  companyId: string;
  otherCompanyId: string;
  actors: Record<Column, Actor>;
}

export const COLUMNS = [
  "anonymous",
  "guest",
  "person",
  "composer",
  "otherComposer",
  "owner",
  "otherOwner",
  "staff",
  "moderator",
  "otherModerator",
  "marketplaceModerator",
  "buyer",
  "otherBuyer",
  "accountant",
  "otherAccountant",
  "marketplaceAccountant",
  "auditor",
  "admin",
  "system",
] as const;
export type Column = (typeof COLUMNS)[number];

export interface Row {
  /** Makes a fresh subject for the actor to try the verb on, and returns the verb's input. */
  input: (world: World, column: Column) => Promise<unknown>;
  may: readonly Column[];
  orAnswers?: readonly ErrorCode[];
}
export type Rows = Record<string, Row>;

export const REFUSALS: readonly ErrorCode[] = ["unauthenticated", "forbidden", "not_found"];
