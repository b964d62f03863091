import { z } from "zod";

const minorText = z.string().regex(/^-?\d+$/, "whole minor units");

/** What a capture's entry says of the sale beside its legs, in the words the buyer and the seller used. */
export const captureFacts = z.object({
  orderNumber: z.string(),
  buyer: z.string(),
  productionTitle: z.string(),
  libraryName: z.string(),
  chargeId: z.string().nullable(),
  platformFeeBps: z.number().int(),
  composerPoolBps: z.number().int(),
  processorFeeMinor: minorText,
  lines: z.array(
    z.object({
      orderLineId: z.string(),
      cueTitle: z.string(),
      scopeWords: z.string(),
      netMinor: minorText,
      taxMinor: minorText,
    }),
  ),
});
export type CaptureFacts = z.infer<typeof captureFacts>;
