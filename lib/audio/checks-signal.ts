import { type NamedRule, pass, places, type Rule, withUnit } from "./check-row";

/** Genres whose masters are quiet on purpose. */
const QUIET_GENRES = ["ambient", "drone and texture"];

const truePeak: Rule = (_facts, measures) => {
  const limit = "at most −1.0 dBTP; over 0.0 dBTP is returned";
  const peak = measures.truePeakDbtp;
  if (peak === null) return null;
  const measured = withUnit(peak, 2, "dBTP");
  if (peak <= -1) return pass("The true peak leaves headroom.", measured, limit);
  const over = peak > 0;
  return {
    verdict: over ? "return" : "warn",
    what: over
      ? `The signal goes over full scale between samples in ${places(measures.overCount)}.`
      : "The true peak is close to full scale.",
    measured,
    limit,
    atS: measures.truePeakAtS,
    ...(over && measures.overs.length > 0 ? { placesS: measures.overs.map((place) => place.atS) } : {}),
    remedy: "Set the limiter's ceiling to −1.0 dBTP with true-peak detection on, and export again.",
  };
};

const clipping: Rule = (_facts, measures) => {
  const limit = "no run of 3 or more samples at full scale";
  const first = measures.clipRuns[0];
  if (!first) return pass("Nothing is clipped.", "0 runs", limit);
  const longest = Math.max(...measures.clipRuns.map((run) => run.samples));
  return {
    verdict: "return",
    what: `The signal is clipped in ${places(measures.clipRunCount)}.`,
    measured: `${measures.clipRunCount} ${measures.clipRunCount === 1 ? "run" : "runs"}, longest ${longest} samples`,
    limit,
    atS: first.atS,
    placesS: measures.clipRuns.map((run) => run.atS),
    remedy: "Lower the level before the limiter or the export, and export again.",
  };
};

const loudness: Rule = (_facts, measures, context) => {
  const limit = "−20 to −9 LUFS is usual; under −35 LUFS is returned";
  const level = measures.integratedLufs;
  if (level === null) return null;
  const measured = withUnit(level, 1, "LUFS");
  if (level < -35) {
    return {
      verdict: "return",
      what: "The programme is far too quiet: this is probably the wrong file.",
      measured,
      limit,
      remedy: "Check the export: a muted bus or an empty take reads like this.",
    };
  }
  const quietOnPurpose = level < -20 && QUIET_GENRES.includes(context.genre ?? "");
  if ((level >= -20 && level <= -9) || quietOnPurpose) return pass("The loudness is usual.", measured, limit);
  return {
    verdict: "warn",
    what: level > -9 ? "The master is louder than usual." : "The master is quieter than usual.",
    measured,
    limit,
    remedy: "Only a question: keep it if it is meant. Masters are not brought to a broadcast level.",
  };
};

const loudnessRange: Rule = (_facts, measures) => {
  if (measures.rangeLu === null) return null;
  const measured = withUnit(measures.rangeLu, 1, "LU");
  const limit = "over 20 LU is worth a look";
  if (measures.rangeLu <= 20) return pass("The loudness range is usual.", measured, limit);
  return {
    verdict: "warn",
    what: "The loudness range is wide for music under speech.",
    measured,
    limit,
    remedy: "Keep it if it is meant, or deliver a bed with less range beside it.",
  };
};

const dcOffset: Rule = (_facts, measures) => {
  const worst = Math.max(...measures.dcOffset.map(Math.abs));
  const measured = withUnit(worst * 100, 2, "%");
  const limit = "less than 0.1 % of full scale; over 1 % is returned";
  if (worst < 0.001) return pass("There is no offset.", measured, limit);
  return {
    verdict: worst > 0.01 ? "return" : "warn",
    what: "The waveform is shifted off zero, which clicks at edits.",
    measured,
    limit,
    remedy: "Put a high-pass filter at 10 to 20 Hz on the mix bus and export again.",
  };
};

const lossyHistory: Rule = (facts, measures) => {
  if (!facts.lossless || !measures.looksLossy || measures.cutoffHz === null) return null;
  const edge = withUnit(measures.cutoffHz / 1000, 1, "kHz");
  return {
    verdict: "warn",
    what: `Nothing sounds above ${edge}, and the edge is sharp. Was this ever an MP3?`,
    measured: `${withUnit(measures.dropDb, 0, "dB")} down within 1 kHz above ${edge}`,
    limit: "full bandwidth",
    remedy:
      "If a lossy file was imported into the session, replace it with its source. If not, say so in a note.",
  };
};

export const SIGNAL_RULES: readonly NamedRule[] = [
  ["T01", "true peak", truePeak],
  ["T01", "clipping", clipping],
  ["T01", "loudness", loudness],
  ["T01", "loudness range", loudnessRange],
  ["T04", "offset", dcOffset],
  ["T04", "lossy history", lossyHistory],
];
