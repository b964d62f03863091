import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";

// WCAG 2.2, "relative luminance" and "contrast ratio".
function luminance(hex: string): number {
  const channels = [1, 3, 5].map((at) => Number.parseInt(hex.slice(at, at + 2), 16) / 255);
  const [red, green, blue] = channels.map((c) => (c <= 0.04045 ? c / 12.92 : ((c + 0.055) / 1.055) ** 2.4));
  return 0.2126 * red! + 0.7152 * green! + 0.0722 * blue!;
}

function contrast(first: string, second: string): number {
  const [low, high] = [luminance(first), luminance(second)].sort((a, b) => a - b);
  return (high! + 0.05) / (low! + 0.05);
}

function tokens(block: string): Record<string, string> {
  return Object.fromEntries(
    [...block.matchAll(/--color-([a-z0-9-]+):\s*(#[0-9a-f]{6});/gi)].map(([, name, value]) => [
      name!,
      value!,
    ]),
  );
}

const css = readFileSync(new URL("../../app/globals.css", import.meta.url), "utf8");
const themeAt = css.indexOf("@theme");
const darkAt = css.indexOf("@media (prefers-color-scheme: dark)");
const light = tokens(css.slice(themeAt, darkAt));
const dark = { ...light, ...tokens(css.slice(darkAt, css.indexOf("@layer base"))) };

const NAMES = [
  ..."page ink ink-soft line shoal-1 shoal-2 shoal-3 contour-edge depth".split(" "),
  ..."buff-1 buff-2 flat-1 flat-2 magenta magenta-pale".split(" "),
];
const GROUNDS = ["page", "buff-1", "shoal-1", "flat-1", "magenta-pale"];

describe("the formula agrees with published ratios against white", () => {
  // Computed from the formula of WCAG 2.2; #767676 and #949494 are the well-known boundaries of 4.5:1 and 3:1.
  it.each([
    ["#000000", 21],
    ["#595959", 7.0047],
    ["#757575", 4.6075],
    ["#767676", 4.5422],
    ["#777777", 4.4781],
    ["#808080", 3.9494],
    ["#949494", 3.0335],
    ["#959595", 2.9953],
    ["#ff0000", 3.9985],
    ["#0000ff", 8.5925],
    ["#008000", 5.1374],
    ["#ffff00", 1.0738],
  ])("%s", (colour, ratio) => {
    expect(contrast(colour, "#ffffff")).toBeCloseTo(ratio, 3);
  });

  it("does not round 4.4781 up to a pass", () => {
    expect(contrast("#777777", "#ffffff") >= 4.5).toBe(false);
    expect(contrast("#767676", "#ffffff") >= 4.5).toBe(true);
  });
});

it("every token is set for light and for dark", () => {
  expect(Object.keys(light).sort()).toEqual([...NAMES].sort());
  expect(Object.keys(tokens(css.slice(darkAt))).sort()).toEqual([...NAMES].sort());
});

describe.each([
  ["light", light],
  ["dark", dark],
])("in the %s palette", (_name, palette) => {
  const ratio = (first: string, second: string) => contrast(palette[first]!, palette[second]!);

  it.each(GROUNDS.flatMap((ground) => ["ink", "ink-soft", "magenta"].map((text) => [text, ground] as const)))(
    "%s can be read on %s (1.4.3)",
    (text, ground) => {
      expect(ratio(text, ground)).toBeGreaterThanOrEqual(4.5);
    },
  );

  it("the words of a magenta button and of selected text can be read (1.4.3)", () => {
    expect(ratio("page", "magenta")).toBeGreaterThanOrEqual(4.5);
    expect(ratio("ink", "shoal-2")).toBeGreaterThanOrEqual(4.5);
  });

  it.each(
    ["page", "buff-1"].flatMap((ground) =>
      ["ink", "ink-soft", "contour-edge", "depth", "flat-2", "magenta"].map(
        (shape) => [shape, ground] as const,
      ),
    ),
  )("%s is seen as a shape or border on %s (1.4.11)", (shape, ground) => {
    expect(ratio(shape, ground)).toBeGreaterThanOrEqual(3);
  });

  it("a tick is seen on its own ground, and the core inside the contour round it (1.4.11)", () => {
    expect(ratio("flat-2", "flat-1")).toBeGreaterThanOrEqual(3);
    expect(ratio("depth", "shoal-3")).toBeGreaterThanOrEqual(3);
  });
});

it("the figures that the palette was chosen by are still true", () => {
  expect(contrast(light.ink!, light.page!)).toBeGreaterThan(16);
  expect(contrast(light["ink-soft"]!, light.page!)).toBeCloseTo(6.98, 1);
  expect(contrast(light.depth!, light.page!)).toBeCloseTo(7.88, 1);
  expect(contrast(light.magenta!, light.page!)).toBeCloseTo(7.3, 0);
  expect(contrast(dark.ink!, dark.page!)).toBeGreaterThan(15);
  expect(contrast(dark["ink-soft"]!, dark.page!)).toBeCloseTo(8.67, 1);
  expect(contrast(dark.magenta!, dark.page!)).toBeCloseTo(7, 0);
});
