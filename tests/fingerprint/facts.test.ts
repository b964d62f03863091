import { beforeAll, describe, expect, it } from "vitest";
import { band, createIndex, type Fingerprint, fingerprint, type SearchIndex } from "@/lib/fingerprint";
import { searchPairs } from "@/lib/fingerprint/pair-search";
import { type Questions, queryPairs, referencePairs } from "@/lib/fingerprint/pairs";
import { prepare } from "@/lib/fingerprint/prepared";
import { buildSegment } from "@/lib/fingerprint/segment";
import { composeScore, makeRandom, render, respeed, slice } from "./music";

/** Facts of the trade: common practice, no source. */
const sounds: Float32Array[] = [];
const fingerprints: Fingerprint[] = [];
let index: SearchIndex;

beforeAll(() => {
  for (let i = 0; i < 8; i++) {
    sounds.push(render(composeScore(300 + i, 50)));
    fingerprints.push(fingerprint(sounds[i]!));
  }
  index = createIndex({ getFingerprint: (id) => fingerprints[Number(id)]! });
  for (const [i, fp] of fingerprints.entries()) index.add(String(i), fp);
});

describe("common practice", () => {
  it("ten seconds cut from any place identify a recording (common practice, no source)", () => {
    const random = makeRandom(17);
    for (let i = 0; i < sounds.length; i++) {
      for (let k = 0; k < 10; k++) {
        const fromS = random() * 40;
        const [best] = index.search(fingerprint(slice(sounds[i]!, fromS, fromS + 10)), { altered: false });
        expect(best).toBeDefined();
        expect(best!.id).toBe(String(i));
        expect(band(best!)).toBe("hold");
        expect(Math.abs(best!.passages[0]!.refStartS - best!.passages[0]!.startS - fromS)).toBeLessThan(0.05);
      }
    }
  }, 120_000);

  it("a landmark's hash fits 32 bits: 22 are used (common practice, no source)", () => {
    for (const fp of fingerprints) {
      const { count, hash } = referencePairs(prepare(fp));
      expect(count).toBeGreaterThan(500);
      for (let i = 0; i < count; i++) expect(hash[i]! & 1023).toBe(0);
    }
  });

  it("a random two in a hundred of the landmarks still rank the right recording first (common practice, no source)", () => {
    const segment = buildSegment(fingerprints.map((fp, i) => ({ id: String(i), fp })));
    const random = makeRandom(5);
    for (let i = 0; i < fingerprints.length; i++) {
      const query = prepare(fingerprints[i]!);
      const kept = keep(queryPairs(query), () => random() < 0.02);
      const votes = new Map<string, number>();
      const counts = { questions: 0, found: 0, read: 0 };
      for (const place of searchPairs(
        [segment],
        kept,
        query.lengthFrames,
        { budget: 1e6, votesMin: 1 },
        counts,
        () => {},
      )) {
        const key = `${place.recording}:${Math.round(place.map.b / 4)}`;
        votes.set(key, (votes.get(key) ?? 0) + place.votes);
      }
      const ranked = [...votes].sort((x, y) => y[1] - x[1]);
      expect(ranked[0]![0]).toBe(`${i}:0`);
      const wrong = ranked.find(([key]) => !key.startsWith(`${i}:`))?.[1] ?? 0;
      expect(ranked[0]![1]).toBeGreaterThan(wrong + 5);
    }
  });

  it("a speed change of a few per cent defeats plain pairs; the tolerant search finds it (common practice, no source)", () => {
    for (const [i, speed] of [
      [0, 1.03],
      [1, 0.96],
      [2, 1.05],
    ] as const) {
      const query = fingerprint(respeed(slice(sounds[i]!, 5, 30), speed));
      const plain = index.search(query, { altered: false });
      expect(plain.filter((hit) => band(hit) === "hold")).toEqual([]);
      const [best] = index.search(query, { altered: true });
      expect(best!.id).toBe(String(i));
      expect(band(best!)).toBe("hold");
    }
  });

  it("candidates are found by one threshold and accepted by another, both settings (common practice, no source)", () => {
    const query = fingerprint(slice(sounds[4]!, 10, 25));
    expect(index.search(query, { altered: false, candidateVotes: 100_000 })).toEqual([]);
    const [hit] = index.search(query, { altered: false });
    const never = {
      holdEvidence: 1e9,
      holdEvidence2: 0,
      holdEvidenceAltered: 1e9,
      holdShare: { close: 0, fair: 0, loose: 0 },
      holdShareIndistinct: 0,
      weakEvidence: 1e9,
      weakEvidence2: 0,
    };
    expect([band(hit!), band(hit!, never)]).toEqual(["hold", "ignore"]);
  });
});

function keep(questions: Questions, test: () => boolean): Questions {
  const indices: number[] = [];
  for (let i = 0; i < questions.count; i++) if (test()) indices.push(i);
  return {
    count: indices.length,
    hash: Uint32Array.from(indices, (i) => questions.hash[i]!),
    timeFrames: Float64Array.from(indices, (i) => questions.timeFrames[i]!),
    root: Uint32Array.from(indices, (i) => questions.root[i]!),
    pitchSemitones: Float32Array.from(indices, (i) => questions.pitchSemitones[i]!),
    spanFrames: Float32Array.from(indices, (i) => questions.spanFrames[i]!),
  };
}
