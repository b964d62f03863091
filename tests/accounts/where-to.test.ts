import { describe, expect, test } from "vitest";
import { whereTo } from "@/app/(account)/where-to";

describe("where a sign-in leads on to", () => {
  test.each(["/roster", "/cases/cas_1?tab=2", "/", "/account#second-factor"])("stays: %s", (path) => {
    expect(whereTo(path)).toBe(path);
    expect(new URL(path, "https://site.example").origin).toBe("https://site.example");
  });

  test.each([
    "https://elsewhere.example/",
    "//elsewhere.example",
    "/\\elsewhere.example",
    "\\/elsewhere.example",
    "/\t/elsewhere.example",
    "javascript:alert(1)",
    "roster",
    "",
    `/${"x".repeat(500)}`,
    undefined,
    { a: 1 },
  ])("never leaves the site: %j", (raw) => {
    expect(whereTo(raw)).toBeNull();
  });

  test("takes the first of several", () => {
    expect(whereTo(["/roster", "//elsewhere.example"])).toBe("/roster");
  });
});
