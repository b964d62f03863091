import { describe, expect, it } from "vitest";
import { createIndex, type Fingerprint, fingerprint, type Hit } from "@/lib/fingerprint";
import type { Candidate } from "@/lib/fingerprint/candidates";
import { searchPairs } from "@/lib/fingerprint/pair-search";
import { queryPairs, referencePairs } from "@/lib/fingerprint/pairs";
import { findEnd, findStart, PostingCursor } from "@/lib/fingerprint/postings";
import { prepare } from "@/lib/fingerprint/prepared";
import { buildSegment, mergeSegments } from "@/lib/fingerprint/segment";
import { composeScore, render, slice } from "./music";

const sounds = new Map<string, Float32Array>();
const fingerprints = new Map<string, Fingerprint>();
for (let i = 0; i < 10; i++) {
  const id = `piece ${i}`;
  sounds.set(id, render(composeScore(100 + i, 40)));
  fingerprints.set(id, fingerprint(sounds.get(id)!));
}
const ids = [...fingerprints.keys()];
const query = fingerprint(slice(sounds.get("piece 3")!, 12, 24));

function indexOf(order: string[]) {
  const index = createIndex({ getFingerprint: (id) => fingerprints.get(id)! });
  for (const id of order) index.add(id, fingerprints.get(id)!);
  return index;
}
function first(hits: Hit[]): Pick<Hit, "id"> | undefined {
  return hits[0];
}

describe("index", () => {
  it("gives the same hits whatever the order of insertion and however it was cut into segments", () => {
    const wanted = indexOf(ids).search(query, { altered: true });
    expect(first(wanted)).toMatchObject({ id: "piece 3" });
    const backwards = indexOf([...ids].reverse());
    expect(backwards.search(query, { altered: true })).toEqual(wanted);
    const piecemeal = createIndex({ getFingerprint: (id) => fingerprints.get(id)! });
    for (const id of [...ids.slice(5), ...ids.slice(0, 5)]) {
      piecemeal.add(id, fingerprints.get(id)!);
      piecemeal.stats();
    }
    expect(piecemeal.stats().segments).toBeGreaterThan(1);
    expect(piecemeal.search(query, { altered: true })).toEqual(wanted);
  });

  it("does not rebuild everything: segments stay few as recordings come one by one", () => {
    const index = createIndex({ getFingerprint: (id) => fingerprints.get(id)! });
    for (let i = 0; i < 64; i++) {
      index.add(`copy ${i}`, fingerprints.get(ids[i % ids.length]!)!);
      expect(index.stats().segments).toBeLessThanOrEqual(3 * 4);
    }
    expect(index.size).toBe(64);
  });

  it("no longer finds what was removed, and finds it again once added", () => {
    const index = indexOf(ids);
    expect(index.has("piece 3")).toBe(true);
    expect(index.remove("piece 3")).toBe(true);
    expect(index.remove("piece 3")).toBe(false);
    expect(index.size).toBe(9);
    expect(index.search(query, { altered: true }).some((hit) => hit.id === "piece 3")).toBe(false);
    index.add("piece 3", fingerprints.get("piece 3")!);
    expect(first(index.search(query, { altered: false }))).toMatchObject({ id: "piece 3" });
    index.search(query, { altered: false });
    expect(index.remove("piece 3")).toBe(true);
    expect(index.search(query, { altered: false }).some((hit) => hit.id === "piece 3")).toBe(false);
  });

  it("replaces a recording added twice", () => {
    const index = indexOf(ids);
    index.stats();
    index.add("piece 3", fingerprints.get("piece 3")!);
    expect(index.size).toBe(10);
    expect(index.search(query, { altered: false }).filter((hit) => hit.id === "piece 3").length).toBe(1);
  });

  it("leaves out what the caller excludes, for that search only", () => {
    const index = indexOf(ids);
    expect(
      index.search(query, { altered: true, exclude: ["piece 3"] }).some((hit) => hit.id === "piece 3"),
    ).toBe(false);
    expect(first(index.search(query, { altered: true }))).toMatchObject({ id: "piece 3" });
  });

  it("answers the same when fingerprints are loaded on demand, and reports progress to the end", async () => {
    const index = indexOf(ids);
    const seen: number[] = [];
    const hits = await index.searchAsync(
      query,
      { altered: true, onProgress: (done, total) => seen.push(done / total) },
      async (id) => fingerprints.get(id)!,
    );
    expect(hits).toEqual(index.search(query, { altered: true }));
    expect(seen.at(-1)).toBe(1);
    expect(seen).toEqual([...seen].sort((x, y) => x - y));
  });

  it("finds nothing in nothing", () => {
    expect(indexOf([]).search(query, { altered: true })).toEqual([]);
  });
});

describe("segments", () => {
  it("hold every hash of every recording, before and after a merge", () => {
    const parts = [0, 1, 2].map((i) => buildSegment([{ id: ids[i]!, fp: fingerprints.get(ids[i]!)! }]));
    const merged = mergeSegments(parts);
    for (let i = 0; i < 3; i++) {
      const references = referencePairs(prepare(fingerprints.get(ids[i]!)!));
      for (const segment of [parts[i]!, merged]) {
        const start = segment.starts[segment.ids.indexOf(ids[i]!)]!;
        for (let j = 0; j < references.count; j += 7) {
          const hash = references.hash[j]!;
          const from = findStart(segment.pairs, hash);
          const positions = Array.from(
            segment.pairs.position.subarray(from, findEnd(segment.pairs, hash, from)),
          );
          expect(positions).toContain(start + Math.round(references.timeFrames[j]! * 4));
        }
      }
    }
  });

  it("walk in order of hash and lose no bit of it", () => {
    const segment = buildSegment(ids.map((id) => ({ id, fp: fingerprints.get(id)! })));
    const wanted = ids
      .flatMap((id) => {
        const { count, hash } = referencePairs(prepare(fingerprints.get(id)!));
        return Array.from(hash.subarray(0, count));
      })
      .sort((x, y) => x - y);
    const found: number[] = [];
    const cursor = new PostingCursor(segment.pairs);
    while (cursor.next()) found.push(cursor.hash);
    expect(found).toEqual(wanted);
  });

  it("drop what is dead when they merge", () => {
    const part = buildSegment(ids.slice(0, 3).map((id) => ({ id, fp: fingerprints.get(id)! })));
    part.dead[1] = 1;
    const merged = mergeSegments([part]);
    expect(merged.ids).toEqual([ids[0], ids[2]]);
    const alone = buildSegment([ids[0]!, ids[2]!].map((id) => ({ id, fp: fingerprints.get(id)! })));
    expect(merged.pairs).toEqual(alone.pairs);
    expect(merged.quads).toEqual(alone.quads);
  });
});

/** The plain way: every question against every reference pair, a map of exact offsets, the best two-cell sum. */
function slowBest(questionFp: Fingerprint): { id: string; votes: number; offset: number } {
  const questions = queryPairs(prepare(questionFp));
  let best = { id: "", votes: 0, offset: 0 };
  for (const id of ids) {
    const references = referencePairs(prepare(fingerprints.get(id)!));
    const cells = new Map<number, number>();
    for (let i = 0; i < questions.count; i++) {
      for (let j = 0; j < references.count; j++) {
        if (questions.hash[i] !== references.hash[j]) continue;
        const time = Math.round(references.timeFrames[j]! * 4) / 4;
        const cell = Math.floor((time - questions.timeFrames[i]!) / 2);
        cells.set(cell, (cells.get(cell) ?? 0) + 1);
      }
    }
    for (const [cell, votes] of cells) {
      const sum = votes + (cells.get(cell + 1) ?? 0);
      if (sum > best.votes) best = { id, votes: sum, offset: 2 * (cell + 1) };
    }
  }
  return best;
}

describe("pair search", () => {
  it("finds the place that a plain comparison of all with all finds, with the same votes", () => {
    const segments = [
      buildSegment(ids.slice(0, 4).map((id) => ({ id, fp: fingerprints.get(id)! }))),
      buildSegment(ids.slice(4).map((id) => ({ id, fp: fingerprints.get(id)! }))),
    ];
    for (const [id, fromS] of [
      ["piece 0", 3],
      ["piece 5", 21.7],
      ["piece 9", 29],
    ] as const) {
      const part = fingerprint(slice(sounds.get(id)!, fromS, fromS + 8));
      const questions = queryPairs(prepare(part));
      const counts = { questions: 0, found: 0, read: 0 };
      const options = { budget: Number.POSITIVE_INFINITY, votesMin: 4 };
      const found = searchPairs(segments, questions, prepare(part).lengthFrames, options, counts, () => {});
      const best = found.reduce<Candidate>((top, one) => (one.votes > top.votes ? one : top), found[0]!);
      const wanted = slowBest(part);
      expect(segments[best.segment]!.ids[best.recording]).toBe(wanted.id);
      expect(wanted.id).toBe(id);
      expect(best.votes).toBe(wanted.votes);
      expect(Math.abs(best.map.b - wanted.offset)).toBeLessThanOrEqual(2);
      expect(counts.read).toBe(counts.found);
    }
  });
});
