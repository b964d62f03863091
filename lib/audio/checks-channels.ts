import { type NamedRule, pass, type Rule, withUnit } from "./check-row";

const channelCount: Rule = (facts, measures, context) => {
  const limit = "stereo; mono only if declared, more channels only beside a stereo version";
  const measured = facts.channels === 1 ? "1 channel" : `${facts.channels} channels`;
  if (facts.channels === 2 && !measures.dualMono) return pass("The file is stereo.", measured, limit);
  if (facts.channels === 2 || facts.channels === 1) {
    const single = facts.channels === 1;
    if (context.monoDeclared) return pass("The recording is mono, as declared.", measured, limit);
    return {
      verdict: single ? "return" : "warn",
      what: single ? "The file is mono and not declared so." : "Left and right are the same signal.",
      measured: single ? measured : "left = right",
      limit,
      remedy: "If the recording is mono on purpose, declare it; else export the stereo mix.",
    };
  }
  return {
    verdict: context.hasStereoCompanion ? "warn" : "return",
    what: `The file has ${measured}.`,
    measured,
    limit,
    remedy: context.hasStereoCompanion
      ? "Nothing to do: the stereo version is what is licensed by default."
      : "Deliver a stereo version beside it.",
  };
};

const deadChannel: Rule = (facts, measures) => {
  if (facts.channels !== 2) return null;
  const limit = "sound in both channels";
  if (measures.deadChannel === null) return pass("Both channels carry sound.", "both", limit);
  const side = measures.deadChannel === 0 ? "left" : "right";
  return {
    verdict: "return",
    what: `The ${side} channel is silent.`,
    measured: `${side} ${withUnit(20 * Math.log10(measures.rms[measures.deadChannel]! + 1e-9), 0, "dBFS")} RMS`,
    limit,
    atS: 0,
    remedy: `Check the routing of the ${side} channel and export again.`,
  };
};

const monoSum: Rule = (facts, measures) => {
  if (facts.channels !== 2 || measures.monoLossDb === null || measures.deadChannel !== null) return null;
  const limit = "less than 3 dB lost in mono; over 6 dB is returned";
  const inverted = (measures.correlation ?? 0) < -0.9;
  const loss = measures.monoLossDb;
  const measured = `${withUnit(loss, 1, "dB")} lost, correlation ${withUnit(measures.correlation ?? 0, 2, "").trim()}`;
  // Two unrelated channels lose 3.01 dB by arithmetic alone: the limit is read to a tenth.
  if (loss < 3.05 && !inverted) return pass("The mix holds in mono.", measured, limit);
  const bad = loss > 6 || inverted;
  return {
    verdict: bad ? "return" : "warn",
    what: inverted
      ? "One channel is inverted: in mono the music disappears."
      : `The mix loses ${withUnit(loss, 1, "dB")} in mono.`,
    measured,
    limit,
    remedy: inverted
      ? "Flip the polarity of one channel and export again."
      : "Narrow the widest layers, or check stereo effects that invert one side.",
  };
};

export const CHANNEL_RULES: readonly NamedRule[] = [
  ["T05", "channels", channelCount],
  ["T05", "dead channel", deadChannel],
  ["T05", "mono sum", monoSum],
];
