import type { ActorOf } from "@/lib/kernel/actor";
import { addToShortlist, createProduction } from "@/lib/productions";
import { makeFamily, makeRecording } from "@/tests/support/make";
import type { Column, Rows, World } from "../columns";

/** Every seat of the company, and nobody else. */
const OWN: readonly Column[] = ["buyer"];

const buyerOf = (world: World) => world.actors.buyer as ActorOf<"buyer">;

async function production(world: World): Promise<string> {
  const { productionId } = await createProduction(buyerOf(world), { title: "A film", kind: "film" });
  return productionId;
}

async function listedRecording(world: World): Promise<string> {
  const familyId = await makeFamily({ libraryId: world.libraryId, listedAt: new Date() });
  return makeRecording({ familyId, libraryId: world.libraryId });
}

async function item(world: World): Promise<string> {
  const productionId = await production(world);
  const recordingId = await listedRecording(world);
  return (await addToShortlist(buyerOf(world), { productionId, recordingId })).itemId;
}

export const rows = {
  "productions.createProduction": {
    input: async () => ({ title: "A film", kind: "film" }),
    may: ["buyer", "otherBuyer"],
  },
  "productions.listProductions": { input: async () => ({}), may: ["buyer", "otherBuyer"] },
  "productions.getProduction": {
    input: async (world: World) => ({ productionId: await production(world) }),
    may: OWN,
  },
  "productions.setProductionUse": {
    input: async (world: World) => ({ productionId: await production(world), use: { mediaClass: "MC02" } }),
    may: OWN,
  },
  "productions.addToShortlist": {
    input: async (world: World) => ({
      productionId: await production(world),
      recordingId: await listedRecording(world),
    }),
    may: OWN,
  },
  "productions.setShortlistItem": {
    input: async (world: World) => ({ itemId: await item(world), state: "picked" }),
    may: OWN,
  },
  "productions.removeFromShortlist": {
    input: async (world: World) => ({ itemId: await item(world) }),
    may: OWN,
  },
} satisfies Rows;
