import { describe, expect, it } from "vitest";
import { ANALYSIS_RATE_HZ, createMonoResampler, createResampler } from "@/lib/audio";
import { SincResampler } from "@/lib/audio/sinc-resampler";
import { noise, sine } from "./signals";

interface Streaming {
  push(samples: Float32Array): Float32Array;
  finish(): Float32Array;
}

function run(resampler: Streaming, input: Float32Array, block = 4999): Float32Array {
  const parts: Float32Array[] = [];
  for (let i = 0; i < input.length; i += block)
    parts.push(resampler.push(input.subarray(i, i + block)).slice());
  parts.push(resampler.finish());
  const out = new Float32Array(parts.reduce((sum, part) => sum + part.length, 0));
  let at = 0;
  for (const part of parts) {
    out.set(part, at);
    at += part.length;
  }
  return out;
}

const powerDb = (x: Float32Array, edge = 1500): number => {
  let sum = 0;
  for (let i = edge; i < x.length - edge; i++) sum += x[i]! ** 2;
  return 10 * Math.log10((2 * sum) / (x.length - 2 * edge) + 1e-20);
};

const errorDb = (x: Float32Array, hz: number, rateHz: number, startS = 0, edge = 1500): number => {
  const wanted = x.map((value, i) => value - Math.sin(2 * Math.PI * hz * (startS + i / rateHz)));
  return powerDb(wanted, edge);
};

describe("createMonoResampler: to 11,025 Hz", () => {
  it.each([22050, 32000, 44100, 48000, 88200, 96000, 192000])(
    "from %d Hz keeps 100 Hz to 4.5 kHz in place",
    (rateHz) => {
      for (const hz of [100, 1000, 4000, 4500]) {
        const out = run(createMonoResampler(rateHz), sine(rateHz, hz, 1, 1));
        expect(out.length).toBe(ANALYSIS_RATE_HZ);
        expect(Math.abs(powerDb(out))).toBeLessThan(0.2);
        // In place: a delay of a hundredth of a sample at 4.5 kHz would already leave −31 dB.
        expect(errorDb(out, hz, ANALYSIS_RATE_HZ)).toBeLessThan(-70);
      }
    },
  );

  it.each([44100, 48000, 96000])(
    "from %d Hz lets nothing from 6.5 kHz up fold by more than −80 dB",
    (rateHz) => {
      for (const hz of [6500, 7000, 9000, 11025, 12000, 15500, 17500, 20000, 21900]) {
        expect(powerDb(run(createMonoResampler(rateHz), sine(rateHz, hz, 1, 1)))).toBeLessThan(-80);
      }
    },
  );

  it("does not depend on how the stream is cut", () => {
    const input = noise(30011, 5);
    const whole = run(createMonoResampler(48000), input, input.length);
    for (const block of [1, 17, 1000]) expect(run(createMonoResampler(48000), input, block)).toEqual(whole);
  });

  it("takes the middle, left or right", () => {
    const left = sine(48000, 500, 0.5, 0.8);
    const right = sine(48000, 900, 0.5, 0.4);
    const take = (which: "mid" | "left" | "right"): Float32Array => {
      const resampler = createResampler(48000, which);
      const first = resampler.push([left, right]);
      const rest = resampler.finish();
      return Float32Array.from([...first, ...rest]);
    };
    const [mid, l, r] = [take("mid"), take("left"), take("right")];
    for (let i = 0; i < mid.length; i++) expect(mid[i]).toBeCloseTo(0.5 * (l[i]! + r[i]!), 5);
    expect(powerDb(l)).toBeCloseTo(20 * Math.log10(0.8), 1);
  });
});

describe("SincResampler: what people hear", () => {
  it.each([
    [44100, 48000],
    [88200, 48000],
    [96000, 48000],
    [48000, 44100],
  ])("%d to %d Hz is flat to 19.8 kHz and in place", (fromHz, toHz) => {
    for (const hz of [100, 1000, 10000, 19800]) {
      const out = run(new SincResampler({ fromHz, toHz }), sine(fromHz, hz, 1, 1));
      expect(out.length).toBe(toHz);
      expect(Math.abs(powerDb(out))).toBeLessThan(0.01);
      expect(errorDb(out, hz, toHz)).toBeLessThan(-95);
    }
  });

  it("lets no image through from 96 kHz", () => {
    for (const hz of [25000, 30000, 40000]) {
      expect(
        powerDb(run(new SincResampler({ fromHz: 96000, toHz: 48000 }), sine(96000, hz, 1, 1))),
      ).toBeLessThan(-95);
    }
  });

  it("runs at any speed from any point without drift over ten minutes", () => {
    const samplesPerOutput = 1.0312345;
    const startSamples = 1000.25;
    const length = 10 * 60 * 8000;
    const resampler = new SincResampler({ samplesPerOutput, startSamples });
    let worst = 0;
    let n = 0;
    const check = (part: Float32Array): void => {
      for (let i = 0; i < part.length; i++, n++) {
        const at = startSamples + n * samplesPerOutput;
        if (at < length - 200)
          worst = Math.max(worst, Math.abs(part[i]! - Math.sin(2 * Math.PI * 0.05 * at)));
      }
    };
    for (let i = 0; i < length; i += 8000) {
      check(
        resampler.push(Float32Array.from({ length: 8000 }, (_, k) => Math.sin(2 * Math.PI * 0.05 * (i + k)))),
      );
    }
    expect(n).toBeGreaterThan(4.6e6);
    expect(worst).toBeLessThan(2e-5);
  });
});
