const ALPHANUMERIC = "0123456789ABCDEFGHIJKLMNOPQRSTUVWXYZ";

/**
 * Check character of ISO 7064 MOD 37,36 over digits and capital letters. It catches every single wrong character
 * and every exchange of two neighbours. Throws RangeError for any other character.
 */
export function mod3736(text: string): string {
  let product = 36;
  for (const character of text) {
    const value = ALPHANUMERIC.indexOf(character);
    if (value < 0) throw new RangeError(`MOD 37,36 takes digits and capital letters, got ${character}`);
    product = (((product + value) % 36 || 36) * 2) % 37;
  }
  return ALPHANUMERIC.charAt((37 - product) % 36);
}

export function isMod3736(textWithCheck: string): boolean {
  return (
    /^[0-9A-Z]{2,}$/.test(textWithCheck) && mod3736(textWithCheck.slice(0, -1)) === textWithCheck.slice(-1)
  );
}

/** Check character of ISO 7064 MOD 11-2 over digits: 0 to 9 or X. */
export function mod112(digits: string): string {
  let total = 0;
  for (const digit of digits) {
    if (digit < "0" || digit > "9") throw new RangeError(`MOD 11-2 takes digits, got ${digit}`);
    total = ((total + Number(digit)) * 2) % 11;
  }
  const check = (12 - total) % 11;
  return check === 10 ? "X" : String(check);
}
