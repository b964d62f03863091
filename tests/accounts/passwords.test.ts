import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { passwordProblem } from "@/lib/accounts/password-rules";

const context = { hasSecondFactor: false, name: "Noor Haldane-Ferris", email: "noor@thistlemoth.example" };
const withFactor = { ...context, hasSecondFactor: true };

describe("a password", () => {
  // Lengths: NIST SP 800-63B-4 (2025), 3.1.1.2.
  test("has at least 15 characters alone, and at least 8 beside a second factor", () => {
    expect(passwordProblem("tideline heron", context)).toContain("at least 15 characters");
    expect(passwordProblem("tideline herons", context)).toBeNull();
    expect(passwordProblem("heronry", withFactor)).toContain("at least 8 characters");
    expect(passwordProblem("heronry!", withFactor)).toBeNull();
  });

  test("is counted in code points after NFKC, so that neither emoji nor ligatures count twice", () => {
    expect(passwordProblem("🦆🦢🦩🦚🦜🐦🐧", withFactor)).toContain("this one has 7");
    const ligature = "ﬁn under marsh";
    expect([...ligature]).toHaveLength(14);
    expect(passwordProblem(ligature, context)).toBeNull();
  });

  test("may be long and hold any characters: 64 and more, spaces, letters of any script", () => {
    expect(
      passwordProblem("Über den Wellen liegt heute ein graues Licht, das keiner kennt und nennt", context),
    ).toBeNull();
    expect(passwordProblem("草の上に白い鷺が立っている朝の川", context)).toBeNull();
    expect(passwordProblem("x y z ".repeat(60), context)).toContain("at most 256");
  });

  test("needs no kinds of characters: small letters alone are enough", () => {
    expect(passwordProblem("lanterntidelineheronattic", context)).toBeNull();
  });

  test.each([
    ["passwordpassword", "“password”"],
    ["Passw0rd12345678", "“password”"],
    ["p@ssw0rd-p@ssw0rd!", "“password”"],
    ["qwertyuiopasdfgh", "“qwertyuiop”"],
    ["iloveyou iloveyou", "iloveyou"],
    ["123456789012345", "123456789"],
    ["letmein!letmein!1", "“letmein”"],
    ["noorhaldaneferris", "“haldane”"],
    ["thistlemoth noor 1", "“thistlemoth”"],
    ["sedgewrensedgewren", "“sedgewren”"],
    ["abcdefghijklmnop", "abcdefghijklmnop"],
  ])("that is tried first is refused with the reason: %s", (password, reason) => {
    expect(passwordProblem(password, context)).toContain(reason);
  });

  test("that repeats a short part, or a handful of characters, is refused", () => {
    expect(passwordProblem("aaaaaaaaaaaaaaaaa", context)).toContain("same few characters");
    expect(passwordProblem("xkvtq1xkvtq1xkvtq1", context)).toContain("repeats “xkvtq1”");
  });

  test("of random letters is taken, whatever the letters", () => {
    const letters = fc.array(fc.constantFrom(..."bcdfghjkmnpqrtvwxz"), { minLength: 30, maxLength: 40 });
    fc.assert(
      fc.property(letters, (characters) => {
        fc.pre(new Set(characters).size > 12);
        expect(passwordProblem(characters.join(""), context)).toBeNull();
      }),
    );
  });
});
