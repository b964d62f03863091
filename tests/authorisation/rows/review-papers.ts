import { randomInt } from "node:crypto";
import { db } from "@/db/client";
import { storedFiles } from "@/db/schema/infrastructure";
import { cases } from "@/db/schema/review";
import { newId } from "@/lib/kernel/ids";
import { makeHeldDelivery } from "@/tests/support/make-case";
import type { Rows } from "../columns";

export const rows = {
  "review.readCasePaper": {
    input: async ({ libraryId }) => {
      const { deliveryId, familyId } = await makeHeldDelivery({ libraryId });
      const [caseId, key, now] = [newId("cas"), newId("key"), new Date()];
      await db()
        .insert(cases)
        .values({
          id: caseId,
          number: randomInt(1_000_000, 2_000_000_000),
          deliveryId,
          familyId,
          libraryId,
          deliveringLibraryId: libraryId,
          state: "open",
          papersOpenedAt: now,
          dueAt: now,
          openedAt: now,
        });
      await db().insert(storedFiles).values({
        key,
        slug: "paper",
        name: "receipt.pdf",
        mime: "application/pdf",
        sizeBytes: 1,
        ownerKind: "delivery",
        ownerId: deliveryId,
        createdAt: now,
      });
      return { caseId, key };
    },
    may: ["moderator"],
  },
  "review.listOpenQuestions": {
    input: async () => ({}),
    may: ["composer", "otherComposer", "owner", "otherOwner", "staff"],
  },
} satisfies Rows;
