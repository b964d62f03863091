/** How a case is heard. `either` is A or B, changed over at the same instant. */
export type ListeningMode = "a" | "b" | "either" | "sides" | "difference";
export type ListeningSide = "a" | "b";

export const SWITCH_LEAD_S = 0.02;
export const SWITCH_RAMP_S = 0.03;
export const LIMIT_DB = -12;
const RATIO = 20;
export const CEILING = 0.5;

export interface ListeningGraph {
  /** Connect this to the destination. */
  output: AudioNode;
  setMode(mode: ListeningMode, side: ListeningSide, atS?: number): void;
  /** 0 to 1, heard as its square. */
  setLevel(level: number): void;
  /** Silent at once; fadeIn lets it be heard again over 30 ms. */
  mute(): void;
  fadeIn(): void;
  stop(): void;
}

/** Ramps one parameter, each change after the last has ended, so that no step is ever heard. */
class Ramped {
  private value: number;
  private freeAtS = 0;
  constructor(
    private readonly param: AudioParam,
    initial: number,
  ) {
    this.value = initial;
    param.value = initial;
  }
  to(value: number, atS: number): void {
    if (value === this.value) return;
    const startS = Math.max(atS, this.freeAtS);
    this.param.setValueAtTime(this.value, startS);
    this.param.linearRampToValueAtTime(value, startS + SWITCH_RAMP_S);
    this.value = value;
    this.freeAtS = startS + SWITCH_RAMP_S;
  }
}

/**
 * A DynamicsCompressor makes its result louder by a gain that the Web Audio API defines from its own curve; this
 * takes that gain back, so that quiet differences are heard as quiet as they are. Knee 0: the curve at full scale is
 * the threshold plus the rest divided by the ratio; the make-up is the inverse of that to the power 0.6.
 */
export function makeUpGain(thresholdDb: number, ratio: number): number {
  const fullRangeDb = thresholdDb - thresholdDb / ratio;
  return (1 / 10 ** (fullRangeDb / 20)) ** 0.6;
}

function limiter(ctx: BaseAudioContext, input: AudioNode): AudioNode {
  const compressor = new DynamicsCompressorNode(ctx, {
    threshold: LIMIT_DB,
    knee: 0,
    ratio: RATIO,
    attack: 0.002,
    release: 0.12,
  });
  const takenBack = new GainNode(ctx, { gain: 1 / makeUpGain(LIMIT_DB, RATIO) / CEILING });
  const bound = new WaveShaperNode(ctx, { curve: Float32Array.of(-CEILING, 0, CEILING) });
  return input.connect(compressor).connect(takenBack).connect(bound);
}

/**
 * Source: a four-channel node, A left and right in 1 and 2, B left and right in 3 and 4, already aligned. One constant
 * source moves between A (0) and B (1): into B's gain, and through −1 into A's, so the two always add to one.
 */
export function buildListeningGraph(
  ctx: BaseAudioContext,
  source: AudioNode,
  gainDb: number,
): ListeningGraph {
  const splitter = new ChannelSplitterNode(ctx, { numberOfOutputs: 4 });
  source.connect(splitter);
  const pair = (first: number): AudioNode => {
    const merger = new ChannelMergerNode(ctx, { numberOfInputs: 2 });
    splitter.connect(merger, first, 0);
    splitter.connect(merger, first + 1, 1);
    return merger;
  };
  const stereo = { channelCount: 2, channelCountMode: "explicit" } as const;
  const a = pair(0);
  const b = pair(2).connect(new GainNode(ctx, { ...stereo, gain: 10 ** (gainDb / 20) }));

  const choice = new ConstantSourceNode(ctx, { offset: 0 });
  const aGain = new GainNode(ctx, { ...stereo, gain: 1 });
  const bGain = new GainNode(ctx, { ...stereo, gain: 0 });
  choice.connect(bGain.gain);
  choice.connect(new GainNode(ctx, { gain: -1 })).connect(aGain.gain);
  const choiceBus = new GainNode(ctx, stereo);
  a.connect(aGain).connect(choiceBus);
  b.connect(bGain).connect(choiceBus);

  const sidesBus = new ChannelMergerNode(ctx, { numberOfInputs: 2 });
  const mono = (): GainNode => new GainNode(ctx, { channelCount: 1, channelCountMode: "explicit" });
  a.connect(mono()).connect(sidesBus, 0, 0);
  b.connect(mono()).connect(sidesBus, 0, 1);

  const differenceSum = new GainNode(ctx, stereo);
  a.connect(differenceSum);
  b.connect(new GainNode(ctx, { ...stereo, gain: -1 })).connect(differenceSum);

  const level = new GainNode(ctx, { ...stereo, gain: 0 });
  const fade = new GainNode(ctx, { ...stereo, gain: 1 });
  const bus = (node: AudioNode, initial: number): Ramped => {
    const gain = new GainNode(ctx, { ...stereo, gain: initial });
    node.connect(gain).connect(level);
    return new Ramped(gain.gain, initial);
  };
  const buses = {
    choice: bus(choiceBus, 1),
    sides: bus(sidesBus, 0),
    difference: bus(limiter(ctx, differenceSum), 0),
  };
  const chosen = new Ramped(choice.offset, 0);
  level.connect(fade);
  choice.start();

  return {
    output: fade,
    setMode(mode, side, atS = ctx.currentTime + SWITCH_LEAD_S) {
      const heard = mode === "sides" ? "sides" : mode === "difference" ? "difference" : "choice";
      buses.choice.to(heard === "choice" ? 1 : 0, atS);
      buses.sides.to(heard === "sides" ? 1 : 0, atS);
      buses.difference.to(heard === "difference" ? 1 : 0, atS);
      const heardSide = mode === "a" || mode === "b" ? mode : side;
      if (heard === "choice") chosen.to(heardSide === "b" ? 1 : 0, atS);
    },
    setLevel(value) {
      level.gain.setTargetAtTime(value ** 2, ctx.currentTime, SWITCH_RAMP_S / 3);
    },
    mute() {
      fade.gain.cancelScheduledValues(ctx.currentTime);
      fade.gain.setValueAtTime(0, ctx.currentTime);
    },
    fadeIn() {
      fade.gain.cancelScheduledValues(ctx.currentTime);
      fade.gain.setValueAtTime(0, ctx.currentTime);
      fade.gain.linearRampToValueAtTime(1, ctx.currentTime + SWITCH_RAMP_S);
    },
    stop() {
      choice.stop();
      fade.disconnect();
    },
  };
}
