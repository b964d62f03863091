import fc from "fast-check";
import { expect, it } from "vitest";
import { packContour, thinContour, unpackContour } from "@/components/contour/contour-pack";

const bytes = fc.array(fc.nat(255), { minLength: 1, maxLength: 200 });

it("a contour comes through JSON bin for bin", () => {
  fc.assert(
    fc.property(bytes, (levels) => {
      const data = {
        seconds: levels.length / 20,
        binsPerSecond: 20,
        channels: [{ peak: levels, rms: levels, core: levels }],
      };
      const back = unpackContour(JSON.parse(JSON.stringify(packContour(data))));
      expect(back.seconds).toBe(data.seconds);
      expect(Array.from(back.channels[0]!.peak)).toEqual(levels);
      expect(Array.from(back.channels[0]!.core)).toEqual(levels);
    }),
  );
});

it("a byte is written as RFC 4648 writes it", () => {
  // RFC 4648, section 10: BASE64("foobar") = "Zm9vYmFy".
  const foobar = [102, 111, 111, 98, 97, 114];
  const channels = [{ peak: foobar, rms: foobar, core: foobar }];
  expect(packContour({ seconds: 0.3, binsPerSecond: 20, channels }).channels[0]!.rms).toBe("Zm9vYmFy");
});

it("thinning keeps the loudest peak and the quietest core, and the order of the three", () => {
  const channel = { peak: [10, 200, 30, 40, 50], rms: [3, 4, 0, 0, 6], core: [1, 2, 0, 0, 5] };
  const thin = thinContour({ seconds: 0.25, binsPerSecond: 20, channels: [channel] }, 2);
  expect(thin.binsPerSecond).toBe(10);
  expect(thin.seconds).toBe(0.25);
  expect(thin.channels[0]!.peak).toEqual([200, 40, 50]);
  expect(thin.channels[0]!.rms).toEqual([4, 0, 6]);
  expect(thin.channels[0]!.core).toEqual([1, 0, 5]);
});
