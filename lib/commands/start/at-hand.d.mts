export interface ProductAtHand {
  /** To be laid over `process.env` before anything reads it. */
  values: Record<string, string>;
  /** Ends what was started, and nothing that ran before. */
  stop(): Promise<void>;
}

export function productAtHand(): Promise<ProductAtHand>;
