/** JSON that keeps bigint and Date, for results stored with an operation. */
export function encode(value: unknown): string {
  return JSON.stringify(value, function (key, current) {
    const original: unknown = (this as Record<string, unknown>)[key];
    if (original instanceof Date) return { $date: original.toISOString() };
    if (typeof current === "bigint") return { $bigint: current.toString() };
    return current;
  });
}

export function decode(text: string): unknown {
  return JSON.parse(text, (_key, value) => {
    if (value && typeof value === "object") {
      if (typeof value.$date === "string") return new Date(value.$date);
      if (typeof value.$bigint === "string") return BigInt(value.$bigint);
    }
    return value;
  });
}
