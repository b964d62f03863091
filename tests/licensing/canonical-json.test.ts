import { createHash } from "node:crypto";
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { canonicalJson, type JsonValue } from "@/lib/licensing/record/canonical-json";

const canonicalOf = (text: string) => canonicalJson(JSON.parse(text));

/** Inputs of the reference test data of RFC 8785; SHA-256 and length of the published outputs. */
const REFERENCE: ReadonlyArray<readonly [name: string, input: string, bytes: number, sha256: string]> = [
  [
    "arrays",
    '[ 56, { "d": true, "10": null, "1": [ ] } ]',
    32,
    "099601b171cafed97c333f8878d68e7f8c8f795412adb34b2fdcf0e7c7beac42",
  ],
  [
    "french",
    `{ "peach": "This sorting order", "péché": "is wrong according to French", "pêche": "but canonicalization MUST",
      "sin": "ignore locale" }`,
    130,
    "d99d0ebdcb0033cb858cfa830ae46bc0fb3309413b271f1da828c89901a27ed5",
  ],
  [
    "structures",
    `{ "1": {"f": {"f": "hi","F": 5} ,"\\n": 56.0}, "10": { }, "": "empty", "a": { },
      "111": [ {"e": "yes","E": "no" } ], "A": { } }`,
    98,
    "605f65004ec2db7692522a0852c22f1c989e036d547e88963d1a3143cf3195d5",
  ],
  [
    "unicode",
    '{ "Unnormalized Unicode":"A\\u030a" }',
    30,
    "0d99aad92a125196ff887876643fd3206786a84ddce2cee52ba4ad256d2381d3",
  ],
  [
    "values",
    `{ "numbers": [333333333.33333329, 1E30, 4.50, 2e-3, 0.000000000000000000000000001],
       "string": "\\u20ac$\\u000F\\u000aA'\\u0042\\u0022\\u005c\\\\\\"\\/", "literals": [null, true, false] }`,
    118,
    "2d5e01a318d0f0879ab568c4be289c8b1f64ef8921a53c6277d5e069978baacb",
  ],
  [
    "weird",
    `{ "\\u20ac": "Euro Sign", "\\r": "Carriage Return", "\\u000a": "Newline", "1": "One",
       "\\u0080": "Control\\u007f", "\\ud83d\\ude02": "Smiley", "\\u00f6": "Latin Small Letter O With Diaeresis",
       "\\ufb33": "Hebrew Letter Dalet With Dagesh", "</script>": "Browser Challenge" }`,
    214,
    "6af595a9aa80110b964b4de3f82a05fa6ae7423005019bacfa2620dddc4e94d1",
  ],
];

describe("canonical JSON (RFC 8785)", () => {
  it.each(REFERENCE)("reference file %s, byte for byte", (_, input, bytes, sha256) => {
    const output = Buffer.from(canonicalOf(input));
    expect({ bytes: output.length, sha256: createHash("sha256").update(output).digest("hex") }).toEqual({
      bytes,
      sha256,
    });
  });

  it("writes the standard's examples as it prints them", () => {
    expect(canonicalOf('[56,{"d":true,"10":null,"1":[]}]')).toBe('[56,{"1":[],"10":null,"d":true}]');
    expect(canonicalOf("[333333333.33333329,1E30,4.50,2e-3,1e-27]")).toBe(
      "[333333333.3333333,1e+30,4.5,0.002,1e-27]",
    );
    const weird = REFERENCE[5]?.[1] ?? "";
    const order = ["\n", "\r", "1", "</script>", "\u0080", "\u00f6", "\u20ac", "\u{1f602}", "\ufb33"];
    const written = canonicalOf(weird);
    const places = order.map((name) => written.indexOf(`${JSON.stringify(name)}:`));
    expect(places).toEqual([...places].sort((a, b) => a - b));
    expect(places.every((place) => place >= 0)).toBe(true);
  });

  // RFC 8785, Appendix B: IEEE 754 bits and the text of the number.
  it.each([
    ["0000000000000000", "0"],
    ["8000000000000000", "0"],
    ["0000000000000001", "5e-324"],
    ["7fefffffffffffff", "1.7976931348623157e+308"],
    ["8000000000000001", "-5e-324"],
    ["ffefffffffffffff", "-1.7976931348623157e+308"],
    ["4340000000000000", "9007199254740992"],
    ["c340000000000000", "-9007199254740992"],
    ["4430000000000000", "295147905179352830000"],
    ["44b52d02c7e14af5", "9.999999999999997e+22"],
    ["44b52d02c7e14af6", "1e+23"],
    ["44b52d02c7e14af7", "1.0000000000000001e+23"],
    ["444b1ae4d6e2ef4e", "999999999999999700000"],
    ["444b1ae4d6e2ef4f", "999999999999999900000"],
    ["444b1ae4d6e2ef50", "1e+21"],
    ["3eb0c6f7a0b5ed8c", "9.999999999999997e-7"],
    ["3eb0c6f7a0b5ed8d", "0.000001"],
    ["41b3de4355555553", "333333333.3333332"],
    ["41b3de4355555554", "333333333.33333325"],
    ["41b3de4355555555", "333333333.3333333"],
    ["41b3de4355555556", "333333333.3333334"],
    ["41b3de4355555557", "333333333.33333343"],
    ["becbf647612f3696", "-0.0000033333333333333333"],
    ["43143ff3c1cb0959", "1424953923781206.2"],
  ])("number %s is written %s", (hex, text) =>
    expect(canonicalJson(Buffer.from(hex, "hex").readDoubleBE())).toBe(text),
  );

  it("refuses what JSON cannot hold", () => {
    const never = [
      Number.NaN,
      Infinity,
      -Infinity,
      "\ud800",
      "a\udc00b",
      { "\ud800": 1 },
      undefined,
      1n,
      new Date(0),
    ];
    for (const value of never) expect(() => canonicalJson(value as JsonValue)).toThrow(TypeError);
    expect(() => canonicalJson({ a: undefined } as never)).toThrow(TypeError);
  });

  it("does not depend on the order of names, and reads back as the same value", () => {
    const json = fc.jsonValue().map((value) => JSON.parse(JSON.stringify(value)) as JsonValue);
    const reversed = (value: JsonValue): JsonValue =>
      Array.isArray(value)
        ? value.map(reversed)
        : value && typeof value === "object"
          ? Object.fromEntries(
              Object.entries(value)
                .reverse()
                .map(([name, inner]) => [name, reversed(inner as JsonValue)]),
            )
          : value;
    fc.assert(
      fc.property(json, (value) => {
        const text = canonicalJson(value);
        expect(canonicalJson(reversed(value))).toBe(text);
        expect(canonicalJson(JSON.parse(text))).toBe(text);
      }),
    );
  });
});
