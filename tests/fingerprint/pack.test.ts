import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { type Fingerprint, fingerprint, packFingerprint, unpackFingerprint } from "@/lib/fingerprint";
import { crc32 } from "@/lib/fingerprint/crc32";
import { composeScore, join, render, silence } from "./music";

const fp = fingerprint(join(silence(3), render(composeScore(4, 30))));
const bytes = packFingerprint(fp);

function resealed(change: (bytes: Uint8Array, view: DataView) => void): Uint8Array {
  const copy = bytes.slice();
  const view = new DataView(copy.buffer);
  change(copy, view);
  view.setUint32(copy.length - 4, crc32(copy.subarray(0, copy.length - 4)), true);
  return copy;
}

const anyFingerprint = fc
  .array(
    fc.record({
      step: fc.oneof(fc.integer({ min: 0, max: 200 }), fc.integer({ min: 0, max: 3_000_000 })),
      pitch: fc.integer({ min: 0, max: 65_535 }),
      ranks: fc.integer({ min: 0, max: 255 }),
    }),
    { maxLength: 300 },
  )
  .map((peaks): Fingerprint => {
    let time = 0;
    return {
      engineVersion: fp.engineVersion,
      durationS: 1234.5,
      contentS: 1000.25,
      notComparable: [{ startS: 0.1, endS: 2 / 3, reason: "tone" }],
      timeUnits: Uint32Array.from(peaks, (peak) => (time += peak.step)),
      pitchUnits: Uint16Array.from(peaks, (peak) => peak.pitch),
      ranks: Uint8Array.from(peaks, (peak) => peak.ranks),
    };
  });

describe("packed fingerprint", () => {
  it("comes back as it was", () => {
    expect(unpackFingerprint(bytes)).toEqual(fp);
    fc.assert(
      fc.property(anyFingerprint, (any) => {
        expect(unpackFingerprint(packFingerprint(any))).toEqual(any);
      }),
    );
  });

  it("takes under 16 kB a minute", () => {
    expect(bytes.length / (30 / 60)).toBeLessThan(16_384);
  });

  it("is read from the middle of a larger buffer", () => {
    const larger = new Uint8Array(bytes.length + 20);
    larger.set(bytes, 7);
    expect(unpackFingerprint(larger.subarray(7, 7 + bytes.length))).toEqual(fp);
  });

  it("with another beginning is no fingerprint", () => {
    expect(() => unpackFingerprint(resealed((copy) => copy.set([0x52], 0)))).toThrow(
      "not a fingerprint: it does not begin with SGWF",
    );
  });

  it("of another version or other parameters is refused by name", () => {
    expect(() => unpackFingerprint(resealed((copy) => copy.set([9], 4)))).toThrow(
      "fingerprint format version is 9, this engine reads 1",
    );
    expect(() => unpackFingerprint(resealed((_, view) => view.setUint16(5, 77, true)))).toThrow(
      `fingerprint engine version is 77, this engine reads ${fp.engineVersion}`,
    );
    expect(() => unpackFingerprint(resealed((_, view) => view.setUint32(8, 44_100, true)))).toThrow(
      "fingerprint sample rate is 44100, this engine reads 11025",
    );
  });

  it("cut short is refused at every length", () => {
    expect(() => unpackFingerprint(new Uint8Array(0))).toThrow(
      "fingerprint is 0 bytes; the shortest possible is 48",
    );
    fc.assert(
      fc.property(fc.integer({ min: 0, max: bytes.length - 1 }), (length) => {
        expect(() => unpackFingerprint(bytes.subarray(0, length))).toThrow(RangeError);
      }),
    );
  });

  it("with a count larger than its bytes is refused before anything is allocated", () => {
    expect(() => unpackFingerprint(resealed((_, view) => view.setUint32(40, 0xffffffff, true)))).toThrow(
      /claims \d+ spans and 4294967295 peaks, too many for \d+ bytes of body/,
    );
    expect(() => unpackFingerprint(resealed((_, view) => view.setUint32(36, 0xfffffff0, true)))).toThrow(
      /claims 4294967280 spans/,
    );
  });

  it("with one flipped bit is refused", () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 44, max: bytes.length - 5 }),
        fc.integer({ min: 0, max: 7 }),
        (at, bit) => {
          const copy = bytes.slice();
          copy[at]! ^= 1 << bit;
          expect(() => unpackFingerprint(copy)).toThrow(
            /fingerprint checksum is [0-9a-f]{8}, its bytes give [0-9a-f]{8}/,
          );
        },
      ),
    );
  });

  it("of any bytes whatever gives a fingerprint or a RangeError", () => {
    fc.assert(
      fc.property(fc.uint8Array({ maxLength: 400 }), (body) => {
        const hostile = new Uint8Array(48 + body.length);
        hostile.set(bytes.subarray(0, 44));
        hostile.set(body, 20);
        new DataView(hostile.buffer).setUint32(
          hostile.length - 4,
          crc32(hostile.subarray(0, hostile.length - 4)),
          true,
        );
        try {
          unpackFingerprint(hostile);
        } catch (error) {
          expect(error).toBeInstanceOf(RangeError);
        }
      }),
      { numRuns: 500 },
    );
  });
});

describe("checksum", () => {
  it("of the digits 1 to 9 is CBF43926 (check value of CRC-32/ISO-HDLC)", () => {
    expect(crc32(new TextEncoder().encode("123456789"))).toBe(0xcbf43926);
  });
});
