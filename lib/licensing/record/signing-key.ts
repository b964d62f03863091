import {
  createHash,
  createPrivateKey,
  createPublicKey,
  generateKeyPairSync,
  type KeyObject,
  sign,
  verify,
} from "node:crypto";

/** PKCS#8 and SubjectPublicKeyInfo wrappers of a raw Ed25519 key (RFC 8410). */
const PRIVATE_PREFIX = Buffer.from("302e020100300506032b657004220420", "hex");
const PUBLIC_PREFIX = Buffer.from("302a300506032b6570032100", "hex");

export interface SigningKey {
  readonly keyId: string;
  readonly privateKey: KeyObject;
}

export function sha256Hex(data: string | Uint8Array): string {
  return createHash("sha256").update(data).digest("hex");
}

function rawHex(hex: string, bytes: number): Buffer {
  if (hex.length !== 2 * bytes || !/^[0-9a-f]*$/.test(hex))
    throw new RangeError(`expected ${bytes} bytes in lower-case hexadecimal`);
  return Buffer.from(hex, "hex");
}

/** From the 32-byte secret of RFC 8032. */
export function privateKeyFromSeed(seedHex: string): KeyObject {
  const key = Buffer.concat([PRIVATE_PREFIX, rawHex(seedHex, 32)]);
  return createPrivateKey({ key, format: "der", type: "pkcs8" });
}

export function publicKeyFromHex(hex: string): KeyObject {
  const key = Buffer.concat([PUBLIC_PREFIX, rawHex(hex, 32)]);
  return createPublicKey({ key, format: "der", type: "spki" });
}

export function publicKeyHexOf(privateKey: KeyObject): string {
  const der = createPublicKey(privateKey).export({ format: "der", type: "spki" });
  return der.subarray(PUBLIC_PREFIX.length).toString("hex");
}

/** The 32-byte secret of a new key, to be kept where secrets are kept. */
export function newSeedHex(): string {
  const der = generateKeyPairSync("ed25519").privateKey.export({ format: "der", type: "pkcs8" });
  return der.subarray(PRIVATE_PREFIX.length).toString("hex");
}

/** Ed25519 (RFC 8032), in lower-case hexadecimal. */
export function signHex(data: string | Uint8Array, privateKey: KeyObject): string {
  return sign(null, Buffer.from(data), privateKey).toString("hex");
}

/** False, never an exception, for a signature that is not 64 bytes in lower-case hexadecimal. */
export function verifyHex(data: string | Uint8Array, signatureHex: string, publicKey: KeyObject): boolean {
  if (!/^[0-9a-f]{128}$/.test(signatureHex)) return false;
  return verify(null, Buffer.from(data), publicKey, Buffer.from(signatureHex, "hex"));
}
