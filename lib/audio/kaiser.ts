/**
 * Kaiser window.
 *
 * Source:  J. F. Kaiser, "Nonrecursive digital filter design using the I0-sinh window function", 1974:
 *          β = 0.1102 (A − 8.7) for a stop band of A > 50 dB.
 * Input:   size ≥ 1; stopDb > 50
 * Output:  Float64Array[size], symmetric, 1 in the middle
 */
export function kaiser(size: number, stopDb: number): Float64Array {
  const beta = 0.1102 * (stopDb - 8.7);
  const norm = besselI0(beta);
  const window = new Float64Array(size);
  for (let i = 0; i < size; i++) {
    const x = size === 1 ? 0 : (2 * i) / (size - 1) - 1;
    window[i] = besselI0(beta * Math.sqrt(Math.max(0, 1 - x * x))) / norm;
  }
  return window;
}

/** Modified Bessel function of order 0 by its power series; terms fall below 1e-17 of the sum for x ≤ 20 in 40. */
export function besselI0(x: number): number {
  let sum = 1;
  let term = 1;
  for (let k = 1; k < 60; k++) {
    term *= (x / (2 * k)) ** 2;
    sum += term;
    if (term < sum * 1e-17) break;
  }
  return sum;
}
