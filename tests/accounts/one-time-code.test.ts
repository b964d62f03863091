import { Secret } from "otpauth";
import { describe, expect, test } from "vitest";
import { codeAddress, stepAt, stepOfCode, usableCode } from "@/lib/accounts/one-time-code";

const at = (seconds: number) => new Date(seconds * 1000);
/** The secret of RFC 6238, appendix B, for SHA-1. */
const RFC_SECRET = Secret.fromUTF8("12345678901234567890").base32;

describe("a code", () => {
  // RFC 6238, appendix B, SHA-1: the last six of the eight digits printed there.
  test.each([
    [59, "287082"],
    [1_111_111_109, "081804"],
    [1_111_111_111, "050471"],
    [1_234_567_890, "005924"],
    [2_000_000_000, "279037"],
    [20_000_000_000, "353130"],
  ])("at %i seconds is %s", (seconds, code) => {
    expect(stepOfCode(RFC_SECRET, code, at(seconds), null)).toBe(stepAt(at(seconds)));
  });

  test("is taken one step early or late, and no further", () => {
    expect(stepOfCode(RFC_SECRET, "050471", at(1_111_111_111 + 30), null)).toBe(stepAt(at(1_111_111_111)));
    expect(stepOfCode(RFC_SECRET, "050471", at(1_111_111_111 - 30), null)).toBe(stepAt(at(1_111_111_111)));
    expect(stepOfCode(RFC_SECRET, "050471", at(1_111_111_111 + 60), null)).toBeNull();
    expect(stepOfCode(RFC_SECRET, "050471", at(1_111_111_111 - 60), null)).toBeNull();
  });

  test("works once: a step at or before the last one used is refused", () => {
    const step = stepAt(at(1_111_111_111));
    expect(stepOfCode(RFC_SECRET, "050471", at(1_111_111_111), step)).toBeNull();
    expect(stepOfCode(RFC_SECRET, "050471", at(1_111_111_111), step + 1)).toBeNull();
    expect(stepOfCode(RFC_SECRET, "050471", at(1_111_111_111), step - 1)).toBe(step);
  });

  test("may be typed with spaces, and anything but six digits is refused", () => {
    expect(stepOfCode(RFC_SECRET, " 050 471 ", at(1_111_111_111), null)).not.toBeNull();
    for (const wrong of ["", "05047", "0504711", "abcdef", "000000"]) {
      expect(stepOfCode(RFC_SECRET, wrong, at(1_111_111_111), null)).toBeNull();
    }
  });

  test("filled in for a demonstration is one that is still taken, or none until the next step", () => {
    const now = at(1_111_111_111);
    const step = stepAt(now);
    expect(usableCode(RFC_SECRET, now, null)).toBe("050471");
    const next = usableCode(RFC_SECRET, now, step)!;
    expect(stepOfCode(RFC_SECRET, next, now, step)).toBe(step + 1);
    expect(usableCode(RFC_SECRET, now, step + 1)).toBeNull();
  });

  test("is set up by an address that authenticators read", () => {
    const address = new URL(codeAddress(RFC_SECRET, "noor@thistlemoth.example"));
    expect(address.protocol).toBe("otpauth:");
    expect(address.searchParams.get("secret")).toBe(RFC_SECRET);
    expect(address.searchParams.get("issuer")).toBe("Sedgewren");
  });
});
