import { type NamedRule, pass, type Rule, withUnit } from "./check-row";

const MASTER_CONTAINERS = ["WAV", "RF64", "BW64", "AIFF", "AIFC"];
const RATES_KEPT_HZ = [44100, 88200, 96000];

const container: Rule = (facts) => {
  const limit = "WAV, Broadcast Wave or AIFF; FLAC is converted";
  const measured = `${facts.container}, ${facts.codec}`;
  if (MASTER_CONTAINERS.includes(facts.container))
    return pass("The file is a master format.", measured, limit);
  if (facts.container === "FLAC") {
    return {
      verdict: "warn",
      what: "The file is FLAC: it loses nothing, and a WAV is made from it.",
      measured,
      limit,
      remedy: "Nothing to do. Your FLAC is kept as delivered.",
    };
  }
  return {
    verdict: "return",
    what: `The file is ${facts.container}, which is no master format.`,
    measured,
    limit,
    remedy:
      "Export a 48 kHz, 24 bit WAV from the session. Converting this file does not bring back what it lost.",
  };
};

const nameAgrees: Rule = (facts) => {
  if (facts.extensionAgrees) return null;
  const name = facts.claimedExtension ? `".${facts.claimedExtension}"` : "no extension";
  return {
    verdict: "warn",
    what: `The file name ends in ${name}, but the bytes are ${facts.container}.`,
    measured: facts.container,
    limit: "name and bytes agree",
    remedy: "Check that this is the file you meant, and rename it.",
  };
};

const sampleRate: Rule = (facts) => {
  const measured = withUnit(facts.sampleRateHz / 1000, facts.sampleRateHz % 1000 === 0 ? 0 : 1, "kHz");
  const limit = "48 kHz; 44.1, 88.2 and 96 kHz are kept as delivered";
  if (facts.sampleRateHz === 48000) return pass("The sample rate is right.", measured, limit);
  if (RATES_KEPT_HZ.includes(facts.sampleRateHz)) {
    return {
      verdict: "warn",
      what: `The sample rate is ${measured}; a 48 kHz conversion is offered beside it.`,
      measured,
      limit,
      remedy: "Nothing to do. If the session ran at 48 kHz, deliver that.",
    };
  }
  return {
    verdict: "return",
    what: `The sample rate is ${measured}.`,
    measured,
    limit,
    remedy: "Export at 48 kHz from the session; do not convert a finished file up.",
  };
};

const bitDepth: Rule = (facts, measures) => {
  if (facts.bitDepth === null) return null;
  const measured = withUnit(facts.bitDepth, 0, facts.float ? "bit float" : "bit");
  const limit = "24 bit; 16 bit and 32 bit float without overs are taken";
  if (facts.float) {
    const over = (measures.samplePeakDbfs ?? -100) > 0;
    return {
      verdict: over ? "return" : "warn",
      what: over ? "Float samples go over full scale." : "The file is 32 bit float without overs.",
      measured: over ? `${measured}, peak ${withUnit(measures.samplePeakDbfs ?? 0, 2, "dBFS")}` : measured,
      limit: over ? "float peaks at or under 0.00 dBFS" : limit,
      ...(over ? { atS: measures.samplePeakAtS } : {}),
      remedy: over ? "Lower the mix so that it peaks at −1.0 dBTP, and export 24 bit." : "Nothing to do.",
    };
  }
  if (facts.bitDepth === 24 || facts.bitDepth === 32) return pass("The bit depth is right.", measured, limit);
  if (facts.bitDepth >= 16) {
    return {
      verdict: "warn",
      what: `The bit depth is ${measured}.`,
      measured,
      limit,
      remedy: "If the session can export 24 bit, deliver that.",
    };
  }
  return {
    verdict: "return",
    what: `The bit depth is only ${measured}.`,
    measured,
    limit,
    remedy: "Export 24 bit from the session.",
  };
};

export const FORMAT_RULES: readonly NamedRule[] = [
  ["T02", "container", container],
  ["T02", "name", nameAgrees],
  ["T02", "sample rate", sampleRate],
  ["T02", "bit depth", bitDepth],
];
