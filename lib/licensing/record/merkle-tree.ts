import { createHash } from "node:crypto";

/** Merkle tree of RFC 9162, section 2.1, with SHA-256. Hashes are Buffers of 32 bytes. */

function sha256(...parts: readonly Uint8Array[]): Buffer {
  const hash = createHash("sha256");
  for (const part of parts) hash.update(part);
  return hash.digest();
}

const LEAF = Uint8Array.of(0);
const NODE = Uint8Array.of(1);

/** The prefixes keep a leaf from passing for a node. */
export function leafHash(data: string | Uint8Array): Buffer {
  return sha256(LEAF, Buffer.from(data));
}

function nodeHash(left: Uint8Array, right: Uint8Array): Buffer {
  return sha256(NODE, left, right);
}

/** The largest power of two smaller than `size`. */
function splitOf(size: number): number {
  let split = 1;
  while (split * 2 < size) split *= 2;
  return split;
}

/** Root over leaf hashes; of nothing, the hash of nothing. */
export function merkleRoot(leaves: readonly Buffer[]): Buffer {
  const [only] = leaves;
  if (!only) return sha256();
  if (leaves.length === 1) return only;
  const split = splitOf(leaves.length);
  return nodeHash(merkleRoot(leaves.slice(0, split)), merkleRoot(leaves.slice(split)));
}

/** The sibling hashes from a leaf up to the root (section 2.1.3.1). */
export function inclusionPath(leaves: readonly Buffer[], index: number): Buffer[] {
  if (!Number.isInteger(index) || index < 0 || index >= leaves.length)
    throw new RangeError(`no leaf ${index} in a tree of ${leaves.length}`);
  if (leaves.length === 1) return [];
  const split = splitOf(leaves.length);
  return index < split
    ? [...inclusionPath(leaves.slice(0, split), index), merkleRoot(leaves.slice(split))]
    : [...inclusionPath(leaves.slice(split), index - split), merkleRoot(leaves.slice(0, split))];
}

/** Whether `leaf` stands at `index` in the tree of `size` leaves with that root (section 2.1.3.2). */
export function isIncluded(proof: {
  leaf: Buffer;
  index: number;
  size: number;
  path: readonly Buffer[];
  root: Buffer;
}): boolean {
  const { leaf, index, size, path, root } = proof;
  if (!Number.isSafeInteger(index) || !Number.isSafeInteger(size) || index < 0 || index >= size) return false;
  let [position, last, hash] = [index, size - 1, leaf];
  for (const sibling of path) {
    if (sibling.length !== 32 || last === 0) return false;
    if (position % 2 === 1 || position === last) {
      hash = nodeHash(sibling, hash);
      while (position % 2 === 0 && position > 0) [position, last] = [position / 2, Math.floor(last / 2)];
    } else {
      hash = nodeHash(hash, sibling);
    }
    [position, last] = [Math.floor(position / 2), Math.floor(last / 2)];
  }
  return last === 0 && hash.equals(root);
}
