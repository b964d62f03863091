/**
 * The proof code opens a licence's public page: 80 random bits as 16 characters of base 32, and a check character,
 * so that a slip of the pen is told before anything is looked up.
 *
 * The alphabet has no 0, O, 1 or I. The check character makes the weighted sum of all 17 characters vanish in the
 * field of 32 elements (x^5 + x^2 + 1; the weights are the powers of x): the parity symbol of a Reed-Solomon code.
 * It catches every single wrong character and every exchange of two characters.
 */
const ALPHABET = "23456789ABCDEFGHJKLMNPQRSTUVWXYZ";
const RANDOM_BYTES = 10;
const CHARACTERS = 16;

export type ProofCodeParse = { ok: true; code: string } | { ok: false; message: string };

function timesX(value: number): number {
  const shifted = value << 1;
  return shifted & 32 ? shifted ^ 0b100101 : shifted;
}

function checkCharacter(sixteen: string): string {
  let sum = 0;
  for (const character of sixteen) sum = timesX(sum ^ ALPHABET.indexOf(character));
  return ALPHABET.charAt(sum);
}

/** The 17 characters for ten random bytes. */
export function proofCodeOf(bytes: Uint8Array): string {
  if (bytes.length !== RANDOM_BYTES)
    throw new RangeError(`a proof code needs ${RANDOM_BYTES} bytes, got ${bytes.length}`);
  let bits = bytes.reduce((value, byte) => (value << 8n) | BigInt(byte), 0n);
  let code = "";
  for (let index = 0; index < CHARACTERS; index++) {
    code = ALPHABET.charAt(Number(bits & 31n)) + code;
    bits >>= 5n;
  }
  return code + checkCharacter(code);
}

export function newProofCode(): string {
  return proofCodeOf(crypto.getRandomValues(new Uint8Array(RANDOM_BYTES)));
}

/** "7K3M-QWXA-PD4T-9HEB-Z" */
export function formatProofCode(code: string): string {
  return code.replace(/(.{4})(?=.)/g, "$1-");
}

/** Takes any case, spaces and dashes; an answer of `ok: false` needs no look-up. */
export function parseProofCode(text: string): ProofCodeParse {
  const code = text.toUpperCase().replace(/[\s.\-\u2010-\u2015\u2212]/g, "");
  const strange = [...code].findIndex((character) => !ALPHABET.includes(character));
  if (strange >= 0) {
    const found = [...code][strange] ?? "";
    const why = "01OI".includes(found)
      ? "Proof codes use neither 0 and O nor 1 and I"
      : "Proof codes use digits and letters only";
    return { ok: false, message: `${why}: look at character ${strange + 1}, “${found}”.` };
  }
  if (code.length !== CHARACTERS + 1)
    return { ok: false, message: `A proof code has 17 characters; this one has ${code.length}.` };
  if (checkCharacter(code.slice(0, CHARACTERS)) !== code[CHARACTERS])
    return {
      ok: false,
      message: "The check character does not match: a character is mistyped. Nothing was looked up.",
    };
  return { ok: true, code };
}
