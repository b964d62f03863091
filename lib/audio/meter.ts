import { BandwidthMeter, type BandwidthReading } from "./bandwidth";
import { EndingMeter, type EndingReading } from "./ending";
import { FaultsMeter, type FaultsReading } from "./gaps";
import { LevelsMeter, type LevelsReading } from "./levels";
import { LoudnessMeter, type LoudnessOptions, type LoudnessReading } from "./loudness";
import { StereoMeter, type StereoReading } from "./stereo-image";
import { TruePeakMeter, type TruePeakReading } from "./true-peak";

export interface Measures
  extends LoudnessReading,
    LevelsReading,
    FaultsReading,
    StereoReading,
    BandwidthReading,
    EndingReading {
  durationS: number;
  samples: number;
  sampleRateHz: number;
  channels: number;
  /** Null for silence, else dB against full scale. */
  truePeakDbtp: number | null;
  truePeakAtS: number;
  samplePeakDbfs: number | null;
  /** Places over 0 dBTP, at most 64; `overCount` counts all. */
  overs: TruePeakReading["overs"];
  overCount: number;
}

export interface Meter {
  push(block: readonly Float32Array[]): void;
  finish(): Measures;
}

/**
 * Every measure of a delivered recording in one pass. Each part's source stands with it: loudness.ts, true-peak.ts,
 * levels.ts, gaps.ts, stereo-image.ts, bandwidth.ts, ending.ts.
 *
 * Input:   planar blocks of any size, `channels` wide
 * Cost:    memory does not grow with length but for ten loudness values a second
 */
export function createMeter(sampleRateHz: number, channels: number, options: LoudnessOptions = {}): Meter {
  const loudness = new LoudnessMeter(sampleRateHz, channels, options);
  const truePeak = new TruePeakMeter(sampleRateHz, channels, 1);
  const levels = new LevelsMeter(sampleRateHz, channels);
  const faults = new FaultsMeter(sampleRateHz, channels);
  const stereo = new StereoMeter();
  const bandwidth = new BandwidthMeter(sampleRateHz);
  const ending = new EndingMeter(sampleRateHz);
  const parts = [loudness, truePeak, levels, faults, stereo, bandwidth, ending];
  let samples = 0;
  return {
    push(block) {
      for (const part of parts) part.push(block);
      samples += block[0]?.length ?? 0;
    },
    finish() {
      const level = levels.finish();
      const peak = truePeak.finish();
      return {
        ...loudness.finish(),
        ...level,
        ...faults.finish(),
        ...stereo.finish(),
        ...bandwidth.finish(),
        ...ending.finish(),
        durationS: samples / sampleRateHz,
        samples,
        sampleRateHz,
        channels,
        truePeakDbtp: toDb(Math.max(peak.peak, level.samplePeak)),
        truePeakAtS: peak.atS,
        samplePeakDbfs: toDb(level.samplePeak),
        overs: peak.overs,
        overCount: peak.overCount,
      };
    },
  };
}

/** dB against full scale (1.0); null for zero, never −Infinity. */
export function toDb(amplitude: number): number | null {
  return amplitude > 0 ? 20 * Math.log10(amplitude) : null;
}
