/**
 * Minor units of the circulating currencies of ISO 4217 (list of 25 June 2024). Written out because Intl follows
 * CLDR's habits instead and shows, for example, no decimals for HUF where the standard has two.
 */
const CODES_BY_EXPONENT: ReadonlyArray<readonly [exponent: number, codes: string]> = [
  [0, "BIF CLP DJF GNF ISK JPY KMF KRW PYG RWF UGX UYI VND VUV XAF XOF XPF"],
  [
    2,
    "AED AFN ALL AMD ANG AOA ARS AUD AWG AZN BAM BBD BDT BGN BMD BND BOB BOV BRL BSD BTN BWP BYN BZD CAD CDF " +
      "CHE CHF CHW CNY COP COU CRC CUP CVE CZK DKK DOP DZD EGP ERN ETB EUR FJD FKP GBP GEL GHS GIP GMD GTQ GYD " +
      "HKD HNL HTG HUF IDR ILS INR IRR JMD KES KGS KHR KPW KYD KZT LAK LBP LKR LRD LSL MAD MDL MGA MKD MMK MNT " +
      "MOP MRU MUR MVR MWK MXN MXV MYR MZN NAD NGN NIO NOK NPR NZD PAB PEN PGK PHP PKR PLN QAR RON RSD RUB SAR " +
      "SBD SCR SDG SEK SGD SHP SLE SOS SRD SSP STN SVC SYP SZL THB TJS TMT TOP TRY TTD TWD TZS UAH USD USN UYU " +
      "UZS VED VES WST XCD YER ZAR ZMW ZWL",
  ],
  [3, "BHD IQD JOD KWD LYD OMR TND"],
  [4, "CLF UYW"],
];

const EXPONENTS: ReadonlyMap<string, number> = new Map(
  CODES_BY_EXPONENT.flatMap(([exponent, codes]) => codes.split(" ").map((code) => [code, exponent] as const)),
);

/** Signs used alone where no other currency of the shop could be meant; every other amount carries its code. */
const SIGNS: Readonly<Record<string, string>> = { GBP: "£", EUR: "€", USD: "$", JPY: "¥" };

export const CURRENCY_CODES: readonly string[] = [...EXPONENTS.keys()].sort();

export function isCurrency(code: string): boolean {
  return EXPONENTS.has(code);
}

/** Digits behind the point. Throws RangeError for a code that is not a circulating currency. */
export function minorUnits(currency: string): number {
  const exponent = EXPONENTS.get(currency);
  if (exponent === undefined) throw new RangeError(`not a circulating ISO 4217 currency: ${currency}`);
  return exponent;
}

export function currencySign(currency: string): string | null {
  return SIGNS[currency] ?? null;
}
