import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { matchPeaks, refine } from "@/lib/fingerprint/alignment";
import { maximalSpans } from "@/lib/fingerprint/passages";
import type { Prepared } from "@/lib/fingerprint/prepared";
import { evidenceNats, scoreMap } from "@/lib/fingerprint/score";
import { makeRandom } from "./music";

function cloud(seed: number, count: number, lengthFrames: number): Prepared {
  const random = makeRandom(seed);
  const timeFrames = Float64Array.from({ length: count }, () => random() * lengthFrames).sort();
  const pitchSemitones = Float32Array.from({ length: count }, () => 10 + 50 * random());
  return { count, timeFrames, pitchSemitones, ranks: new Uint8Array(count), lengthFrames };
}

/** What the reference would look like to a query under t_r = a·t_q + b, p_r = p_q + c. */
function asQuery(reference: Prepared, a: number, b: number, c: number): Prepared {
  return {
    count: reference.count,
    timeFrames: reference.timeFrames.map((time) => (time - b) / a),
    pitchSemitones: reference.pitchSemitones.map((pitch) => pitch - c),
    ranks: reference.ranks,
    lengthFrames: reference.lengthFrames / a,
  };
}

describe("evidence", () => {
  it("is n·KL(k/n ‖ p0): the log-likelihood ratio of the binomial (Wilks 1938)", () => {
    const logLikelihood = (k: number, n: number, p: number): number =>
      k * Math.log(p) + (n - k) * Math.log(1 - p);
    for (const [k, n, p0] of [
      [30, 100, 0.04],
      [12, 600, 0.01],
      [599, 600, 0.3],
    ] as const) {
      expect(evidenceNats(k, n, p0)).toBeCloseTo(logLikelihood(k, n, k / n) - logLikelihood(k, n, p0), 8);
    }
    expect(evidenceNats(10, 10, 0.1)).toBeCloseTo(10 * Math.log(10), 10);
  });

  it("is nought at or below chance and for no trial", () => {
    expect(evidenceNats(4, 100, 0.04)).toBe(0);
    expect(evidenceNats(0, 100, 0.04)).toBe(0);
    expect(evidenceNats(0, 0, 0.04)).toBe(0);
  });
});

describe("matching peaks", () => {
  it("takes the nearest within the tolerances, as a plain comparison of all with all does", () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 1000 }), (seed) => {
        const reference = cloud(seed, 200, 500);
        const query = cloud(seed + 5000, 150, 450);
        const map = { a: 1.1, b: -12, c: 0.5 };
        const tolerance = { frames: 3, semitones: 1.5 };
        const out = new Int32Array(query.count);
        matchPeaks(query, reference, map, 0, query.count, tolerance, out);
        for (let i = 0; i < query.count; i++) {
          const time = 1.1 * query.timeFrames[i]! - 12;
          if (time < 0 || time > 500) {
            expect(out[i]).toBe(-2);
            continue;
          }
          let best = -1;
          let least = 2;
          for (let j = 0; j < reference.count; j++) {
            const dt = (reference.timeFrames[j]! - time) / 3;
            const dp = (reference.pitchSemitones[j]! - query.pitchSemitones[i]! - 0.5) / 1.5;
            if (Math.abs(dt) > 1 || Math.abs(dp) > 1 || dt * dt + dp * dp >= least) continue;
            least = dt * dt + dp * dp;
            best = j;
          }
          expect(out[i]).toBe(best);
        }
      }),
      { numRuns: 30 },
    );
  });
});

describe("fit", () => {
  it("recovers an affine map from a start a few frames and a third of a semitone off", () => {
    const reference = cloud(1, 1500, 1200);
    for (const [a, b, c] of [
      [1, 40, 0],
      [0.9, -100, 2],
      [1.25, 300, -3.9],
    ] as const) {
      const query = asQuery(reference, a, b, c);
      const map = refine(query, reference, { a: a * 1.002, b: b + 1, c: c + 0.3 }, [[0, query.count]]);
      expect(map).not.toBeNull();
      expect(Math.abs(map!.a - a)).toBeLessThan(1e-6);
      expect(Math.abs(map!.b - b)).toBeLessThan(1e-3);
      expect(Math.abs(map!.c - c)).toBeLessThan(1e-3);
    }
  });

  it("refuses maps out of range, 0.785 to 1.275 and ±4.3 semitones", () => {
    const reference = cloud(2, 800, 1200);
    for (const [a, c] of [
      [0.78, 0],
      [1.28, 0],
      [1, 4.4],
      [1, -4.4],
    ] as const) {
      const query = asQuery(reference, a, 0, c);
      expect(refine(query, reference, { a, b: 0, c }, [[0, query.count]])).toBeNull();
    }
  });

  it("measures chance on the same two recordings: random clouds coincide as their density says", () => {
    const reference = cloud(3, 6000, 6000);
    const query = cloud(4, 6000, 6000);
    const score = scoreMap(query, reference, { a: 1, b: 0, c: 0 }, [[0, query.count]], {
      frames: 1.6,
      semitones: 0.3,
    });
    const expected = 1 - Math.exp(-(6000 / 6000) * 3.2 * (0.6 / 50));
    expect(score.hits / score.trials).toBeGreaterThan(0.8 * expected);
    expect(score.chance).toBeGreaterThan(0.9 * expected);
    expect(score.chance).toBeLessThan(1.1 * expected);
    expect(score.chanceHigh).toBeGreaterThan(score.chance);
  });
});

describe("passages", () => {
  const hit = 2;
  const miss = -0.7;

  it("hold the maximal-scoring stretch, as a plain search of all stretches finds it", () => {
    fc.assert(
      fc.property(fc.array(fc.boolean(), { minLength: 1, maxLength: 60 }), (hits) => {
        const matched = Int32Array.from(hits, (value) => (value ? 1 : -1));
        const total = (from: number, to: number): number =>
          hits.slice(from, to).reduce((sum, value) => sum + (value ? hit : miss), 0);
        let best = 0;
        for (let from = 0; from < hits.length; from++) {
          for (let to = from + 1; to <= hits.length; to++) best = Math.max(best, total(from, to));
        }
        const spans = maximalSpans(matched, hit, miss, 1e-9);
        const found = spans.reduce((most, [from, to]) => Math.max(most, total(from, to)), 0);
        expect(found).toBeCloseTo(best, 9);
      }),
    );
  });

  it("are two where thirty nats of misses stand between, and end at the edge of the reference", () => {
    const gap = Math.ceil(30 / 0.7) + 1;
    const matched = new Int32Array(40 + gap + 40 + 10 + 20).fill(1);
    matched.fill(-1, 40, 40 + gap);
    matched.fill(-2, 80 + gap, 90 + gap);
    expect(maximalSpans(matched, hit, miss, 10)).toEqual([
      [0, 40],
      [40 + gap, 80 + gap],
      [90 + gap, 110 + gap],
    ]);
  });
});
