import { join } from "node:path";
import { db } from "@/db/client";
import { confirmedNames } from "@/db/schema/accounts";
import { type renderVersion, writeWav } from "@/fixtures/audio";
import { fileArrived, saveDraft, setVersion, signDelivery, startDelivery } from "@/lib/deliveries";
import { type ActorOf, system } from "@/lib/kernel/actor";
import { newId } from "@/lib/kernel/ids";
import { storeFile } from "@/lib/uploads";
import { makeMembership, makePerson } from "./make";

export type Sound = ReturnType<typeof renderVersion>;

/** A composer of a library whose name and number the library has confirmed. */
export async function makeComposer(
  libraryId: string,
  ipi: string,
): Promise<ActorOf<"composer"> & { ipi: string }> {
  const { id, name } = await makePerson();
  await makeMembership({ personId: id, role: "composer", libraryId });
  await db()
    .insert(confirmedNames)
    .values({
      id: newId("nam"),
      libraryId,
      personId: id,
      legalName: name,
      creditName: name,
      ipi,
      confirmedBy: "test",
      confirmedAt: new Date(),
    });
  return { kind: "composer", personId: id, name, libraryId, ipi };
}

/** Hands in one recording under a title, through the same verbs as the pages; `drain` runs the worker's jobs. */
export async function deliverOne(
  composer: ActorOf<"composer"> & { ipi: string },
  given: { title: string; sound: Sound; folder: string; drain: () => Promise<unknown> },
): Promise<string> {
  const { title } = given;
  const { ipi, ...actor } = composer;
  const { deliveryId } = await startDelivery(actor, { title });
  const draft = {
    title,
    otherTitles: [],
    bpm: 90,
    musicalKey: "D minor",
    genre: "chamber",
    moods: ["bittersweet"],
    instruments: ["piano"],
    uses: [],
    voice: "none",
    ending: "ring-out",
    shape: "builds",
    density: "sparse",
    description: "A cue that a test hands in, with enough words about it to be taken for a description.",
    writers: [{ name: actor.name, ipi, email: null, role: "C", share: "100.00" }],
    publishers: [],
  };
  await saveDraft(actor, { deliveryId, draft });
  const path = join(given.folder, `${deliveryId}.wav`);
  writeWav(path, given.sound);
  const key = await storeFile(path, { name: `${deliveryId}.wav`, type: "audio/wav" });
  const file = { deliveryId, personId: actor.personId, key, name: "full.wav", sizeBytes: 1 };
  const { versionId } = await fileArrived(system("tests"), file);
  await setVersion(actor, { deliveryId, versionId, versionRole: "full" });
  await given.drain();
  await signDelivery(actor, {
    deliveryId,
    declaration: {
      authorship: true,
      recordingOwner: "the library",
      performers: "all performed by me",
      samples: [],
      preExisting: "none",
      preExistingWords: "",
      deal: "exclusive",
      truth: true,
      signedName: actor.name,
    },
  });
  await given.drain();
  return deliveryId;
}
