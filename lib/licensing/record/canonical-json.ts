export type JsonValue =
  | null
  | boolean
  | number
  | string
  | readonly JsonValue[]
  | { readonly [name: string]: JsonValue };

/**
 * The one text of a JSON value (RFC 8785): no white space, names sorted by UTF-16 code units, numbers and strings
 * as ECMAScript writes them, no Unicode normalisation. Throws TypeError for what JSON cannot hold: NaN, infinities,
 * lone surrogates, undefined, and objects of a class.
 */
export function canonicalJson(value: JsonValue): string {
  if (value === null || typeof value === "boolean") return String(value);
  if (typeof value === "string") {
    if (/\p{Surrogate}/u.test(value)) throw new TypeError("a lone surrogate is not text");
    return JSON.stringify(value);
  }
  if (typeof value === "number") {
    if (!Number.isFinite(value)) throw new TypeError(`JSON has no number ${value}`);
    return JSON.stringify(value);
  }
  if (Array.isArray(value)) return `[${value.map(canonicalJson).join(",")}]`;
  if (typeof value !== "object" || ![Object.prototype, null].includes(Object.getPrototypeOf(value)))
    throw new TypeError(`not a JSON value: ${typeof value}`);
  const members = value as { readonly [name: string]: JsonValue };
  const texts = Object.keys(members)
    .sort()
    .map((name) => `${canonicalJson(name)}:${canonicalJson(members[name] as JsonValue)}`);
  return `{${texts.join(",")}}`;
}
