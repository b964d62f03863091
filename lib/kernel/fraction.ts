/** An exact rational number in lowest terms; the denominator is positive. */
export interface Fraction {
  readonly numerator: bigint;
  readonly denominator: bigint;
}

function greatestCommonDivisor(a: bigint, b: bigint): bigint {
  let [x, y] = [a < 0n ? -a : a, b < 0n ? -b : b];
  while (y > 0n) [x, y] = [y, x % y];
  return x;
}

export function fraction(numerator: bigint, denominator = 1n): Fraction {
  if (denominator === 0n) throw new RangeError("a fraction needs a denominator other than 0");
  const sign = denominator < 0n ? -1n : 1n;
  const divisor = greatestCommonDivisor(numerator, denominator) || 1n;
  return { numerator: (sign * numerator) / divisor, denominator: (sign * denominator) / divisor };
}

/** Reads "1.60", "-0.5" or "7/3". Throws RangeError for anything else. */
export function parseFraction(text: string): Fraction {
  const match = /^(-?)(\d{1,18})(?:\.(\d{1,18})|\/(\d{1,18}))?$/.exec(text);
  if (!match) throw new RangeError(`not a fraction: ${JSON.stringify(text)}`);
  const [, minus, whole = "0", decimals, below] = match;
  const sign = minus ? -1n : 1n;
  if (below !== undefined) return fraction(sign * BigInt(whole), BigInt(below));
  if (decimals === undefined) return fraction(sign * BigInt(whole));
  return fraction(sign * BigInt(whole + decimals), 10n ** BigInt(decimals.length));
}

export function multiplyFractions(...factors: readonly Fraction[]): Fraction {
  return factors.reduce(
    (product, factor) =>
      fraction(product.numerator * factor.numerator, product.denominator * factor.denominator),
    fraction(1n),
  );
}

export function addFractions(...terms: readonly Fraction[]): Fraction {
  return terms.reduce(
    (sum, term) =>
      fraction(
        sum.numerator * term.denominator + term.numerator * sum.denominator,
        sum.denominator * term.denominator,
      ),
    fraction(0n),
  );
}

export function isOne(value: Fraction): boolean {
  return value.numerator === value.denominator;
}

/** The shortest exact decimal ("1.6"), or "7/3" where there is none. */
export function formatFraction({ numerator, denominator }: Fraction): string {
  let [rest, places] = [denominator, 0];
  for (const prime of [2n, 5n]) {
    let count = 0;
    for (; rest % prime === 0n; rest /= prime) count++;
    places = Math.max(places, count);
  }
  if (rest !== 1n) return `${numerator}/${denominator}`;
  const sign = numerator < 0n ? "-" : "";
  const scaled = ((numerator < 0n ? -numerator : numerator) * 10n ** BigInt(places)) / denominator;
  const digits = scaled.toString().padStart(places + 1, "0");
  return sign + (places === 0 ? digits : `${digits.slice(0, -places)}.${digits.slice(-places)}`);
}

/** The nearest whole number; halves go away from zero, so that the negative of an amount rounds to the negative. */
export function roundHalfUp({ numerator, denominator }: Fraction): bigint {
  const size = numerator < 0n ? -numerator : numerator;
  const rounded = (2n * size + denominator) / (2n * denominator);
  return numerator < 0n ? -rounded : rounded;
}
