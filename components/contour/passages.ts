/** One aligned stretch: where it lies in the delivery (A) and in the reference (B). */
export interface ChartPassage {
  /** Counted from 1, as written at its ends. */
  number: number;
  aFromS: number;
  aToS: number;
  bFromS: number;
  bToS: number;
}

/** The instant of B that lines up with `aS`; null outside every passage. */
export function referenceInstant(passages: readonly ChartPassage[], aS: number): number | null {
  const passage = passages.find((candidate) => aS >= candidate.aFromS && aS <= candidate.aToS);
  if (!passage) return null;
  const lengthS = passage.aToS - passage.aFromS;
  const into = lengthS > 0 ? (aS - passage.aFromS) / lengthS : 0;
  return passage.bFromS + into * (passage.bToS - passage.bFromS);
}

export interface Span {
  fromS: number;
  toS: number;
}

/** What lies between the drawn stretches of a recording. */
export function undrawnSpans(drawn: readonly Span[], seconds: number): Span[] {
  const inOrder = [...drawn].sort((first, second) => first.fromS - second.fromS);
  const gaps: Span[] = [];
  let atS = 0;
  for (const span of inOrder) {
    if (span.fromS > atS) gaps.push({ fromS: atS, toS: span.fromS });
    atS = Math.max(atS, span.toS);
  }
  if (seconds > atS) gaps.push({ fromS: atS, toS: seconds });
  return gaps;
}
