import { beforeAll, describe, expect, it } from "vitest";
import {
  band,
  createIndex,
  type Fingerprint,
  fingerprint,
  type Hit,
  matchFingerprints,
  mergeChannelHits,
  type SearchIndex,
} from "@/lib/fingerprint";
import { composeScore, join, mix, render, respeed, type Score, slice } from "./music";

/** Recordings 0 to 7 are indexed; 8 to 11 are foreign hosts. All are synthesised: they prove the arithmetic, not recall. */
const scores: Score[] = [];
const sounds: Float32Array[] = [];
const fingerprints = new Map<string, Fingerprint>();
let index: SearchIndex;

beforeAll(() => {
  for (let i = 0; i < 12; i++) {
    scores.push(composeScore(200 + i, 60));
    sounds.push(render(scores[i]!));
    if (i < 8) fingerprints.set(`r${i}`, fingerprint(sounds[i]!));
  }
  index = createIndex({ getFingerprint: (id) => fingerprints.get(id)! });
  for (const [id, fp] of fingerprints) index.add(id, fp);
});

function held(samples: Float32Array, options: { altered?: boolean; reversed?: boolean } = {}): Hit[] {
  const hits = index.search(fingerprint(samples), { altered: true, ...options });
  return hits.filter((hit) => band(hit) === "hold");
}
function only(samples: Float32Array, options: { altered?: boolean; reversed?: boolean } = {}): Hit {
  const hits = held(samples, options);
  expect(hits.map((hit) => hit.id)).toHaveLength(1);
  return hits[0]!;
}

describe("whole copies", () => {
  it("unaltered cover both sides and stand at speed 1, pitch 0", () => {
    for (const i of [0, 3, 7]) {
      const hit = only(sounds[i]!.map((value) => -0.4 * value));
      expect(hit).toMatchObject({
        id: `r${i}`,
        relationHint: "same recording",
        reversed: false,
        channel: null,
        chance: null,
      });
      expect(hit.coverageQuery).toBeGreaterThan(0.97);
      expect(hit.coverageReference).toBeGreaterThan(0.97);
      expect(Math.abs(hit.speed - 1)).toBeLessThan(1e-4);
      expect(Math.abs(hit.pitchSemitones)).toBeLessThan(0.01);
      expect(hit.passages).toHaveLength(1);
    }
  });

  it("altered are found with their speed and pitch, told as the copy against the reference", () => {
    const changes = [
      { tempo: 1, pitchSemitones: 2 },
      { tempo: 1, pitchSemitones: -2 },
      { tempo: 0.9, pitchSemitones: 0 },
      { tempo: 1.1, pitchSemitones: 0 },
      { tempo: 1.1, pitchSemitones: 2 },
    ];
    changes.forEach((change, i) => {
      const hit = only(render(scores[i]!, change));
      expect(hit).toMatchObject({ id: `r${i}`, relationHint: "altered copy" });
      expect(Math.abs(hit.speed - change.tempo)).toBeLessThan(0.002);
      expect(Math.abs(hit.pitchSemitones - change.pitchSemitones)).toBeLessThan(0.05);
      for (const p of hit.passages) expect(Math.abs(p.refStartS - change.tempo * p.startS)).toBeLessThan(0.1);
      expect(hit.coverageReference).toBeGreaterThan(0.9);
    });
  });

  it("run 3 % faster, pitch and all, are found as speed 1.03 and +0.512 semitones", () => {
    const hit = only(respeed(sounds[2]!, 1.03));
    expect(hit).toMatchObject({ id: "r2", relationHint: "altered copy" });
    expect(Math.abs(hit.speed - 1.03)).toBeLessThan(0.0005);
    expect(Math.abs(hit.pitchSemitones - 12 * Math.log2(1.03))).toBeLessThan(0.02);
  });

  it("played backwards are found by the reversed search only", () => {
    const backwards = sounds[4]!.slice().reverse();
    expect(held(backwards)).toEqual([]);
    const hit = only(backwards, { reversed: true });
    expect(hit).toMatchObject({ id: "r4", reversed: true });
    expect(hit.coverageReference).toBeGreaterThan(0.95);
    const [passage] = hit.passages;
    expect(passage!.startS).toBeLessThan(0.6);
    expect(passage!.refStartS).toBeLessThan(0.6);
    expect(passage!.refEndS).toBeGreaterThan(59.4);
  });
});

describe("parts", () => {
  it("inside another piece are found where they stand, on both sides", () => {
    for (const [i, fromS, atS, lengthS] of [
      [1, 31.3, 20, 10],
      [5, 7.7, 44.4, 6],
    ] as const) {
      const part = slice(sounds[i]!, fromS, fromS + lengthS);
      const hit = only(join(slice(sounds[9]!, 0, atS), part, slice(sounds[9]!, atS + lengthS, 60)));
      expect(hit).toMatchObject({ id: `r${i}`, relationHint: "excerpt" });
      expect(hit.passages).toHaveLength(1);
      const [passage] = hit.passages;
      expect(Math.abs(passage!.startS - atS)).toBeLessThan(0.6);
      expect(Math.abs(passage!.endS - atS - lengthS)).toBeLessThan(0.6);
      expect(Math.abs(passage!.refStartS - fromS - (passage!.startS - atS))).toBeLessThan(0.05);
      expect(Math.abs(hit.coverageQuery - lengthS / 60)).toBeLessThan(0.02);
    }
  });

  it("later in the query than in their source are credited to their source, not to its neighbour in the index", () => {
    for (const i of [0, 1, 6, 7]) {
      const hit = only(join(slice(sounds[10]!, 0, 45), slice(sounds[i]!, 2, 12)));
      expect(hit.id).toBe(`r${i}`);
      expect(Math.abs(hit.passages[0]!.refStartS - 2)).toBeLessThan(0.6);
    }
  });

  it("looped four times give four passages from one stretch of the source", () => {
    const loop = slice(sounds[6]!, 21, 27.4);
    const hit = only(join(slice(sounds[8]!, 0, 10), loop, loop, loop, loop, slice(sounds[8]!, 36, 50)));
    expect(hit).toMatchObject({ id: "r6", relationHint: "shared material" });
    expect(hit.passages).toHaveLength(4);
    hit.passages.forEach((passage, k) => {
      expect(Math.abs(passage.startS - (10 + 6.4 * k))).toBeLessThan(0.5);
      expect(Math.abs(passage.refStartS - passage.startS - (21 - 10 - 6.4 * k))).toBeLessThan(0.05);
    });
  });

  it("looped under other music are found at every repeat", () => {
    const loop = slice(sounds[6]!, 21, 27.4);
    const loops = join(new Float32Array(10 * 11_025), loop, loop, loop, loop);
    const hit = only(mix(sounds[11]!, loops, 1));
    expect(hit.id).toBe("r6");
    expect(hit.passages).toHaveLength(4);
  });

  it("cut together in another order show every jump", () => {
    const pieces = [
      [40, 52],
      [5, 15],
      [25, 37],
    ] as const;
    const hit = only(join(...pieces.map(([from, to]) => slice(sounds[3]!, from, to))));
    expect(hit.id).toBe("r3");
    expect(hit.passages).toHaveLength(3);
    let atS = 0;
    pieces.forEach(([from, to], k) => {
      const passage = hit.passages[k]!;
      expect(Math.abs(passage.startS - atS)).toBeLessThan(0.6);
      expect(Math.abs(passage.refStartS - passage.startS - (from - atS))).toBeLessThan(0.05);
      atS += to - from;
    });
  });

  it("cut within repeated bars show one jump: the bars go with the side that explains them, not with an equal one", () => {
    const bar = slice(render(composeScore(400, 10)), 4, 5.6);
    const bars = join(bar, bar, bar, bar);
    const piece = join(
      slice(sounds[8]!, 10, 18),
      bars,
      slice(sounds[9]!, 10, 18),
      bars,
      slice(sounds[10]!, 10, 18),
    );
    const cut = join(slice(piece, 0, 14.4), slice(piece, 28.8, 36.8));
    const hit = matchFingerprints(fingerprint(cut), fingerprint(piece), { altered: true });
    expect(hit!.passages).toHaveLength(2);
    const [before, after] = hit!.passages;
    expect(Math.abs(before!.refStartS - before!.startS)).toBeLessThan(0.05);
    expect(Math.abs(after!.refStartS - after!.startS - 14.4)).toBeLessThan(0.05);
    expect(after!.startS).toBeGreaterThan(7.5);
    expect(after!.startS - before!.endS).toBeLessThan(1);
    expect(hit!.coverageQuery).toBeGreaterThan(0.92);
  });

  it("altered and embedded are found", () => {
    const part = slice(render(scores[7]!, { tempo: 0.9, pitchSemitones: -1 }), 20, 32);
    const hit = only(join(slice(sounds[8]!, 0, 24), part, slice(sounds[8]!, 36, 60)));
    expect(hit).toMatchObject({ id: "r7", relationHint: "altered copy" });
    expect(Math.abs(hit.speed - 0.9)).toBeLessThan(0.002);
    expect(Math.abs(hit.pitchSemitones + 1)).toBeLessThan(0.05);
  });
});

describe("what is no copy", () => {
  it("is never held: foreign pieces, forwards and backwards", () => {
    for (const i of [8, 9, 10, 11]) expect(held(sounds[i]!, { reversed: true })).toEqual([]);
  });

  it("is another performance of the same notes: exact landmarks do not recognise it (common practice, no source)", () => {
    const score = scores[5]!;
    const played: Score = {
      lengthS: score.lengthS,
      notes: score.notes.map((note, i) => ({
        ...note,
        startS: Math.max(0, note.startS + 0.12 * Math.sin(i * 12.9898)),
        partials: note.partials.map((_, k) => Math.abs(Math.sin(k + 1.7)) / (1 + k)),
        noiseSeed: note.noiseSeed === 0 ? 0 : note.noiseSeed + 1,
      })),
    };
    played.notes = played.notes.filter((note) => note.startS + note.lengthS <= score.lengthS);
    expect(held(render(played))).toEqual([]);
  });
});

describe("direct comparison", () => {
  it("of two recordings says what the index says", () => {
    const query = fingerprint(slice(sounds[2]!, 20, 35));
    const direct = matchFingerprints(query, fingerprints.get("r2")!, { altered: true });
    const indexed = index.search(query, { altered: true }).find((hit) => hit.id === "r2");
    expect(direct).toEqual({ ...indexed, id: "reference" });
    expect(matchFingerprints(query, fingerprint(sounds[8]!), { altered: true })?.evidence ?? 0).toBeLessThan(
      100,
    );
  });
});

describe("channels", () => {
  it("names the one channel that hides a copy, and mid for an ordinary stereo copy", () => {
    const left = sounds[1]!;
    const right = sounds[9]!;
    const search = (samples: Float32Array) => index.search(fingerprint(samples), { altered: true });
    const hidden = mergeChannelHits({
      mid: search(mix(left, right, 1)),
      left: search(left),
      right: search(right),
    });
    expect(hidden.filter((hit) => band(hit) === "hold")).toMatchObject([{ id: "r1", channel: "left" }]);
    const plain = mergeChannelHits({ mid: search(left), left: search(left) });
    expect(plain[0]).toMatchObject({ id: "r1", channel: "mid" });
  });

  it("with one side turned over cancels in mid and is found in the raw channel", () => {
    const left = sounds[1]!;
    const right = left.map((value) => -value);
    const search = (samples: Float32Array) => index.search(fingerprint(samples), { altered: true });
    const merged = mergeChannelHits({ mid: search(mix(left, right, 1)), left: search(left) });
    expect(merged[0]).toMatchObject({ id: "r1", channel: "left" });
  });
});
