import { productions } from "@/db/schema/productions";
import { newId } from "@/lib/kernel/ids";
import { command, open } from "@/lib/kernel/verb";
import { CreateProduction } from "./schemas";

export const createProduction = command({
  name: "productions.createProduction",
  who: ["buyer"],
  input: CreateProduction,
  authorise: open("every seat of a company may begin a production of that company"),
  run: async ({ tx, input, actor, now }) => {
    const productionId = newId("pro");
    await tx.insert(productions).values({
      id: productionId,
      companyId: actor.companyId,
      ...input,
      use: null,
      createdBy: actor.personId,
      createdAt: now,
    });
    return { productionId };
  },
  audit: ({ result }) => ({ subject: result.productionId }),
});
