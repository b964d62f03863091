import { z } from "zod";
import { deliveryOfFamily, paperOfDelivery } from "@/lib/deliveries";
import { NotFound } from "@/lib/kernel/errors";
import { query } from "@/lib/kernel/verb";
import { ownCase } from "./own-case";

/** A licence or receipt of the delivery, for the case's moderator once the papers are opened. */
export const readCasePaper = query({
  name: "review.readCasePaper",
  who: ["moderator"],
  input: z.object({ caseId: z.string(), key: z.string().max(120) }),
  authorise: async ({ reader, actor, input }) => {
    const row = await ownCase(reader, actor, input.caseId);
    const delivery = row.papersOpenedAt ? await deliveryOfFamily(reader, row.familyId, row.deliveryId) : null;
    const paper = delivery ? await paperOfDelivery(reader, delivery.id, input.key) : null;
    if (!paper) throw new NotFound();
    return paper;
  },
  run: async ({ subject }) => subject,
});
