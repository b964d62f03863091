import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { inclusionPath, isIncluded, leafHash, merkleRoot } from "@/lib/licensing/record/merkle-tree";
import {
  newSeedHex,
  privateKeyFromSeed,
  publicKeyFromHex,
  publicKeyHexOf,
  sha256Hex,
  signHex,
  verifyHex,
} from "@/lib/licensing/record/signing-key";

const bytes = (hex: string) => Buffer.from(hex, "hex");
const flip = (hex: string, bit: number) => {
  const copy = bytes(hex);
  copy[bit >> 3]! ^= 1 << (bit & 7);
  return copy.toString("hex");
};

describe("Ed25519 (RFC 8032, section 7.1)", () => {
  const SHA512_ABC =
    "ddaf35a193617abacc417349ae20413112e6fa4e89a97ea20a9eeee64b55d39a2192992a274fc1a836ba3c23a3feebbd454d4423643ce80e2a9ac94fa54ca49f";
  const vectors = [
    [
      "TEST 1",
      "9d61b19deffd5a60ba844af492ec2cc44449c5697b326919703bac031cae7f60",
      "d75a980182b10ab7d54bfed3c964073a0ee172f3daa62325af021a68f707511a",
      "",
      "e5564300c360ac729086e2cc806e828a84877f1eb8e5d974d873e065224901555fb8821590a33bacc61e39701cf9b46bd25bf5f0595bbe24655141438e7a100b",
    ],
    [
      "TEST 2",
      "4ccd089b28ff96da9db6c346ec114e0f5b8a319f35aba624da8cf6ed4fb8a6fb",
      "3d4017c3e843895a92b70aa74d1b7ebc9c982ccf2ec4968cc0cd55f12af4660c",
      "72",
      "92a009a9f0d4cab8720e820b5f642540a2b27b5416503f8fb3762223ebdb69da085ac1e43e15996e458f3613d0f11d8c387b2eaeb4302aeeb00d291612bb0c00",
    ],
    [
      "TEST 3",
      "c5aa8df43f9f837bedb7442f31dcb7b166d38535076f094b85ce3a2e0b4458f7",
      "fc51cd8e6218a1a38da47ed00230f0580816ed13ba3303ac5deb911548908025",
      "af82",
      "6291d657deec24024827e69c3abe01a30ce548a284743a445e3680d7db5ac3ac18ff9b538d16f290ae67f760984dc6594a7c15e9716ed28dc027beceea1ec40a",
    ],
    [
      "TEST SHA(abc)",
      "833fe62409237b9d62ec77587520911e9a759cec1d19755b7da901b96dca3d42",
      "ec172b93ad5e563bf4932c70e1245034c35467ef2efd4d64ebf819683467e2bf",
      SHA512_ABC,
      "dc2a4459e7369633a52b1bf277839a00201009a3efbf3ecb69bea2186c26b58909351fc9ac90b3ecfdfbc7c66431e0303dca179c138ac17ad9bef1177331a704",
    ],
  ] as const;

  it.each(vectors)("%s", (_, seed, publicKey, message, signature) => {
    const key = privateKeyFromSeed(seed);
    expect(publicKeyHexOf(key)).toBe(publicKey);
    expect(signHex(bytes(message), key)).toBe(signature);
    expect(verifyHex(bytes(message), signature, publicKeyFromHex(publicKey))).toBe(true);
  });

  it("one changed bit of message, signature or key does not verify", () => {
    const [, , publicKey, message, signature] = vectors[2];
    const key = publicKeyFromHex(publicKey);
    for (let bit = 0; bit < 16; bit++)
      expect(verifyHex(bytes(flip(message, bit)), signature, key)).toBe(false);
    for (let bit = 0; bit < 512; bit++)
      expect(verifyHex(bytes(message), flip(signature, bit), key)).toBe(false);
    for (let bit = 0; bit < 256; bit++)
      expect(verifyHex(bytes(message), signature, publicKeyFromHex(flip(publicKey, bit)))).toBe(false);
  });

  it("takes a signature in exactly one spelling", () => {
    const [, , publicKey, message, signature] = vectors[0];
    const key = publicKeyFromHex(publicKey);
    for (const other of [signature.toUpperCase(), `${signature}00`, signature.slice(2), `${signature} `, ""])
      expect(verifyHex(bytes(message), other, key)).toBe(false);
    expect(() => publicKeyFromHex("00")).toThrow(RangeError);
    expect(() => privateKeyFromSeed("zz".repeat(32))).toThrow(RangeError);
  });

  it("a new key signs, and no two are alike", () => {
    const [one, other] = [newSeedHex(), newSeedHex()].map(privateKeyFromSeed);
    const signed = signHex("cue", one!);
    expect(verifyHex("cue", signed, publicKeyFromHex(publicKeyHexOf(one!)))).toBe(true);
    expect(verifyHex("cue", signed, publicKeyFromHex(publicKeyHexOf(other!)))).toBe(false);
  });
});

describe("SHA-256 (FIPS 180-4)", () => {
  it.each([
    ["", "e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855"],
    ["abc", "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad"],
  ])("of %j", (text, hex) => expect(sha256Hex(text)).toBe(hex));
});

describe("Merkle tree (RFC 9162, section 2.1)", () => {
  // The eight leaves and nine roots that open implementations of certificate transparency share as test data.
  const LEAVES = [
    "",
    "00",
    "10",
    "2021",
    "3031",
    "40414243",
    "5051525354555657",
    "606162636465666768696a6b6c6d6e6f",
  ];
  const ROOTS = [
    "e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855",
    "6e340b9cffb37a989ca544e6bb780a2c78901d3fb33738768511a30617afa01d",
    "fac54203e7cc696cf0dfcb42c92a1d9dbaf70ad9e621f4bd8d98662f00e3c125",
    "aeb6bcfe274b70a14fb067a5e5578264db0fa9b51af5e0ba159158f329e06e77",
    "d37ee418976dd95753c1c73862b9398fa2a2cf9b4ff0fdfe8b30cd95209614b7",
    "4e3bbb1f7b478dcfe71fb631631519a3bca12c9aefca1612bfce4c13a86264d4",
    "76e67dadbcdf1e10e1b74ddc608abd2f98dfb16fbce75277b5232a127f2087ef",
    "ddb89be403809e325750d3d263cd78929c2942b7942a34b77e122c9594a74c8c",
    "5dc9da79a70659a9ad559cb701ded9a2ab9d823aad2f4960cfe370eff4604328",
  ];
  const known = LEAVES.map((hex) => leafHash(bytes(hex)));

  it.each(ROOTS.map((root, size) => [size, root] as const))("tree of %i leaves", (size, root) =>
    expect(merkleRoot(known.slice(0, size)).toString("hex")).toBe(root),
  );

  it.each([
    [
      0,
      [
        "96a296d224f285c67bee93c30f8a309157f0daa35dc5b87e410b78630a09cfc7",
        "5f083f0a1a33ca076a95279832580db3e0ef4584bdff1f54c8a360f50de3031e",
        "6b47aaf29ee3c2af9af889bc1fb9254dabd31177f16232dd6aab035ca39bf6e4",
      ],
    ],
    [
      5,
      [
        "bc1a0643b12e4d2d7c77918f44e0f4f79a838b6cf9ec5b5c283e1f4d88599e6b",
        "ca854ea128ed050b41b35ffc1b87b8eb2bde461e9e3b5596ece6b9d5975a0ae0",
        "d37ee418976dd95753c1c73862b9398fa2a2cf9b4ff0fdfe8b30cd95209614b7",
      ],
    ],
  ])("path of leaf %i of eight", (index, path) =>
    expect(inclusionPath(known, index).map((hash) => hash.toString("hex"))).toEqual(path),
  );

  /** A slow second way to the root: combine neighbours level by level and carry an odd one up unchanged. */
  const rootByLevels = (leaves: readonly Buffer[]): Buffer => {
    let level = [...leaves];
    while (level.length > 1) {
      const next: Buffer[] = [];
      for (let i = 0; i < level.length; i += 2) {
        const [left, right] = [level[i]!, level[i + 1]];
        next.push(right ? bytes(sha256Hex(Buffer.concat([Buffer.of(1), left, right]))) : left);
      }
      level = next;
    }
    return level[0]!;
  };
  const tree = (size: number) => Array.from({ length: size }, (_, i) => leafHash(`leaf ${i} of ${size}`));

  it("both ways to the root agree, and every leaf of every tree to 40 is proved in its own place only", () => {
    for (let size = 1; size <= 40; size++) {
      const leaves = tree(size);
      const root = merkleRoot(leaves);
      expect(root).toEqual(rootByLevels(leaves));
      for (let index = 0; index < size; index++) {
        const proof = { leaf: leaves[index]!, index, size, path: inclusionPath(leaves, index), root };
        expect(isIncluded(proof)).toBe(true);
        for (let other = -1; other <= size; other++)
          if (other !== index) expect(isIncluded({ ...proof, index: other })).toBe(false);
        expect(isIncluded({ ...proof, leaf: leafHash("something else") })).toBe(false);
      }
    }
  });

  it("a changed, missing or added hash of the path, or another root, proves nothing", () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 2, max: 200 }),
        fc.nat(),
        fc.nat(),
        fc.nat(255),
        (size, at, which, bit) => {
          const leaves = tree(size);
          const index = at % size;
          const path = inclusionPath(leaves, index);
          const root = merkleRoot(leaves);
          const place = which % path.length;
          const bent = path.map((hash, i) => (i === place ? bytes(flip(hash.toString("hex"), bit)) : hash));
          const proof = { leaf: leaves[index]!, index, size, path, root };
          expect(isIncluded({ ...proof, path: bent })).toBe(false);
          expect(isIncluded({ ...proof, path: path.slice(1) })).toBe(false);
          expect(isIncluded({ ...proof, path: [...path, root] })).toBe(false);
          expect(isIncluded({ ...proof, root: bytes(flip(root.toString("hex"), bit)) })).toBe(false);
        },
      ),
      { numRuns: 50 },
    );
  });

  it("an inner node cannot pass for a leaf", () => {
    const four = tree(4);
    const forged = leafHash(Buffer.concat([four[0]!, four[1]!]));
    expect(merkleRoot([forged, leafHash(Buffer.concat([four[2]!, four[3]!]))])).not.toEqual(merkleRoot(four));
    expect(() => inclusionPath(four, 4)).toThrow(RangeError);
  });
});
