import { type NamedRule, pass, places, type Row, type Rule, withUnit } from "./check-row";
import { EXACT_CUTDOWN_S, STING_S_MAX } from "./states";

const CUTDOWN_TOLERANCE_S = 0.05;
const LAST_HIT_MARGIN_S = 0.5;
/** The first sample this far from zero means that the file begins inside a sound (−20 dBFS). */
const CUT_START = 0.1;
/** The last 20 ms this loud mean that the file ends inside a sound: −40 dBFS warns, −26 dBFS returns. */
const CUT_END_WARN_DB = -40;
const CUT_END_RETURN_DB = -26;

const head: Rule = (_facts, measures) => {
  const limit = "sound begins within 0.25 s; over 1.0 s is returned";
  if (measures.integratedLufs === null && measures.samplePeak === 0) return null;
  const silence = measures.headSilenceS;
  const measured = withUnit(silence, 3, "s");
  if (silence <= 0.25) return pass("The sound begins at once.", measured, limit);
  return {
    verdict: silence > 1 ? "return" : "warn",
    what: `There are ${withUnit(silence, 2, "s")} of silence before the music.`,
    measured,
    limit,
    atS: 0,
    remedy: "Trim the start to just before the first sound, in every version alike.",
  };
};

const startCut: Rule = (_facts, measures, context) => {
  if (measures.firstSamplePeak <= CUT_START || isLoop(context.versionRole, context.endingDeclared))
    return null;
  return {
    verdict: "return",
    what: "The file begins inside a sound: its first attack is cut off.",
    measured: `first sample at ${withUnit(20 * Math.log10(measures.firstSamplePeak), 1, "dBFS")}`,
    limit: "the first sample is at or under −20 dBFS",
    atS: 0,
    remedy: "Move the start a few milliseconds earlier, so that the attack is whole.",
  };
};

const tail: Rule = (_facts, measures) => {
  const limit = "at most 1.0 s of silence after the decay; over 3 s is returned";
  const silence = measures.tailSilenceS;
  const measured = withUnit(silence, 2, "s");
  if (silence <= 1) return pass("The end is trimmed.", measured, limit);
  return {
    verdict: silence > 3 ? "return" : "warn",
    what: `There are ${withUnit(silence, 2, "s")} of silence after the music.`,
    measured,
    limit,
    atS: measures.durationS - silence,
    remedy: "Trim the end to about half a second after the decay.",
  };
};

const endCut: Rule = (_facts, measures, context) => {
  const { endingDeclared, versionRole } = context;
  if (endingDeclared === "cut" || isLoop(versionRole, endingDeclared)) return null;
  const level = 20 * Math.log10(measures.lastRms + 1e-9);
  if (level <= CUT_END_WARN_DB) return null;
  return {
    verdict: level > CUT_END_RETURN_DB ? "return" : "warn",
    what: "The file ends inside a sound: its decay is cut.",
    measured: `${withUnit(level, 1, "dBFS")} RMS in the last 20 ms`,
    limit: "under −40 dBFS at the end, or the ending declared as cut or loop-safe",
    atS: Math.max(0, measures.durationS - 0.02),
    remedy: "Export with the whole decay, or declare the ending as it is.",
  };
};

const length: Rule = (_facts, measures, context) => {
  const nominalS = EXACT_CUTDOWN_S.find((s) => String(s) === context.versionRole);
  const measured = withUnit(measures.durationS, 2, "s");
  if (nominalS !== undefined) {
    const limit = `${withUnit(nominalS - CUTDOWN_TOLERANCE_S, 2, "s")} to ${withUnit(nominalS + CUTDOWN_TOLERANCE_S, 2, "s")}`;
    // Half a sample of slack: 29.95 s is no exact number of samples at 44.1 kHz.
    const slack = 0.5 / measures.sampleRateHz;
    if (Math.abs(measures.durationS - nominalS) <= CUTDOWN_TOLERANCE_S + slack) {
      return pass("The cutdown has its exact length.", measured, limit);
    }
    const off = Math.abs(measures.durationS - nominalS);
    return {
      verdict: "return",
      what: `The ${nominalS}-second edit is ${measured} long.`,
      measured,
      limit,
      atS: Math.min(measures.durationS, nominalS),
      remedy: `${measures.durationS > nominalS ? "Shorten" : "Lengthen"} the file by ${withUnit(off, 2, "s")} to ${withUnit(nominalS, 2, "s")}.`,
    };
  }
  if (context.versionRole !== "sting") return null;
  const limit = `at most ${withUnit(STING_S_MAX, 0, "s")}, decay included`;
  if (measures.durationS <= STING_S_MAX) return pass("The sting is short enough.", measured, limit);
  return {
    verdict: "return",
    what: `The sting is ${measured} long.`,
    measured,
    limit,
    atS: STING_S_MAX,
    remedy: `Shorten it to ${withUnit(STING_S_MAX, 0, "s")}, decay included, or deliver it as a bumper.`,
  };
};

const lastHit: Rule = (_facts, measures, context) => {
  const nominalS = EXACT_CUTDOWN_S.find((s) => String(s) === context.versionRole);
  if (nominalS === undefined || measures.lastHitS === null) return null;
  const latestS = nominalS - LAST_HIT_MARGIN_S;
  const measured = withUnit(measures.lastHitS, 2, "s");
  const limit = `the last hit lies before ${withUnit(latestS, 2, "s")}`;
  if (measures.lastHitS < latestS) return pass("The last hit leaves room to ring.", measured, limit);
  return {
    verdict: "return",
    what: `The last hit is at ${measured}, too near the end to ring out.`,
    measured,
    limit,
    atS: measures.lastHitS,
    remedy: `Move the last hit before ${withUnit(latestS, 2, "s")}.`,
  };
};

const fadedButton: Rule = (_facts, measures, context) => {
  if (context.endingDeclared !== "button") return null;
  const limit = "a button ending stops on a hit";
  if (!measures.fades) return pass("The ending does not fade.", "no fade found", limit);
  return {
    verdict: "return",
    what: "The ending is declared as a button, but the music fades out.",
    measured: "a steady fall of level while the music goes on",
    limit,
    atS: measures.durationS,
    remedy: "Deliver the button ending, or declare a fade.",
  };
};

/** Digital silence over half the file means the wrong file; shorter gaps are listed for a person to hear. */
const interior: Rule = (_facts, measures) => {
  const limit = "no digital silence of 20 ms or more inside the music";
  const first = measures.gaps[0];
  if (!first) return pass("There are no gaps.", "0 gaps", limit);
  const longestS = Math.max(...measures.gaps.map((gap) => gap.endS - gap.startS));
  const lone = measures.gaps.find((gap) => gap.channel !== null);
  const row: Omit<Row, "verdict" | "what" | "remedy"> = {
    measured: `${measures.gapCount} ${measures.gapCount === 1 ? "gap" : "gaps"}, longest ${
      longestS < 1 ? withUnit(longestS * 1000, 0, "ms") : withUnit(longestS, 2, "s")
    }`,
    limit,
    atS: lone?.startS ?? first.startS,
    placesS: measures.gaps.map((gap) => gap.startS),
  };
  if (lone) {
    return {
      ...row,
      verdict: "return",
      what: `The ${lone.channel === 0 ? "left" : "right"} channel drops out while the other plays.`,
      remedy: "Export again, in real time if a plug-in missed samples, and listen at the times given.",
    };
  }
  const abrupt = measures.gaps.filter((gap) => gap.abrupt).length;
  return {
    ...row,
    verdict: "warn",
    what:
      abrupt > 0
        ? `The sound is cut to digital silence and back in ${places(abrupt)}.`
        : `There is digital silence inside the music in ${places(measures.gapCount)}.`,
    remedy: "If the stops are played, keep them; if not, export again and listen at the times given.",
  };
};

const mostlySilent: Rule = (_facts, measures) => {
  const silentS = measures.digitalSilenceS + measures.headSilenceS + measures.tailSilenceS;
  if (measures.durationS === 0 || silentS <= measures.durationS / 2) return null;
  return {
    verdict: "return",
    what: "More than half of the file is silent.",
    measured: `${withUnit(silentS, 1, "s")} of ${withUnit(measures.durationS, 1, "s")}`,
    limit: "sound in more than half of the file",
    atS: measures.gaps[0]?.startS ?? 0,
    remedy: "Check that this is the file you meant.",
  };
};

const clicks: Rule = (_facts, measures) => {
  const limit = "no single-sample clicks";
  const first = measures.clicks[0];
  if (!first) return pass("There are no clicks.", "0 clicks", limit);
  return {
    verdict: "return",
    what: `There are clicks of a single sample in ${places(measures.clickCount)}.`,
    measured: `${measures.clickCount} ${measures.clickCount === 1 ? "click" : "clicks"}`,
    limit,
    atS: first.atS,
    placesS: measures.clicks.map((click) => click.atS),
    remedy: "Check clock and buffer size, or the edit at the times given, and export again.",
  };
};

function isLoop(role: string, ending: string | null): boolean {
  return role === "loop" || ending === "loop-safe";
}

export const TIME_RULES: readonly NamedRule[] = [
  ["T03", "head", head],
  ["T03", "start", startCut],
  ["T03", "tail", tail],
  ["T03", "end", endCut],
  ["T03", "length", length],
  ["T03", "last hit", lastHit],
  ["T03", "button", fadedButton],
  ["T03", "silence", mostlySilent],
  ["T04", "interior", interior],
  ["T04", "clicks", clicks],
];
