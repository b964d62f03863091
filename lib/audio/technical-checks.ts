import { type Check, type CheckContext, type NamedRule, spaced } from "./check-row";
import { CHANNEL_RULES } from "./checks-channels";
import { FORMAT_RULES } from "./checks-format";
import { SIGNAL_RULES } from "./checks-signal";
import { TIME_RULES } from "./checks-time";
import type { ContainerFacts } from "./container-facts";
import type { Measures } from "./meter";

const RULES: readonly NamedRule[] = [...FORMAT_RULES, ...SIGNAL_RULES, ...CHANNEL_RULES, ...TIME_RULES];

/**
 * The technical checks of a delivery, one row for each that applies, in the order of the table in README.md.
 *
 * Source:  common practice of music delivery; the limits stand in the rules.
 * Output:  each row with measured value, limit, place and remedy, in plain sentences with no-break spaces before units
 */
export function technicalChecks(facts: ContainerFacts, measures: Measures, context: CheckContext): Check[] {
  const checks: Check[] = [];
  for (const [code, check, rule] of RULES) {
    const row = rule(facts, measures, context);
    if (!row) continue;
    checks.push({
      ...row,
      code,
      check,
      what: spaced(row.what),
      measured: spaced(row.measured),
      limit: spaced(row.limit),
      ...(row.remedy === undefined ? {} : { remedy: spaced(row.remedy) }),
    });
  }
  return checks;
}
