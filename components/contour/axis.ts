/** A version cut from pieces of another recording: [fromS, toS) of the version lies at atS of the axis. */
export interface CutPiece {
  fromS: number;
  toS: number;
  atS: number;
}

/** A place on a shared time axis as a share of the drawing's width: "41.558%". */
export function percent(seconds: number, scaleS: number): string {
  return `${Number(((100 * seconds) / scaleS).toFixed(3))}%`;
}

/** How a label at this share of the width is set, so that it does not leave the drawing. */
export function edgeAnchor(share: number): "start" | "middle" | "end" {
  if (share < 0.03) return "start";
  return share > 0.97 ? "end" : "middle";
}

/** Blocks of a chart's border, and how many of them lie between two labels. */
export function axisSteps(seconds: number): { blockS: number; labelEvery: number } {
  if (seconds <= 6) return { blockS: 0.5, labelEvery: 2 };
  if (seconds <= 20) return { blockS: 1, labelEvery: 5 };
  if (seconds <= 75) return { blockS: 5, labelEvery: 2 };
  if (seconds <= 480) return { blockS: 10, labelEvery: 3 };
  if (seconds <= 1800) return { blockS: 60, labelEvery: 2 };
  return { blockS: 300, labelEvery: 2 };
}

/** Where in a cut version the instant `axisS` is heard; the next piece if it was cut out, else the last. */
export function versionInstant(pieces: readonly CutPiece[] | undefined, axisS: number): number {
  if (!pieces || pieces.length === 0) return axisS;
  for (const piece of pieces) {
    const intoPieceS = axisS - piece.atS;
    if (intoPieceS < 0) return piece.fromS;
    if (intoPieceS < piece.toS - piece.fromS) return piece.fromS + intoPieceS;
  }
  const last = pieces[pieces.length - 1];
  return last ? last.fromS : axisS;
}

/** Where on the axis the instant `versionS` of a cut version lies. */
export function axisInstant(pieces: readonly CutPiece[] | undefined, versionS: number): number {
  if (!pieces || pieces.length === 0) return versionS;
  const piece = pieces.find((candidate) => versionS >= candidate.fromS && versionS < candidate.toS);
  if (piece) return piece.atS + versionS - piece.fromS;
  const last = pieces[pieces.length - 1];
  return last ? last.atS + last.toS - last.fromS : versionS;
}
