import { canonicalJson, type JsonValue } from "./canonical-json";
import { CONFIDENTIAL_FIELDS, type ConfidentialField } from "./confidential";
import type { LicenceTerm } from "./in-force";
import { isIncluded, leafHash } from "./merkle-tree";
import type { KeyList, StatusEvent } from "./schema";
import { publicKeyFromHex, sha256Hex, verifyHex } from "./signing-key";

/**
 * Checks a licence file against a published key list, with nothing else. The verifier at
 * public/verify/sedgewren-verify.mjs gives the same answers on its own; a test holds the two together.
 */
export interface PartResult {
  /** A top-level name of the record, a confidential field, or seal, status, inclusion, key, file. */
  part: string;
  verifies: "yes" | "no" | "not shown" | "cannot be checked";
}

export interface Verification {
  verdict: "genuine" | "altered" | "unknown";
  sentence: string;
  /** Names of the parts that do not verify. */
  failing: string[];
  parts: PartResult[];
  number: string | null;
  /** From the signed history; null where the file carries none that verifies. */
  asOf: string | null;
  events: StatusEvent[];
  term: LicenceTerm | null;
}

type Members = { readonly [name: string]: JsonValue };
type SignedState = {
  state: "yes" | "no" | "cannot be checked";
  statement: Members;
  key: KeyList["keys"][number] | null;
};

const MAX_CHARACTERS = 4_000_000;

function isObject(value: unknown): value is Members {
  return typeof value === "object" && value !== null && !Array.isArray(value);
}

function hasExactly(value: unknown, names: readonly string[]): value is Members {
  return (
    isObject(value) &&
    Object.keys(value).length === names.length &&
    names.every((name) => Object.hasOwn(value, name))
  );
}

/** A value that canonical JSON cannot hold has a text that nothing of ours has, so it never verifies. */
function textOf(value: JsonValue): string {
  try {
    return canonicalJson(value);
  } catch (error) {
    if (error instanceof TypeError) return "not canonical";
    throw error;
  }
}

function same(a: JsonValue | undefined, b: JsonValue | undefined): boolean {
  return a !== undefined && b !== undefined && textOf(a) === textOf(b);
}

function hashOf(value: JsonValue): string {
  return sha256Hex(textOf(value));
}

function countNames(value: JsonValue): number {
  if (Array.isArray(value)) return value.reduce<number>((sum, item) => sum + countNames(item), 0);
  if (!isObject(value)) return 0;
  return Object.values(value).reduce<number>((sum, item) => sum + 1 + countNames(item), 0);
}

/** A name written twice would let a reader see one value and a program another. */
function repeatsAName(text: string, value: JsonValue): boolean {
  const strings = text.matchAll(/"(?:[^"\\]|\\.)*"(\s*:)?/gs);
  let names = 0;
  for (const [, colon] of strings) if (colon) names++;
  return names !== countNames(value);
}

function checkSigned(signed: JsonValue | undefined, keys: KeyList): SignedState {
  const statement = isObject(signed) && isObject(signed.statement) ? signed.statement : {};
  const altered: SignedState = { state: "no", statement, key: null };
  if (!hasExactly(signed, ["statement", "signature"])) return altered;
  const { signature } = signed;
  if (!hasExactly(signature, ["keyId", "algorithm", "value"])) return altered;
  const named = keys.keys.filter(({ keyId }) => keyId === statement.keyId || keyId === signature.keyId);
  const [key] = named;
  if (!key) return { state: "cannot be checked", statement, key: null };
  const verifies =
    named.length === 1 &&
    statement.keyId === signature.keyId &&
    signature.algorithm === key.algorithm &&
    typeof signature.value === "string" &&
    verifyHex(textOf(statement), signature.value, publicKeyFromHex(key.publicKey));
  return { state: verifies ? "yes" : "no", statement, key };
}

function validAt(key: KeyList["keys"][number] | null, instant: JsonValue | undefined): boolean {
  if (!key || typeof instant !== "string") return false;
  return key.validFrom <= instant && (key.validUntil === null || instant <= key.validUntil);
}

function checkDisclosed(disclosed: JsonValue | undefined, record: Members): PartResult[] {
  if (!isObject(disclosed)) return [{ part: "file", verifies: "no" }];
  const strangers = Object.keys(disclosed).filter(
    (name) => !CONFIDENTIAL_FIELDS.includes(name as ConfidentialField),
  );
  const results = CONFIDENTIAL_FIELDS.map((field): PartResult => {
    const [part = "", inner] = field.split(".");
    const outer = record[part];
    const committed = inner === undefined ? outer : isObject(outer) ? outer[inner] : undefined;
    const shown = disclosed[field];
    if (shown === undefined) return { part: field, verifies: "not shown" };
    const fits =
      hasExactly(shown, ["salt", "value"]) &&
      same({ sha256: hashOf({ field, salt: shown.salt ?? null, value: shown.value ?? null }) }, committed);
    return { part: field, verifies: fits ? "yes" : "no" };
  });
  return [...results, ...strangers.map((part): PartResult => ({ part, verifies: "no" }))];
}

function checkStatus(status: JsonValue | undefined, record: Members, keys: KeyList) {
  if (status === null)
    return { result: { part: "status", verifies: "not shown" } as PartResult, statement: null };
  const { state, statement, key } = checkSigned(status, keys);
  const fits =
    statement.format === "sedgewren-licence-status/1" &&
    same(statement.number, record.number) &&
    statement.recordSha256 === hashOf(record) &&
    validAt(key, statement.asOf);
  const verifies = state === "yes" && !fits ? "no" : state;
  return {
    result: { part: "status", verifies } as PartResult,
    statement: verifies === "yes" ? statement : null,
  };
}

function checkInclusion(
  inclusion: JsonValue | undefined,
  record: Members,
  seal: Members,
  keys: KeyList,
): PartResult {
  const answer = (verifies: PartResult["verifies"]): PartResult => ({ part: "inclusion", verifies });
  if (inclusion === null) return answer("not shown");
  if (!hasExactly(inclusion, ["leafIndex", "path", "root"])) return answer("no");
  const { state, statement } = checkSigned(inclusion.root, keys);
  if (state !== "yes") return answer(state);
  const { leafIndex, path } = inclusion;
  const hex = /^[0-9a-f]{64}$/;
  if (!Array.isArray(path) || !path.every((hash) => typeof hash === "string" && hex.test(hash)))
    return answer("no");
  const log = isObject(record.signing) && isObject(record.signing.log) ? record.signing.log : {};
  const fits =
    statement.format === "sedgewren-day-root/1" &&
    same(statement.day, log.day) &&
    same(leafIndex, log.position) &&
    typeof statement.rootSha256 === "string" &&
    isIncluded({
      leaf: leafHash(textOf(seal)),
      index: Number(leafIndex),
      size: Number(statement.treeSize),
      path: path.map((hash) => Buffer.from(hash as string, "hex")),
      root: Buffer.from(statement.rootSha256, "hex"),
    });
  return answer(fits ? "yes" : "no");
}

function checkParts(record: Members, seal: Members): PartResult[] {
  const sealed = isObject(seal.parts) ? seal.parts : {};
  const names = [...new Set([...Object.keys(record), ...Object.keys(sealed)])].sort();
  return names.map((part): PartResult => {
    const content = Object.hasOwn(record, part) ? record[part] : undefined;
    const fits = content !== undefined && Object.hasOwn(sealed, part) && sealed[part] === hashOf(content);
    return { part, verifies: fits ? "yes" : "no" };
  });
}

function termOf(record: Members): LicenceTerm | null {
  const term = isObject(record.scope) && isObject(record.scope.term) ? record.scope.term : {};
  const { startsOn, lastUseAt, zone } = term;
  if (typeof startsOn !== "string" || typeof zone !== "string") return null;
  return { startsOn, zone, lastUseAt: typeof lastUseAt === "string" ? lastUseAt : null };
}

const NOTHING = { failing: [], parts: [], number: null, asOf: null, events: [], term: null };

function unknown(reason: string): Verification {
  return { verdict: "unknown", sentence: `Unknown: ${reason}`, ...NOTHING };
}

function plain(part: string): string {
  return part.replace(/[A-Z]/g, (letter) => ` ${letter.toLowerCase()}`).replaceAll(".", " ");
}

function verifyFile(text: string, keys: KeyList): Verification {
  const file = JSON.parse(text) as JsonValue;
  if (!isObject(file) || !isObject(file.record) || !isObject(file.seal))
    return unknown("this is not a licence file of Sedgewren.");
  const { record } = file;
  const seal = checkSigned(file.seal, keys);
  if (seal.state === "cannot be checked") return unknown("it is not signed with a key of this list.");
  const status = checkStatus(file.status, record, keys);
  const sealFits =
    seal.statement.format === "sedgewren-seal/1" &&
    same(seal.statement.number, record.number) &&
    seal.statement.recordSha256 === hashOf(record);
  const parts = checkParts(record, seal.statement);
  const allParts = parts.every(({ verifies }) => verifies === "yes");
  const fileFits =
    hasExactly(file, ["record", "disclosed", "seal", "status", "inclusion"]) && !repeatsAName(text, file);
  const results: PartResult[] = [
    ...parts,
    ...checkDisclosed(file.disclosed, record),
    // An altered part changes the record's hash too: then the seal itself is only judged by its signature.
    { part: "seal", verifies: seal.state === "yes" && (sealFits || !allParts) ? "yes" : "no" },
    { part: "key", verifies: validAt(seal.key, record.issuedAt) ? "yes" : "no" },
    status.result,
    checkInclusion(file.inclusion, record, seal.statement, keys),
    { part: "file", verifies: fileFits ? "yes" : "no" },
  ];
  const failing = [...new Set(results.filter(({ verifies }) => verifies === "no").map(({ part }) => part))];
  const genuine = failing.length === 0;
  return {
    verdict: genuine ? "genuine" : "altered",
    sentence: genuine ? "Genuine record." : `Altered. Does not verify: ${failing.map(plain).join(", ")}.`,
    failing,
    parts: results,
    number: typeof record.number === "string" ? record.number : null,
    asOf: typeof status.statement?.asOf === "string" ? status.statement.asOf : null,
    events: (status.statement?.events as unknown as StatusEvent[] | undefined) ?? [],
    term: termOf(record),
  };
}

export function verifyRecord(text: string, keys: KeyList): Verification {
  if (text.length > MAX_CHARACTERS) return unknown("the file is too large to be a licence file.");
  try {
    return verifyFile(text, keys);
  } catch (error) {
    // Not JSON, or nested beyond reason.
    if (!(error instanceof SyntaxError || error instanceof RangeError)) throw error;
    return unknown("this is not a licence file of Sedgewren.");
  }
}
