import { fileURLToPath } from "node:url";
import { type Browser, chromium, type Page } from "@playwright/test";
import { build } from "vite";
import { afterAll, beforeAll, describe, expect, it } from "vitest";

/** What the page measures; channels are left and right, times in seconds. */
interface Rendered {
  heardA: number[];
  heardB: number[];
  switchedSame: number[];
  rampedStep: number;
  sides: number[];
  nulled: number[];
  quietDifference: number;
  loudDifference: number;
  /** Before a seek, just after it, half-way through the fade, and after it. */
  seek: number[];
}

let browser: Browser;
let page: Page;
let measured: Rendered;

/** Runs in the browser: the graph on an OfflineAudioContext, against the sine tones that were put in. */
async function measure(): Promise<Rendered> {
  const { buildListeningGraph } = (
    globalThis as unknown as { Listening: typeof import("@/components/review/listening-graph") }
  ).Listening;
  const rate = 48_000;
  // A context stops at whole blocks of 128 frames.
  const SEEK_S = (188 * 128) / rate;
  const length = rate * 2;
  const tone = (hz: number, amplitude: number) =>
    Float32Array.from({ length }, (_, i) => amplitude * Math.sin((2 * Math.PI * hz * i) / rate));
  type Graph = ReturnType<typeof buildListeningGraph>;
  async function render(
    channels: Float32Array<ArrayBuffer>[],
    gainDb: number,
    act: (graph: Graph, ctx: OfflineAudioContext) => void,
  ) {
    const ctx = new OfflineAudioContext(2, length, rate);
    const buffer = ctx.createBuffer(4, length, rate);
    channels.forEach((samples, index) => {
      buffer.copyToChannel(samples, index);
    });
    const source = new AudioBufferSourceNode(ctx, { buffer });
    const graph = buildListeningGraph(ctx, source, gainDb);
    graph.setLevel(1);
    act(graph, ctx);
    graph.output.connect(ctx.destination);
    source.start();
    const heard = await ctx.startRendering();
    return [heard.getChannelData(0), heard.getChannelData(1)] as const;
  }
  const worst = (x: Float32Array, fromS: number, toS: number, wanted?: Float32Array) => {
    let most = 0;
    for (let i = Math.floor(fromS * rate); i < toS * rate; i++)
      most = Math.max(most, Math.abs(x[i]! - (wanted?.[i] ?? 0)));
    return most;
  };
  const a = [tone(440, 0.5), tone(550, 0.4)] as const;
  const b = [tone(660, 0.5), tone(770, 0.3)] as const;
  const mono = (x: Float32Array, y: Float32Array) => x.map((value, i) => 0.5 * (value + y[i]!));
  const half = (x: Float32Array<ArrayBuffer>) => x.map((value) => value / 2);
  const quiet = tone(200, 0.02);

  const onlyA = await render([...a, ...b], 0, () => {});
  const onlyB = await render([...a, ...b], 0, (graph) => graph.setMode("b", "b", 0.5));
  const same = await render([...a, ...a], 0, (graph) => {
    graph.setMode("either", "b", 0.5);
    graph.setMode("either", "a", 0.9);
    graph.setMode("either", "b", 0.91);
  });
  const silent = new Float32Array(length);
  const steady = new Float32Array(length).fill(0.5);
  const [ramp] = await render([steady, steady, silent, silent], 0, (graph) =>
    graph.setMode("either", "b", 0.5),
  );
  let rampedStep = 0;
  for (let i = Math.floor(0.4 * rate); i < rate; i++)
    rampedStep = Math.max(rampedStep, Math.abs(ramp[i]! - ramp[i - 1]!));
  const sides = await render([...a, ...b], 0, (graph) => graph.setMode("sides", "a", 0.3));
  const nulled = await render([a[0], a[1], half(a[0]), half(a[1])], 20 * Math.log10(2), (graph) =>
    graph.setMode("difference", "a", 0.3),
  );
  const [quietHeard] = await render(
    [a[0], a[1], a[0].map((value, i) => value - quiet[i]!), a[1]],
    0,
    (graph) => graph.setMode("difference", "a", 0.3),
  );
  const full = tone(440, 1);
  const against = full.map((value) => -value);
  const [loudHeard] = await render([full, full, against, against], 0, (graph) =>
    graph.setMode("difference", "a", 0.3),
  );
  const [faded] = await render([steady, steady, steady, steady], 0, (graph, ctx) => {
    void ctx.suspend(SEEK_S).then(() => {
      graph.mute();
      graph.fadeIn();
      return ctx.resume();
    });
  });
  return {
    heardA: onlyA.map((x, i) => worst(x, 0.2, 2, a[i])),
    heardB: onlyB.map((x, i) => worst(x, 0.6, 2, b[i])),
    switchedSame: same.map((x, i) => worst(x, 0.2, 2, a[i])),
    rampedStep,
    sides: [worst(sides[0], 0.5, 2, mono(a[0], a[1])), worst(sides[1], 0.5, 2, mono(b[0], b[1]))],
    nulled: nulled.map((x) => worst(x, 0.6, 2)),
    quietDifference: worst(quietHeard, 0.8, 2),
    loudDifference: worst(loudHeard, 0.4, 2),
    seek: [0.49, SEEK_S + 0.0005, SEEK_S + 0.015, SEEK_S + 0.04].map((atS) =>
      Math.abs(faded[Math.round(atS * rate)]!),
    ),
  };
}

beforeAll(async () => {
  const entry = fileURLToPath(new URL("../../components/review/listening-graph.ts", import.meta.url));
  const built = await build({
    configFile: false,
    logLevel: "silent",
    build: { write: false, lib: { entry, formats: ["iife"], name: "Listening" } },
  });
  const output = [built].flat()[0];
  const code = output && "output" in output ? output.output[0].code : "";
  browser = await chromium.launch({
    executablePath: "/usr/bin/chromium",
    args: [
      "--no-sandbox",
      "--disable-gpu",
      "--disable-quic",
      "--no-first-run",
      "--disable-background-networking",
    ],
  });
  page = await browser.newPage();
  await page.addScriptTag({ content: code });
  measured = await page.evaluate(measure);
});

afterAll(async () => {
  await browser?.close();
});

describe("both sides of a case are heard as they are", () => {
  it("A alone and B alone come through unchanged", () => {
    for (const error of [...measured.heardA, ...measured.heardB]) expect(error).toBeLessThan(1e-6);
  });

  it("changing over between two equal recordings changes no sample", () => {
    for (const error of measured.switchedSame) expect(error).toBeLessThan(1e-6);
  });

  it("changing over takes 30 ms and makes no step", () => {
    // A steady 0.5 falling to nothing in 30 ms at 48 kHz moves 0.5 / 1440 a sample; a switch would move 0.5.
    expect(measured.rampedStep).toBeGreaterThan(0);
    expect(measured.rampedStep).toBeLessThan(0.5 / 1440 + 1e-5);
  });

  it("A stands left and B right, each in mono", () => {
    for (const error of measured.sides) expect(error).toBeLessThan(1e-6);
  });

  it("nothing is heard of the difference of two recordings that differ by a gain alone", () => {
    for (const left of measured.nulled) expect(left).toBeLessThan(1e-6);
  });

  it("a quiet difference is heard as quiet as it is, a loud one is held down", () => {
    expect(Math.abs(measured.quietDifference - 0.02)).toBeLessThan(0.0005);
    expect(measured.loudDifference).toBeLessThanOrEqual(0.5);
  });

  it("a seek fades in from silence over 30 ms", () => {
    const [before, atOnce, halfWay, after] = measured.seek;
    expect(before).toBeCloseTo(0.5, 4);
    expect(atOnce).toBeLessThan(0.02);
    expect(halfWay).toBeCloseTo(0.25, 2);
    expect(after).toBeCloseTo(0.5, 4);
  });
});
