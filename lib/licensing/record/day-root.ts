import { addDays, type CivilDate } from "@/lib/kernel/calendar";
import { canonicalJson, type JsonValue } from "./canonical-json";
import { inclusionPath, leafHash, merkleRoot } from "./merkle-tree";
import type { StatusEvent } from "./schema";
import { type Inclusion, type Seal, type Signed, signStatement } from "./sign-record";
import { type SigningKey, sha256Hex } from "./signing-key";

/** One day's records and status lines. It names the day before, so the published roots form a chain. */
export interface DayRoot {
  readonly format: "sedgewren-day-root/1";
  readonly day: CivilDate;
  readonly keyId: string;
  readonly treeSize: number;
  readonly rootSha256: string;
  readonly previous: { readonly day: CivilDate; readonly sha256: string } | null;
}

/** The text that a seal or a status line is in the tree. */
export function leafOf(entry: Seal | StatusEvent): string {
  return canonicalJson(entry as unknown as JsonValue);
}

export function dayRootSha256(root: DayRoot): string {
  return sha256Hex(canonicalJson(root as unknown as JsonValue));
}

/** `leaves` in the order of their positions; a day without any still has a root, so that the chain has no gap. */
export function signDayRoot(
  day: CivilDate,
  leaves: readonly string[],
  previous: DayRoot | null,
  key: SigningKey,
): Signed<DayRoot> {
  if (previous && addDays(previous.day, 1) !== day)
    throw new RangeError(`the root of ${day} must follow that of the day before, not of ${previous.day}`);
  const statement: DayRoot = {
    format: "sedgewren-day-root/1",
    day,
    keyId: key.keyId,
    treeSize: leaves.length,
    rootSha256: merkleRoot(leaves.map(leafHash)).toString("hex"),
    previous: previous && { day: previous.day, sha256: dayRootSha256(previous) },
  };
  return signStatement(statement, key);
}

export function proveInclusion(
  leaves: readonly string[],
  position: number,
  root: Signed<DayRoot>,
): Inclusion {
  const path = inclusionPath(leaves.map(leafHash), position).map((hash) => hash.toString("hex"));
  return { leafIndex: position, path, root };
}
