import "@/tests/support/database";
import { beforeAll, describe, expect, test } from "vitest";
import { db } from "@/db/client";
import { placeHold, setRecordingState } from "@/lib/catalogue";
import type { ActorOf } from "@/lib/kernel/actor";
import { Invalid, NotFound, Precondition } from "@/lib/kernel/errors";
import {
  addToShortlist,
  createProduction,
  getProduction,
  keepPriceSnapshot,
  listProductions,
  removeFromShortlist,
  setProductionUse,
  setShortlistItem,
} from "@/lib/productions";
import { type FilledCue, fillCues } from "@/tests/support/fill-cues";
import { makeCompany, makePerson } from "@/tests/support/make";

let filled: Map<number, FilledCue>;
beforeAll(async () => {
  filled = await fillCues();
});
const cue = (number: number): FilledCue => {
  const found = filled.get(number);
  if (!found) throw new Error(`no cue ${number}`);
  return found;
};
const recording = (number: number, version = 0): string => cue(number).recordingIds[version] ?? "";

async function buyer(companyId?: string): Promise<ActorOf<"buyer">> {
  const person = await makePerson();
  return {
    kind: "buyer",
    personId: person.id,
    name: person.name,
    companyId: companyId ?? (await makeCompany()),
    mayApprove: false,
  };
}

const begin = async (actor: ActorOf<"buyer">, title = "Tide Tables") =>
  (await createProduction(actor, { title, episode: "episode 4", kind: "TV programme", client: "" }))
    .productionId;

describe("a production", () => {
  test("PRODUCTIONS-1: belongs to the company: a colleague works on it, another company does not see it", async () => {
    const noor = await buyer();
    const tobias = await buyer(noor.companyId);
    const stranger = await buyer();
    const productionId = await begin(noor);
    const { itemId } = await addToShortlist(tobias, { productionId, recordingId: recording(2) });
    const page = await getProduction(noor, { productionId });
    expect(page).toMatchObject({ title: "Tide Tables", episode: "episode 4", client: null });
    expect(page.shortlist[0]).toMatchObject({ addedBy: tobias.name, state: "considering" });
    for (const attempt of [
      () => getProduction(stranger, { productionId }),
      () => addToShortlist(stranger, { productionId, recordingId: recording(2) }),
      () => setProductionUse(stranger, { productionId, use: null }),
      () => setShortlistItem(stranger, { itemId, note: "mine" }),
      () => removeFromShortlist(stranger, { itemId }),
    ])
      await expect(attempt()).rejects.toBeInstanceOf(NotFound);
    expect((await listProductions(stranger, {})).length).toBe(0);
    expect(await listProductions(tobias, {})).toMatchObject([{ id: productionId, cues: 1 }]);
  });

  test("the same click twice begins one production", async () => {
    const noor = await buyer();
    const input = { title: "Twice", kind: "film" };
    const options = { operationId: `${noor.personId}:click` };
    const first = await createProduction(noor, input, options);
    expect(await createProduction(noor, input, options)).toEqual(first);
    expect((await listProductions(noor, {})).length).toBe(1);
  });

  test("PRODUCTIONS-4: a changed use takes off prices that were worked out for another", async () => {
    const noor = await buyer();
    const productionId = await begin(noor);
    const { itemId } = await addToShortlist(noor, { productionId, recordingId: recording(2) });
    await db().transaction((tx) =>
      keepPriceSnapshot(tx, { productionId, itemId, snapshot: { text: "£384.00" } }),
    );
    expect((await getProduction(noor, { productionId })).shortlist[0]?.priceSnapshot).toEqual({
      text: "£384.00",
    });
    await setProductionUse(noor, { productionId, use: { mediaClass: "MC02" } });
    const page = await getProduction(noor, { productionId });
    expect(page.use).toEqual({ mediaClass: "MC02" });
    expect(page.shortlist[0]?.priceSnapshot).toBeNull();
  });
});

describe("a shortlist", () => {
  test("PRODUCTIONS-2: a cue stands on it once, also when it is added twenty times at the same time", async () => {
    const noor = await buyer();
    const productionId = await begin(noor);
    const added = await Promise.all(
      Array.from({ length: 20 }, () => addToShortlist(noor, { productionId, recordingId: recording(4) })),
    );
    expect(new Set(added.map(({ itemId }) => itemId)).size).toBe(1);
    expect(added.filter((answer) => answer.added).length).toBe(1);
    await addToShortlist(noor, { productionId, recordingId: recording(4, 2), note: "for the reveal" });
    const { shortlist } = await getProduction(noor, { productionId });
    expect(shortlist).toMatchObject([{ note: "for the reveal", version: { role: "bed" } }]);
  });

  test("keeps the order in which cues were added, and its places when one is taken off", async () => {
    const noor = await buyer();
    const productionId = await begin(noor);
    const items = [];
    for (const number of [10, 11, 12])
      items.push((await addToShortlist(noor, { productionId, recordingId: recording(number) })).itemId);
    await removeFromShortlist(noor, { itemId: items[1] ?? "" });
    await addToShortlist(noor, { productionId, recordingId: recording(13) });
    const { shortlist } = await getProduction(noor, { productionId });
    expect(shortlist.map((item) => item.cue.title)).toEqual([
      "Small Hours, Big Kitchen",
      "Coal Boat Heading Out",
      "Whistle Past the Mill",
    ]);
  });

  test("a version is of the same cue and on sale, and choosing another takes its price off", async () => {
    const noor = await buyer();
    const productionId = await begin(noor);
    const { itemId } = await addToShortlist(noor, { productionId, recordingId: recording(8) });
    await db().transaction((tx) =>
      keepPriceSnapshot(tx, { productionId, itemId, snapshot: { text: "£50.00" } }),
    );
    await expect(setShortlistItem(noor, { itemId, recordingId: recording(10) })).rejects.toBeInstanceOf(
      Invalid,
    );
    await expect(setShortlistItem(noor, { itemId, recordingId: "rec_none" })).rejects.toBeInstanceOf(
      NotFound,
    );
    await setShortlistItem(noor, { itemId, recordingId: recording(8, 1), state: "picked", note: " bed " });
    const { shortlist } = await getProduction(noor, { productionId });
    expect(shortlist).toMatchObject([
      { state: "picked", note: "bed", version: { role: "bed" }, priceSnapshot: null },
    ]);
  });

  test("PRODUCTIONS-3: a cue that is held stays, says why, and gives neither versions nor a way to add it", async () => {
    const noor = await buyer();
    const productionId = await begin(noor);
    await addToShortlist(noor, { productionId, recordingId: recording(9) });
    await db().transaction((tx) =>
      placeHold(tx, {
        familyId: cue(9).familyId,
        cause: "reported work",
        causeId: "RW-01",
        reason: "Reported by somebody",
        now: new Date("2026-05-11T10:00:00Z"),
      }),
    );
    const page = await getProduction(noor, { productionId });
    expect(page.shortlist).toMatchObject([
      {
        cue: {
          title: "Harbour Lights Going Out",
          availability: { kind: "rights question", since: "2026-05-11T10:00:00.000Z" },
          versions: [],
        },
        version: null,
        contour: null,
      },
    ]);
    expect(JSON.stringify(page)).not.toContain("Reported by somebody");
    const another = await begin(noor, "Another");
    await expect(
      addToShortlist(noor, { productionId: another, recordingId: recording(9) }),
    ).rejects.toBeInstanceOf(Precondition);
  });

  test("PRODUCTIONS-3: a version that went off sale leaves the cue, which asks for another", async () => {
    const noor = await buyer();
    const productionId = await begin(noor);
    await addToShortlist(noor, { productionId, recordingId: recording(37, 1) });
    await db().transaction((tx) =>
      setRecordingState(tx, recording(37, 1), "withdrawn", { words: "Withdrawn.", now: new Date() }),
    );
    const { shortlist } = await getProduction(noor, { productionId });
    expect(shortlist[0]).toMatchObject({ version: null, cue: { availability: { kind: "on sale" } } });
    expect(shortlist[0]?.cue.versions.map((version) => version.role)).toEqual(["full", "60"]);
  });
});
