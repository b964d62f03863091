// Checks a Sedgewren licence file without Sedgewren: needs Node 18 or later, this file, and a published key list.
//
//   node sedgewren-verify.mjs record.json keys.json [--on 2026-03-20] [--json]
//
// It answers, in this order: genuine, altered or unknown, and which parts do not verify; whether the licence was in
// force on a date (today unless told otherwise); the status history. Exit code: 0 genuine, 1 altered, 2 unknown,
// 64 wrong use. It opens no network connection and writes no file.
//
// How it checks, should this program itself be lost: the "seal" lists the SHA-256 of each part of "record" and of
// the whole, over canonical JSON (RFC 8785); the seal is signed with Ed25519 (RFC 8032) over its canonical JSON.
// A confidential field of the record is the SHA-256 of the canonical JSON of {field, salt, value}, whose values
// stand in "disclosed". "status" is the signed history; "inclusion" proves that the seal is a leaf of its day's
// Merkle tree (RFC 9162), whose root is signed.
import { createHash, createPublicKey, verify } from "node:crypto";
import { readFileSync } from "node:fs";

const MAX_CHARACTERS = 4_000_000;
const CONFIDENTIAL_FIELDS = [
  "licensee.name",
  "licensee.endClient",
  "licensee.address",
  "production.title",
  "production.parts",
  "production.references",
  "fee.details",
  "acceptance.person",
];
const HEX_64 = /^[0-9a-f]{64}$/;

// Canonical JSON and hashes

const isObject = (value) => typeof value === "object" && value !== null && !Array.isArray(value);
const hasExactly = (value, names) =>
  isObject(value) &&
  Object.keys(value).length === names.length &&
  names.every((name) => Object.hasOwn(value, name));

class NotCanonical extends Error {}

function write(value) {
  if (typeof value === "string") {
    if (/\p{Surrogate}/u.test(value)) throw new NotCanonical();
    return JSON.stringify(value);
  }
  if (typeof value === "number" && !Number.isFinite(value)) throw new NotCanonical();
  if (value === null || typeof value !== "object") return JSON.stringify(value);
  if (Array.isArray(value)) return `[${value.map(write).join(",")}]`;
  const names = Object.keys(value).sort();
  return `{${names.map((name) => `${write(name)}:${write(value[name])}`).join(",")}}`;
}

function textOf(value) {
  try {
    return write(value);
  } catch (error) {
    if (error instanceof NotCanonical) return "not canonical";
    throw error;
  }
}

const sha256 = (...chunks) => {
  const hash = createHash("sha256");
  for (const chunk of chunks) hash.update(chunk);
  return hash.digest();
};
const hashOf = (value) => sha256(textOf(value)).toString("hex");
const same = (a, b) => a !== undefined && b !== undefined && textOf(a) === textOf(b);

const countNames = (value) => {
  if (Array.isArray(value)) return value.reduce((sum, item) => sum + countNames(item), 0);
  if (!isObject(value)) return 0;
  return Object.values(value).reduce((sum, item) => sum + 1 + countNames(item), 0);
};

// A name written twice would let a reader see one value and a program another.
function repeatsAName(text, value) {
  let names = 0;
  for (const [, colon] of text.matchAll(/"(?:[^"\\]|\\.)*"(\s*:)?/gs)) if (colon) names++;
  return names !== countNames(value);
}

// Signatures

function verifies(text, signatureHex, publicKeyHex) {
  if (typeof signatureHex !== "string" || !/^[0-9a-f]{128}$/.test(signatureHex)) return false;
  const der = Buffer.from(`302a300506032b6570032100${publicKeyHex}`, "hex");
  const key = createPublicKey({ key: der, format: "der", type: "spki" });
  return verify(null, Buffer.from(text), key, Buffer.from(signatureHex, "hex"));
}

function checkSigned(signed, keys) {
  const statement = isObject(signed) && isObject(signed.statement) ? signed.statement : {};
  if (!hasExactly(signed, ["statement", "signature"])) return { state: "no", statement, key: null };
  const { signature } = signed;
  if (!hasExactly(signature, ["keyId", "algorithm", "value"])) return { state: "no", statement, key: null };
  const named = keys.filter(({ keyId }) => keyId === statement.keyId || keyId === signature.keyId);
  if (named.length === 0) return { state: "cannot be checked", statement, key: null };
  const [key] = named;
  const good =
    named.length === 1 &&
    statement.keyId === signature.keyId &&
    signature.algorithm === key.algorithm &&
    verifies(textOf(statement), signature.value, key.publicKey);
  return { state: good ? "yes" : "no", statement, key };
}

const validAt = (key, instant) =>
  key !== null &&
  typeof instant === "string" &&
  key.validFrom <= instant &&
  (key.validUntil === null || instant <= key.validUntil);

// The parts of a file

function checkParts(record, seal) {
  const sealed = isObject(seal.parts) ? seal.parts : {};
  const names = [...new Set([...Object.keys(record), ...Object.keys(sealed)])].sort();
  return names.map((part) => {
    const both = Object.hasOwn(record, part) && Object.hasOwn(sealed, part);
    return { part, verifies: both && sealed[part] === hashOf(record[part]) ? "yes" : "no" };
  });
}

function checkDisclosed(disclosed, record) {
  if (!isObject(disclosed)) return [{ part: "file", verifies: "no" }];
  const results = CONFIDENTIAL_FIELDS.map((field) => {
    const [part, inner] = field.split(".");
    const committed = isObject(record[part]) ? record[part][inner] : undefined;
    const shown = disclosed[field];
    if (shown === undefined) return { part: field, verifies: "not shown" };
    const good =
      hasExactly(shown, ["salt", "value"]) &&
      same({ sha256: hashOf({ field, salt: shown.salt, value: shown.value }) }, committed);
    return { part: field, verifies: good ? "yes" : "no" };
  });
  const strangers = Object.keys(disclosed).filter((name) => !CONFIDENTIAL_FIELDS.includes(name));
  return [...results, ...strangers.map((part) => ({ part, verifies: "no" }))];
}

function checkStatus(status, record, keys) {
  if (status === null) return { result: { part: "status", verifies: "not shown" }, statement: null };
  const { state, statement, key } = checkSigned(status, keys);
  const fits =
    statement.format === "sedgewren-licence-status/1" &&
    same(statement.number, record.number) &&
    statement.recordSha256 === hashOf(record) &&
    validAt(key, statement.asOf);
  const answer = state === "yes" && !fits ? "no" : state;
  return { result: { part: "status", verifies: answer }, statement: answer === "yes" ? statement : null };
}

function isIncluded(leaf, index, size, path, root) {
  if (!Number.isSafeInteger(index) || !Number.isSafeInteger(size) || index < 0 || index >= size) return false;
  let position = index;
  let last = size - 1;
  let hash = leaf;
  for (const sibling of path) {
    if (last === 0) return false;
    if (position % 2 === 1 || position === last) {
      hash = sha256(Buffer.of(1), sibling, hash);
      for (; position % 2 === 0 && position > 0; position /= 2) last = Math.floor(last / 2);
    } else {
      hash = sha256(Buffer.of(1), hash, sibling);
    }
    position = Math.floor(position / 2);
    last = Math.floor(last / 2);
  }
  return last === 0 && hash.equals(root);
}

function checkInclusion(inclusion, record, seal, keys) {
  const answer = (result) => ({ part: "inclusion", verifies: result });
  if (inclusion === null) return answer("not shown");
  if (!hasExactly(inclusion, ["leafIndex", "path", "root"])) return answer("no");
  const { state, statement } = checkSigned(inclusion.root, keys);
  if (state !== "yes") return answer(state);
  const { leafIndex, path } = inclusion;
  if (!Array.isArray(path) || !path.every((hash) => typeof hash === "string" && HEX_64.test(hash)))
    return answer("no");
  const log = isObject(record.signing) && isObject(record.signing.log) ? record.signing.log : {};
  const fits =
    statement.format === "sedgewren-day-root/1" &&
    same(statement.day, log.day) &&
    same(leafIndex, log.position) &&
    typeof statement.rootSha256 === "string" &&
    isIncluded(
      sha256(Buffer.of(0), textOf(seal)),
      leafIndex,
      statement.treeSize,
      path.map((hash) => Buffer.from(hash, "hex")),
      Buffer.from(statement.rootSha256, "hex"),
    );
  return answer(fits ? "yes" : "no");
}

const plain = (part) => part.replace(/[A-Z]/g, (letter) => ` ${letter.toLowerCase()}`).replaceAll(".", " ");
const unknown = (reason) => ({
  verdict: "unknown",
  sentence: `Unknown: ${reason}`,
  failing: [],
  parts: [],
  number: null,
  asOf: null,
  events: [],
  term: null,
});
const NOT_OURS = "this is not a licence file of Sedgewren.";

function verifyFile(text, keys) {
  const file = JSON.parse(text);
  if (!isObject(file) || !isObject(file.record) || !isObject(file.seal)) return unknown(NOT_OURS);
  const { record } = file;
  const seal = checkSigned(file.seal, keys);
  if (seal.state === "cannot be checked") return unknown("it is not signed with a key of this list.");
  const status = checkStatus(file.status, record, keys);
  const parts = checkParts(record, seal.statement);
  const allParts = parts.every((result) => result.verifies === "yes");
  const sealFits =
    seal.statement.format === "sedgewren-seal/1" &&
    same(seal.statement.number, record.number) &&
    seal.statement.recordSha256 === hashOf(record);
  const fileFits =
    hasExactly(file, ["record", "disclosed", "seal", "status", "inclusion"]) && !repeatsAName(text, file);
  const results = [
    ...parts,
    ...checkDisclosed(file.disclosed, record),
    // An altered part changes the record's hash too: then the seal itself is only judged by its signature.
    { part: "seal", verifies: seal.state === "yes" && (sealFits || !allParts) ? "yes" : "no" },
    { part: "key", verifies: validAt(seal.key, record.issuedAt) ? "yes" : "no" },
    status.result,
    checkInclusion(file.inclusion, record, seal.statement, keys),
    { part: "file", verifies: fileFits ? "yes" : "no" },
  ];
  const failing = [...new Set(results.filter((r) => r.verifies === "no").map(({ part }) => part))];
  const term = isObject(record.scope) && isObject(record.scope.term) ? record.scope.term : {};
  const { startsOn, lastUseAt, zone } = term;
  return {
    verdict: failing.length === 0 ? "genuine" : "altered",
    sentence:
      failing.length === 0
        ? "Genuine record."
        : `Altered. Does not verify: ${failing.map(plain).join(", ")}.`,
    failing,
    parts: results,
    number: typeof record.number === "string" ? record.number : null,
    asOf: typeof status.statement?.asOf === "string" ? status.statement.asOf : null,
    events: status.statement?.events ?? [],
    term:
      typeof startsOn === "string" && typeof zone === "string"
        ? { startsOn, zone, lastUseAt: typeof lastUseAt === "string" ? lastUseAt : null }
        : null,
  };
}

function verifyRecord(text, keys) {
  if (text.length > MAX_CHARACTERS) return unknown("the file is too large to be a licence file.");
  try {
    return verifyFile(text, keys);
  } catch (error) {
    if (!(error instanceof SyntaxError || error instanceof RangeError)) throw error;
    return unknown(NOT_OURS);
  }
}

// In force on a date

const DAY_MS = 86_400_000;
const MONTHS = "January February March April May June July August September October November December".split(
  " ",
);
const formatDate = (date) =>
  `${Number(date.slice(8))} ${MONTHS[Number(date.slice(5, 7)) - 1]} ${Number(date.slice(0, 4))}`;
const addDay = (date) => new Date(Date.parse(`${date}T00:00:00Z`) + DAY_MS).toISOString().slice(0, 10);

function dateIn(instantMs, zone) {
  const parts = new Intl.DateTimeFormat("en-CA", {
    timeZone: zone,
    calendar: "gregory",
    numberingSystem: "latn",
    year: "numeric",
    month: "2-digit",
    day: "2-digit",
  }).formatToParts(instantMs);
  const of = (wanted) => parts.find(({ type }) => type === wanted).value;
  return `${of("year").padStart(4, "0")}-${of("month")}-${of("day")}`;
}

// The first instant of a date in a zone, which is not always midnight.
function startOfDay(date, zone) {
  let before = Date.parse(`${date}T00:00:00Z`) - 26 * 3_600_000;
  let after = before + 52 * 3_600_000;
  while (after - before > 1000) {
    const middle = before + Math.floor((after - before) / 2000) * 1000;
    if (dateIn(middle, zone) >= date) after = middle;
    else before = middle;
  }
  return after;
}

const ENDINGS = {
  "payment reversed": "the payment was reversed",
  refunded: "it was refunded",
  rescinded: "it was rescinded",
  cancelled: "it was cancelled",
  superseded: "it was superseded",
};
const QUESTIONS = {
  "payment due": {
    words: "payment is due",
    closedBy: ["paid", "payment reversed", "cancelled", "refunded"],
  },
  "payment disputed": {
    words: "the payment is disputed",
    closedBy: ["dispute withdrawn", "payment reversed", "refunded", "reinstated"],
  },
  "rights question open": {
    words: "a rights question is open",
    closedBy: ["rights question closed", "rescinded"],
  },
};

function stretches(events, term) {
  const expiry =
    term.lastUseAt === null ? null : { at: Date.parse(term.lastUseAt) + 1000, words: "its term ended" };
  let from = startOfDay(term.startsOn, term.zone);
  const found = [];
  for (const event of events) {
    const at = Date.parse(event.at);
    const words = ENDINGS[event.kind];
    if (words && from !== null && (expiry === null || at < expiry.at)) {
      found.push({ from, end: { at: Math.max(at, from), words } });
      from = null;
    } else if (event.kind === "reinstated" && from === null) {
      from = at;
    }
  }
  if (from !== null && (expiry === null || from < expiry.at)) found.push({ from, end: expiry });
  return found;
}

function openQuestions(events, zone) {
  const open = new Map();
  for (const event of events) {
    for (const [kind, { closedBy }] of Object.entries(QUESTIONS))
      if (closedBy.includes(event.kind)) open.delete(kind);
    if (QUESTIONS[event.kind] && !open.has(event.kind))
      open.set(event.kind, dateIn(Date.parse(event.at), zone));
  }
  return [...open].map(([kind, since]) => ({ kind, since }));
}

function inForceOn(events, term, date) {
  const dayFrom = startOfDay(date, term.zone);
  const dayTo = startOfDay(addDay(date), term.zone);
  const all = stretches(events, term);
  const touching = all.filter(({ from, end }) => from < dayTo && (end === null || end.at > dayFrom));
  const whole = touching.some(({ from, end }) => from <= dayFrom && (end === null || end.at >= dayTo));
  const ended = all.filter(({ end }) => end !== null && end.at <= dayTo).at(-1)?.end;
  const why = ended ? `: ${ended.words} on ${formatDate(dateIn(ended.at - 1, term.zone))}` : "";
  const open = openQuestions(events, term.zone);
  const notes = open.map(({ kind, since }) => ` Since ${formatDate(since)} ${QUESTIONS[kind].words}.`);
  const on = formatDate(date);
  const [answer, sentence] = whole
    ? ["in force", `In force on ${on}.`]
    : touching.length > 0
      ? ["in force for part of the day", `In force for part of ${on}${why}.`]
      : [
          "not in force",
          `Not in force on ${on}${why || `: its term begins on ${formatDate(term.startsOn)}`}.`,
        ];
  return { answer, sentence: sentence + notes.join(""), open };
}

// The command

const say = (line) => process.stdout.write(`${line}\n`);

function wrongUse(line) {
  process.stderr.write(`${line}\n`);
  process.exit(64);
}

function readKeys(path) {
  const list = JSON.parse(readFileSync(path, "utf8"));
  const good =
    isObject(list) &&
    list.format === "sedgewren-keys/1" &&
    Array.isArray(list.keys) &&
    list.keys.every(
      (key) =>
        isObject(key) &&
        key.algorithm === "Ed25519" &&
        typeof key.keyId === "string" &&
        HEX_64.test(key.publicKey) &&
        typeof key.validFrom === "string" &&
        (key.validUntil === null || typeof key.validUntil === "string"),
    );
  if (!good) wrongUse(`${path} is not a key list of Sedgewren.`);
  return list.keys;
}

function report(result, inForce) {
  say(inForce ? `${result.sentence} ${inForce.sentence}` : result.sentence);
  if (result.number !== null) say(`Licence ${result.number}`);
  if (result.verdict === "genuine") {
    say(
      result.asOf === null
        ? "The file carries no status history: later changes, if any, are not known from it."
        : `Status history as of ${result.asOf}:`,
    );
    for (const event of result.events) say(`  ${event.at}  ${event.kind}: ${event.words}`);
    const unchecked = result.parts.filter((r) => r.verifies === "cannot be checked");
    for (const { part } of unchecked)
      say(`Not checked: ${plain(part)}, which is signed with a key that this list does not hold.`);
    const hidden = result.parts.filter((r) => r.verifies === "not shown" && r.part.includes("."));
    if (hidden.length > 0) say(`Kept confidential: ${hidden.map(({ part }) => plain(part)).join(", ")}.`);
    if (result.parts.some((r) => r.part === "inclusion" && r.verifies === "not shown"))
      say("The file carries no proof that the record stands in its day's published log.");
  }
}

function main(args) {
  const usage = "use: node sedgewren-verify.mjs record.json keys.json [--on 2026-03-20] [--json]";
  const json = args.includes("--json");
  const rest = args.filter((arg) => arg !== "--json");
  const at = rest.indexOf("--on");
  const date = at < 0 ? null : rest.splice(at, 2)[1];
  const isDate = (text) =>
    /^\d{4}-\d{2}-\d{2}$/.test(text) &&
    !Number.isNaN(Date.parse(`${text}T00:00:00Z`)) &&
    new Date(`${text}T00:00:00Z`).toISOString().startsWith(text);
  if (date !== null && !isDate(date ?? "")) wrongUse("--on needs a date such as 2026-03-20.");
  if (rest.length !== 2) wrongUse(usage);
  const [recordPath, keysPath] = rest;
  let text = "";
  let keys = [];
  try {
    text = readFileSync(recordPath, "utf8");
    keys = readKeys(keysPath);
  } catch (error) {
    wrongUse(`Could not read the files: ${error.message}`);
  }
  const result = verifyRecord(text, keys);
  const genuine = result.verdict === "genuine" && result.term !== null;
  const on = date ?? (genuine ? dateIn(Date.now(), result.term.zone) : null);
  const inForce = genuine ? inForceOn(result.events, result.term, on) : null;
  if (json) say(JSON.stringify({ ...result, inForce }));
  else report(result, inForce);
  process.exitCode = { genuine: 0, altered: 1, unknown: 2 }[result.verdict];
}

main(process.argv.slice(2));
