import { describe, expect, it } from "vitest";
import { check, music, RATE } from "./checking";
import { CHORDS, noise, sine, song } from "./signals";

// Limits: common practice of music delivery.
describe("T03: time", () => {
  const shifted = (headS: number, tailS: number) => {
    const body = music(8, 8);
    return check(
      body.map((side) => {
        const out = new Float32Array(Math.round((8 + headS + tailS) * RATE));
        out.set(side, Math.round(headS * RATE));
        return out;
      }),
    );
  };

  it.each([
    [0.2, "pass"],
    [0.3, "warn"],
    [0.99, "warn"],
    [1.02, "return"],
  ])("%d s of silence in front: %s", (headS, verdict) => {
    const { row, measures } = shifted(headS, 0);
    expect(row("head")!.verdict).toBe(verdict);
    expect(measures.headSilenceS).toBeCloseTo(headS, 2);
  });

  it("silence behind: a second passes, two are a question, four go back", () => {
    const base = shifted(0, 0).measures.tailSilenceS;
    expect(shifted(0, 0.9 - base).verdict("tail")).toBe("pass");
    expect(shifted(0, 2 - base).verdict("tail")).toBe("warn");
    expect(shifted(0, 4 - base).verdict("tail")).toBe("return");
  });

  it("a file that ends inside a sound goes back, unless it says cut or is a loop", () => {
    const cut = [sine(RATE, 220, 4, 0.3), sine(RATE, 330, 4, 0.25)];
    expect(check(cut).row("end")).toMatchObject({ verdict: "return", code: "T03" });
    expect(check(cut, { endingDeclared: "cut" }).row("end")).toBeUndefined();
    expect(check(cut, { versionRole: "loop", endingDeclared: "loop-safe" }).row("end")).toBeUndefined();
  });

  it("a file that begins inside a sound goes back", () => {
    const late = music(8).map((c) => c.subarray(Math.round(0.61 * RATE) + 60));
    const begins = late.map((c) => c.map((v, i) => (i === 0 ? 0.3 : v)));
    expect(check(begins).row("start")).toMatchObject({ verdict: "return", atS: 0 });
    expect(check(music(8)).row("start")).toBeUndefined();
  });

  it.each([60, 30, 20, 15, 10, 6])("the %d has its exact length within 0.05 s", (nominalS) => {
    const silent = (durationS: number) => {
      const side = new Float32Array(Math.round(durationS * RATE));
      side.set(sine(RATE, 300, 0.5, 0.2));
      return check([side, side], { versionRole: String(nominalS) }).row("length")!;
    };
    for (const ok of [nominalS - 0.05, nominalS, nominalS + 0.05]) expect(silent(ok).verdict).toBe("pass");
    for (const bad of [nominalS - 0.06, nominalS + 0.06]) expect(silent(bad).verdict).toBe("return");
  });

  it("a 30 of 30.40 s names what it measured, what is allowed and what to do", () => {
    const { row } = check(music(30.4), { versionRole: "30" });
    expect(row("length")).toMatchObject({
      code: "T03",
      verdict: "return",
      measured: "30.40\u00a0s",
      limit: "29.95\u00a0s to 30.05\u00a0s",
      remedy: "Shorten the file by 0.40\u00a0s to 30.00\u00a0s.",
    });
  });

  it("a sting is at most 7 s, decay included", () => {
    expect(check(music(7), { versionRole: "sting" }).verdict("length")).toBe("pass");
    expect(check(music(7.01), { versionRole: "sting" }).verdict("length")).toBe("return");
    expect(check(music(30.4)).row("length")).toBeUndefined();
  });

  it("the last hit of a cutdown lies half a second before its end", () => {
    const cutdown = (hitS: number) => {
      const [left, right] = music(10, 9);
      const hit = noise(4800, 5).map((v, i) => 0.6 * v * Math.exp(-i / 700));
      for (const side of [left, right]) side.set(hit, Math.round(hitS * RATE));
      return check([left, right], { versionRole: "10" });
    };
    expect(cutdown(9.2).verdict("last hit")).toBe("pass");
    expect(cutdown(9.2).measures.lastHitS).toBeCloseTo(9.2, 1);
    expect(cutdown(9.7).row("last hit")).toMatchObject({ verdict: "return", code: "T03" });
  });

  it("a fade is no button; a button is no fade", () => {
    const faded = song({ rateHz: RATE, bpm: 120, durationS: 20, chords: [CHORDS.C, CHORDS.G] }).map((c) =>
      c.map((v, i) => v * Math.min(1, 10 ** (-(i / RATE - 12) / 3.2)) * Math.min(1, (20 - i / RATE) / 0.5)),
    );
    expect(check(faded, { endingDeclared: "button" }).row("button")).toMatchObject({ verdict: "return" });
    expect(check(faded, { endingDeclared: "fade" }).row("button")).toBeUndefined();
    expect(check(music(12), { endingDeclared: "button" }).verdict("button")).toBe("pass");
  });

  it("a file that is mostly digital silence goes back", () => {
    const out = [0, 1].map(() => new Float32Array(90 * RATE));
    const [left, right] = music(10, 9.5);
    out[0]!.set(left);
    out[1]!.set(right);
    out[0]!.set(left, 80 * RATE);
    out[1]!.set(right, 80 * RATE);
    expect(check(out).row("silence")).toMatchObject({ verdict: "return", code: "T03" });
  });
});
