import { recordFinding } from "@/lib/review";
import { makeCase, makeHeldDelivery, makeHit, makeModerator, makeReference } from "@/tests/support/make-case";
import type { Column, Rows, World } from "../columns";

const SYSTEM: readonly Column[] = ["system"];
const OWN: readonly Column[] = ["moderator"];
const REASONS =
  "The same performance is heard in both recordings from the first bar on. The papers show no licence for it.";

/** A case of the first library, for its own moderators; its deliverer is that library's composer of the columns. */
async function ownCase(world: World, more: { state?: string; holderId?: string } = {}) {
  const composer = world.actors.composer;
  const delivererId = composer.kind === "composer" ? composer.personId : "";
  return makeCase({
    libraryId: world.libraryId,
    deliveringLibraryId: world.libraryId,
    delivererId,
    ...more,
  });
}

/** The person behind a column, where one stands behind it. */
const heldBy = (world: World, column: Column) => {
  const actor = world.actors[column];
  return "personId" in actor ? { holderId: actor.personId } : {};
};

const caseId = async (world: World) => ({ caseId: (await ownCase(world)).caseId });

export const rows = {
  "review.openCase": {
    input: async ({ libraryId }) => {
      const { deliveryId, familyId, recordingIds } = await makeHeldDelivery({ libraryId });
      await makeHit(recordingIds[0] ?? "", await makeReference({ libraryId, state: "listed" }));
      return { deliveryId, familyId };
    },
    may: SYSTEM,
  },
  "review.listCases": {
    input: async () => ({}),
    may: ["moderator", "otherModerator", "marketplaceModerator"],
  },
  "review.getCase": { input: caseId, may: OWN },
  "review.takeCase": { input: caseId, may: OWN },
  "review.handOver": {
    input: async (world, column) => ({
      caseId: (await ownCase(world, heldBy(world, column))).caseId,
      toPersonId: null,
      words: "Back to the queue.",
    }),
    may: OWN,
  },
  "review.declareConflict": {
    input: async (world) => ({ ...(await caseId(world)), words: "I know the deliverer." }),
    may: OWN,
  },
  "review.openPapers": { input: caseId, may: OWN },
  "review.askComposer": {
    input: async (world) => ({ ...(await caseId(world)), words: "Is the tambourine from a pack of loops?" }),
    may: OWN,
  },
  "review.answerQuestion": {
    input: async (world) => ({
      deliveryId: (await ownCase(world, { state: "waiting on composer" })).deliveryId,
      words: "It is from a pack.",
      fileKey: null,
    }),
    may: ["composer"],
  },
  "review.recordFinding": {
    input: async (world) => {
      const made = await ownCase(world);
      return {
        caseId: made.caseId,
        groupId: made.groupIds[0],
        outcome: "nothing in common",
        reasons: REASONS,
      };
    },
    may: OWN,
  },
  "review.confirmFinding": {
    input: async (world) => {
      const made = await ownCase(world);
      const { findingId } = await recordFinding(await makeModerator(world.libraryId), {
        caseId: made.caseId,
        groupId: made.groupIds[0] ?? "",
        outcome: "cannot be listed",
        codes: ["R01"],
        knowing: false,
        reasons: REASONS,
      });
      return { findingId, confirm: true, words: "I heard both; it is one performance." };
    },
    may: ["moderator", "marketplaceModerator"],
  },
  "review.hearPassage": {
    input: async (world) => ({ passageId: (await ownCase(world)).hits[0]?.passageId }),
    may: OWN,
  },
  "review.hearOwnPassage": {
    input: async (world) => ({ passageId: (await ownCase(world)).hits[0]?.passageId }),
    may: ["composer"],
  },
  "review.getCaseOfDelivery": {
    input: async (world) => ({ deliveryId: (await ownCase(world)).deliveryId }),
    may: ["composer", "owner", "staff"],
  },
  "review.readListeningSubject": {
    input: async (world) => ({ hitId: (await ownCase(world)).hits[0]?.hitId }),
    may: SYSTEM,
  },
  "review.recordListening": {
    input: async (world) => ({ ...(await ownCase(world)).hits[0], fileKey: null, render: null }),
    may: SYSTEM,
  },
} satisfies Rows;
