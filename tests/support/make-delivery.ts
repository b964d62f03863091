import { createHash, randomBytes } from "node:crypto";
import { db } from "@/db/client";
import { confirmedNames } from "@/db/schema/accounts";
import { fileArrived, recordMeasurement, saveDraft, signDelivery, startDelivery } from "@/lib/deliveries";
import type { Actor, ActorOf } from "@/lib/kernel/actor";
import { system } from "@/lib/kernel/actor";
import { newId } from "@/lib/kernel/ids";
import { makeMembership, makePerson } from "./make";

export interface MadeWriter {
  id: string;
  name: string;
  email: string;
  ipi: string;
}

/** A composer of the library whose name and IPI it has confirmed. */
export async function makeWriter(
  libraryId: string,
  ipi: string,
  known?: { id: string; name: string; email: string },
): Promise<MadeWriter> {
  const person = known ?? (await makePerson());
  await makeMembership({ personId: person.id, role: "composer", libraryId });
  await db()
    .insert(confirmedNames)
    .values({
      id: newId("nam"),
      libraryId,
      personId: person.id,
      legalName: person.name,
      creditName: person.name,
      ipi,
      confirmedBy: "a test",
      confirmedAt: new Date(),
    });
  return { id: person.id, name: person.name, email: person.email, ipi };
}

export const composerOf = (libraryId: string, writer: { id: string; name: string }): ActorOf<"composer"> => ({
  kind: "composer",
  personId: writer.id,
  name: writer.name,
  libraryId,
});

/** Everything that a signature asks for, but for title, writers and files. */
export const WHOLE_DRAFT = {
  otherTitles: [],
  bpm: 72,
  musicalKey: "D minor",
  genre: "chamber",
  moods: ["bittersweet"],
  instruments: ["piano"],
  uses: [],
  voice: "none",
  ending: "ring-out",
  shape: "builds",
  density: "sparse",
  description: "Sparse piano over one bowed cello; it opens late and leaves the piano alone at the close.",
};

export const DECLARATION = {
  authorship: true as const,
  recordingOwner: "the library",
  performers: "all performed by me" as const,
  samples: [],
  preExisting: "none" as const,
  preExistingWords: "",
  deal: "exclusive" as const,
  truth: true as const,
  signedName: "A writer",
};

let counter = 0;
export const freshTitle = () => `Work ${++counter} ${randomBytes(4).toString("hex")}`;

/** A file that has arrived and been measured, without its sound. */
export async function arriveMeasured(args: {
  deliveryId: string;
  personId: string;
  name?: string;
  sha256?: string;
  durationS?: number;
  replaces?: string;
}): Promise<string> {
  const key = `key-${randomBytes(12).toString("hex")}`;
  const { versionId } = await fileArrived(system("tests"), {
    deliveryId: args.deliveryId,
    personId: args.personId,
    key,
    name: args.name ?? "Work_full.wav",
    sizeBytes: 1000,
    replaces: args.replaces ?? null,
  });
  await recordMeasurement(system("tests"), {
    versionId,
    sha256: args.sha256 ?? createHash("sha256").update(key).digest("hex"),
    facts: { container: "WAV", sampleRateHz: 48_000, bitDepth: 24, channels: 2 },
    measures: { durationS: args.durationS ?? 120, integratedLufs: -16, truePeakDbtp: -2 },
    checks: [],
  });
  return versionId;
}

/** A draft with one measured full mix and everything filled in; each writer by name, IPI and share. */
export async function makeDraft(
  actor: Extract<Actor, { kind: "composer" | "owner" | "staff" }>,
  writers: readonly { name: string; ipi?: string; email?: string; share: string }[],
  draft: Record<string, unknown> = {},
): Promise<{ deliveryId: string; versionId: string; title: string }> {
  const title = freshTitle();
  const { deliveryId } = await startDelivery(actor, { title });
  const rows = writers.map((writer) => ({ email: "", ipi: "", role: "C", ...writer }));
  await saveDraft(actor, {
    deliveryId,
    draft: { ...WHOLE_DRAFT, title, writers: rows, publishers: [], ...draft },
  });
  const versionId = await arriveMeasured({ deliveryId, personId: actor.personId });
  return { deliveryId, versionId, title };
}

export const signDraft = (
  actor: Extract<Actor, { kind: "composer" | "owner" | "staff" }>,
  deliveryId: string,
  values: Partial<typeof DECLARATION> = {},
) => signDelivery(actor, { deliveryId, declaration: { ...DECLARATION, ...values } });
