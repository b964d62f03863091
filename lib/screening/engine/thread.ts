import {
  band,
  type Channel,
  comparability,
  createIndex,
  DEFAULT_THRESHOLDS,
  type Fingerprint,
  type Hit,
  matchFingerprints,
  mergeChannelHits,
  unpackFingerprint,
} from "@/lib/fingerprint";
import { serveThread } from "@/lib/kernel/thread-side";
import type { FoundHit } from "../found";
import type { SubjectKind } from "../states";
import { fingerprintFile } from "./fingerprint-file";

/*
 * The screening engine's own thread: it decodes and fingerprints files and holds the search index in memory. It sees no
 * database: packed fingerprints come and hits go as messages.
 */
export interface ReferenceRow {
  subjectKind: SubjectKind;
  subjectId: string;
  packed: Uint8Array;
}

export interface QueryRow {
  channel: Channel;
  packed: Uint8Array;
}

const held = new Map<string, Fingerprint>();
const keyOf = (subject: { subjectKind: string; subjectId: string }) =>
  `${subject.subjectKind}:${subject.subjectId}`;
let index = createIndex({ getFingerprint: heldFingerprint });

function heldFingerprint(key: string): Fingerprint {
  const fp = held.get(key);
  if (!fp) throw new Error(`the index asked for ${key}, which is not held`);
  return fp;
}

function applyChanges(args: {
  reset: boolean;
  add: ReferenceRow[];
  remove: { subjectKind: string; subjectId: string }[];
}) {
  if (args.reset) {
    held.clear();
    index = createIndex({ getFingerprint: heldFingerprint });
  }
  for (const row of args.add) {
    const fp = unpackFingerprint(row.packed);
    held.set(keyOf(row), fp);
    if (comparability(fp).comparable) index.add(keyOf(row), fp);
  }
  for (const subject of args.remove) {
    index.remove(keyOf(subject));
    held.delete(keyOf(subject));
  }
  const recordings = [...held.entries()].filter(([key]) => key.startsWith("recording:"));
  return {
    recordings: recordings.length,
    hours: recordings.reduce((total, [, fp]) => total + fp.durationS, 0) / 3600,
  };
}

/** Every channel is asked unaltered and altered; what is in the middle band is kept for a moderator who asks. */
async function search(
  args: { query: QueryRow[]; exclude: string[]; deep?: boolean },
  progress: (done: number, of: number, words: string) => void,
): Promise<FoundHit[]> {
  const byChannel: Partial<Record<Channel, Hit[]>> = {};
  for (const [number, row] of args.query.entries()) {
    const fp = unpackFingerprint(row.packed);
    if (!comparability(fp).comparable) continue;
    const onProgress = (done: number, total: number) =>
      progress(number * total + done, args.query.length * total, "searching");
    const run = (dense: boolean) =>
      index.search(fp, {
        altered: true,
        dense,
        reversed: args.deep ?? false,
        exclude: args.exclude,
        limit: 200,
        onProgress,
      });
    const fast = run(false);
    byChannel[row.channel] = fast.some((hit) => band(hit) === "hold") && !args.deep ? fast : run(true);
  }
  return mergeChannelHits(byChannel).flatMap(toFound);
}

/** Direct comparison with a few references that the index does not hold yet. */
function matchDirect(args: { query: QueryRow[]; references: ReferenceRow[] }): FoundHit[] {
  const byChannel: Partial<Record<Channel, Hit[]>> = {};
  for (const row of args.query) {
    const query = unpackFingerprint(row.packed);
    if (!comparability(query).comparable) continue;
    byChannel[row.channel] = args.references.flatMap((reference) => {
      const fp = unpackFingerprint(reference.packed);
      const hit = comparability(fp).comparable ? matchFingerprints(query, fp, { altered: true }) : null;
      return hit ? [{ ...hit, id: keyOf(reference) }] : [];
    });
  }
  return mergeChannelHits(byChannel).flatMap(toFound);
}

function toFound(hit: Hit): FoundHit[] {
  const verdict = band(hit, DEFAULT_THRESHOLDS);
  if (verdict === "ignore") return [];
  const separator = hit.id.indexOf(":");
  const { id: _id, channel, matchedShare: _share, ...rest } = hit;
  return [
    {
      ...rest,
      band: verdict,
      channel: channel ?? "mid",
      subjectKind: hit.id.slice(0, separator) as SubjectKind,
      subjectId: hit.id.slice(separator + 1),
    },
  ];
}

serveThread({ fingerprintFile, applyChanges, search, matchDirect });
