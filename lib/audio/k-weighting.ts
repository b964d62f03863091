/** One second-order section, normalised so that a0 = 1. */
export interface Biquad {
  b0: number;
  b1: number;
  b2: number;
  a1: number;
  a2: number;
}

/**
 * The two K-weighting filters at any sample rate.
 *
 * Source:  ITU-R BS.1770-5 Annex 1, Tables 1 and 2 (48 kHz only). The analogue prototype below reproduces both tables
 *          to 14 digits by the bilinear transform: shelf f0 1681.97 Hz, gain 4.0 dB, Q 0.7072; high pass f0 38.135 Hz,
 *          Q 0.5003 with its numerator left at 1, −2, 1 as the table has it.
 * Output:  [shelf, highPass]
 */
export function kWeighting(sampleRateHz: number): [Biquad, Biquad] {
  const shelfK = Math.tan((Math.PI * 1681.974450955533) / sampleRateHz);
  const shelfQ = 0.7071752369554196;
  const high = 10 ** (3.999843853973347 / 20);
  const band = high ** 0.4996667741545416;
  const shelfA0 = 1 + shelfK / shelfQ + shelfK * shelfK;
  const shelf = {
    b0: (high + (band * shelfK) / shelfQ + shelfK * shelfK) / shelfA0,
    b1: (2 * (shelfK * shelfK - high)) / shelfA0,
    b2: (high - (band * shelfK) / shelfQ + shelfK * shelfK) / shelfA0,
    a1: (2 * (shelfK * shelfK - 1)) / shelfA0,
    a2: (1 - shelfK / shelfQ + shelfK * shelfK) / shelfA0,
  };
  const passK = Math.tan((Math.PI * 38.13547087602444) / sampleRateHz);
  const passQ = 0.5003270373238773;
  const passA0 = 1 + passK / passQ + passK * passK;
  const highPass = {
    b0: 1,
    b1: -2,
    b2: 1,
    a1: (2 * (passK * passK - 1)) / passA0,
    a2: (1 - passK / passQ + passK * passK) / passA0,
  };
  return [shelf, highPass];
}

/** Gain of a section at one frequency, as a power ratio. */
export function biquadPower(section: Biquad, frequencyHz: number, sampleRateHz: number): number {
  const w = (2 * Math.PI * frequencyHz) / sampleRateHz;
  const power = (c0: number, c1: number, c2: number): number =>
    (c0 + c1 * Math.cos(w) + c2 * Math.cos(2 * w)) ** 2 + (c1 * Math.sin(w) + c2 * Math.sin(2 * w)) ** 2;
  return power(section.b0, section.b1, section.b2) / power(1, section.a1, section.a2);
}
