import "@/tests/support/database";
import { createCipheriv } from "node:crypto";
import { describe, expect, test } from "vitest";
import { blindHash, openField, sealField } from "@/lib/kernel/field-crypto";

describe("a sealed field", () => {
  test("opens in its own place, whatever it holds", () => {
    for (const plain of ["", "Łódź, 14:30", "x".repeat(5000)]) {
      expect(openField(sealed(plain), "people.totp:per_1")).toBe(plain);
    }
  });

  test("does not open in another row or column, nor altered by one bit anywhere", () => {
    const value = sealed("a secret");
    expect(() => openField(value, "people.totp:per_2")).toThrow("per_2: the sealed field does not open");
    const bytes = Buffer.from(value.slice(3), "base64url");
    for (let index = 0; index < bytes.length; index++) {
      const altered = Buffer.from(bytes);
      altered[index]! ^= 1;
      expect(
        () => openField(`f1.${altered.toString("base64url")}`, "people.totp:per_1"),
        `byte ${index}`,
      ).toThrow();
    }
    for (const broken of ["", "f1.", "f2.AAAA", `${value}.x`])
      expect(() => openField(broken, "people.totp:per_1")).toThrow();
  });

  test("is different each time, and shows nothing", () => {
    const [one, two] = [sealed("the same"), sealed("the same")];
    expect(one).not.toBe(two);
    expect(Buffer.from(one.slice(3), "base64url").toString("latin1")).not.toContain("the same");
  });

  // AES-256-GCM test case 14 of the GCM specification (McGrew and Viega): zero key, zero nonce, one zero block.
  test("rests on the cipher of the published test case", () => {
    const cipher = createCipheriv("aes-256-gcm", Buffer.alloc(32), Buffer.alloc(12));
    const body = Buffer.concat([cipher.update(Buffer.alloc(16)), cipher.final()]).toString("hex");
    expect([body, cipher.getAuthTag().toString("hex")]).toEqual([
      "cea7403d4d606b6e074ec5d3baf39d18",
      "d0d1c8a799996bf0265b98b5d48ab919",
    ]);
  });

  test("hashes alike for the same purpose and otherwise not", () => {
    expect(blindHash("a@b.example", "one")).toBe(blindHash("a@b.example", "one"));
    expect(blindHash("a@b.example", "one")).not.toBe(blindHash("a@b.example", "two"));
    expect(blindHash("a@b.example", "one")).not.toBe(blindHash("a@b.exampl", "eone"));
  });
});

const sealed = (plain: string) => sealField(plain, "people.totp:per_1");
