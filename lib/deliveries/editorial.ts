import { eq } from "drizzle-orm";
import { z } from "zod";
import { deliveries } from "@/db/schema/deliveries";
import { enqueue } from "@/lib/jobs";
import type { Actor } from "@/lib/kernel/actor";
import { Forbidden, Invalid, Precondition } from "@/lib/kernel/errors";
import { command } from "@/lib/kernel/verb";
import { lockOwnDelivery, writeDeliveryEvent } from "./own-delivery";
import { EDITORIAL_CODES, type EditorialCode } from "./states";

const codes = Object.keys(EDITORIAL_CODES) as [EditorialCode, ...EditorialCode[]];

function mayJudge(actor: Actor): void {
  if (actor.kind === "staff" && !actor.granted.includes("editorial"))
    throw new Forbidden("Editorial acceptance has not been granted to you; ask the library's owner.");
}

/** The library takes a family into its catalogue. It lists when its head is clear and every writer has accepted. */
export const acceptEditorial = command({
  name: "deliveries.acceptEditorial",
  who: ["owner", "staff"],
  input: z.object({ deliveryId: z.string() }),
  authorise: async ({ tx, actor, input }) => {
    const delivery = await lockOwnDelivery(tx, actor, input.deliveryId);
    mayJudge(actor);
    return delivery;
  },
  run: async ({ tx, actor, subject, now }) => {
    if (subject.state !== "delivered")
      throw new Precondition("Only a delivery that has been signed and is not yet listed can be accepted.");
    if (subject.editorialAcceptedAt) throw new Precondition("This delivery has been accepted already.");
    await tx
      .update(deliveries)
      .set({ editorialAcceptedAt: now, editorialAcceptedBy: actor.personId })
      .where(eq(deliveries.id, subject.id));
    await writeDeliveryEvent(tx, {
      deliveryId: subject.id,
      words: "Accepted by the library.",
      personId: actor.personId,
      now,
    });
    await enqueue(tx, "delivery.tryListing", { deliveryId: subject.id }, { priority: 20 });
    return null;
  },
  audit: ({ subject }) => ({ subject: subject.id, libraryId: subject.libraryId }),
});

/** The library returns a family for its own reasons: codes, and two concrete notes where it is about quality. */
export const returnEditorial = command({
  name: "deliveries.returnEditorial",
  who: ["owner", "staff"],
  input: z.object({
    deliveryId: z.string(),
    codes: z.array(z.enum(codes)).min(1, "At least one reason."),
    notes: z.array(z.string().trim().min(10, "A note somebody can act on.").max(500)).min(1).max(10),
  }),
  authorise: async ({ tx, actor, input }) => {
    const delivery = await lockOwnDelivery(tx, actor, input.deliveryId);
    mayJudge(actor);
    return delivery;
  },
  run: async ({ tx, actor, input, subject, now }) => {
    if (subject.state !== "delivered")
      throw new Precondition("Only a delivery that has been signed and is not yet listed can be returned.");
    if (input.codes.includes("Q01") && input.notes.length < 2)
      throw new Invalid("A return for quality names two concrete things.", { notes: "two notes are needed" });
    await tx.update(deliveries).set({ state: "returned" }).where(eq(deliveries.id, subject.id));
    await writeDeliveryEvent(tx, {
      deliveryId: subject.id,
      fromState: subject.state,
      toState: "returned",
      words: input.notes.join(" "),
      personId: actor.personId,
      codes: input.codes,
      now,
    });
    return null;
  },
  audit: ({ subject, input }) => ({
    subject: subject.id,
    libraryId: subject.libraryId,
    detail: { codes: input.codes },
  }),
});
