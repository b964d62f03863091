import { eq } from "drizzle-orm";
import { productions, shortlistItems } from "@/db/schema/productions";
import { command } from "@/lib/kernel/verb";
import { lockOwnProduction } from "./own-production";
import { SetProductionUse } from "./schemas";

/** What the production is licensed for by default. Prices noted for another use no longer hold and are taken off. */
export const setProductionUse = command({
  name: "productions.setProductionUse",
  who: ["buyer"],
  input: SetProductionUse,
  authorise: async ({ tx, actor, input }) => lockOwnProduction(tx, actor, input.productionId),
  run: async ({ tx, input }) => {
    await tx.update(productions).set({ use: input.use }).where(eq(productions.id, input.productionId));
    await tx
      .update(shortlistItems)
      .set({ priceSnapshot: null })
      .where(eq(shortlistItems.productionId, input.productionId));
    return { productionId: input.productionId };
  },
  audit: ({ input }) => ({ subject: input.productionId, detail: { hasUse: input.use !== null } }),
});
