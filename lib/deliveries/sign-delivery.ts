import { createHash } from "node:crypto";
import { and, asc, eq, isNull } from "drizzle-orm";
import { z } from "zod";
import type { Tx } from "@/db/client";
import { declarations, deliveries, deliveryVersions, deliveryWriters } from "@/db/schema/deliveries";
import { peopleByIds } from "@/lib/accounts";
import {
  familyById,
  insertRecording,
  libraryById,
  recordingsOfFamily,
  registerFamily,
  type Share,
  setRecordingState,
  splitsNow,
} from "@/lib/catalogue";
import { env } from "@/lib/kernel/env";
import { assert, Invalid, NotFound, Precondition } from "@/lib/kernel/errors";
import { newId } from "@/lib/kernel/ids";
import { command } from "@/lib/kernel/verb";
import { enqueueMail } from "@/lib/mail";
import { askForScreening, declaredLoopsOf, recordingOf, type VersionRow } from "./admit-versions";
import {
  DELIVERERS,
  type DeliveryRow,
  lockOwnDelivery,
  requireDraft,
  writeDeliveryEvent,
} from "./own-delivery";
import { type ResolvedWriter, resolveWriters } from "./resolve-writers";
import { Declaration, DeliveryForm } from "./schemas";
import { ANSWER_DAYS, DECLARATION_TEXT_VERSION } from "./states";

const DAY_MS = 86_400_000;

/**
 * The deliverer signs: the form is checked whole, the family enters the catalogue as pending, every version that decodes
 * is screened, and the other writers are asked.
 */
export const signDelivery = command({
  name: "deliveries.signDelivery",
  who: DELIVERERS,
  input: z.object({ deliveryId: z.string(), declaration: Declaration }),
  authorise: async ({ tx, actor, input }) => {
    const delivery = await lockOwnDelivery(tx, actor, input.deliveryId);
    requireDraft(actor, delivery);
    return delivery;
  },
  run: async ({ tx, actor, input, subject: delivery, now }) => {
    const form = parseForm(delivery.draft, input.declaration.deal);
    const versions = await readyVersions(tx, delivery.id, form.linkedFamilyId !== null);
    const writers = await resolveWriters(tx, delivery, form, now);
    const { familyId, recordingIds } = form.linkedFamilyId
      ? await joinFamily(tx, {
          delivery,
          actorPersonId: actor.personId,
          familyId: form.linkedFamilyId,
          versions,
          ending: form.ending,
          now,
        })
      : await registerFamily(tx, {
          libraryId: delivery.libraryId,
          description: form,
          shares: sharesOf(form, writers),
          recordings: versions.map((version) => recordingOf(version, form.ending)),
          personId: actor.personId,
          demo: env.SEDGEWREN_MODE === "demo",
          now,
        });
    const signed = await writeDeclaration(tx, {
      deliveryId: delivery.id,
      personId: actor.personId,
      declaration: input.declaration,
      now,
    });
    const accepted = writers
      .filter((writer) => writer.state === "accepted")
      .flatMap((writer) => (writer.personId ? [writer.personId] : []));
    for (const [index, version] of versions.entries()) {
      const recordingId = recordingIds[index];
      assert(recordingId, "as many recordings as versions");
      await askForScreening(tx, {
        delivery,
        familyId,
        version,
        recordingId,
        writerIds: accepted,
        declaredLoops: declaredLoopsOf(input.declaration),
        hasHead: form.linkedFamilyId !== null || versions.some((other) => other.versionRole === "full"),
        now,
      });
      if (version.state === "returned")
        await setRecordingState(tx, recordingId, "returned", { words: version.stateWords, now });
    }
    const everyoneAccepted = writers.every((writer) => writer.state === "accepted");
    await tx
      .update(deliveries)
      .set({
        familyId,
        title: form.title,
        state: "delivered",
        deliveredAt: now,
        updatedAt: now,
        writersAcceptedAt: everyoneAccepted ? now : null,
      })
      .where(eq(deliveries.id, delivery.id));
    await writeDeliveryEvent(tx, {
      deliveryId: delivery.id,
      fromState: "draft",
      toState: "delivered",
      words: `Delivered and signed by ${input.declaration.signedName}.`,
      personId: actor.personId,
      now,
    });
    await sendReceipt(tx, { delivery, title: form.title, versions, personId: actor.personId, now });
    await askWriters(tx, {
      delivery,
      title: form.title,
      writers,
      delivererName: input.declaration.signedName,
      now,
    });
    return { familyId, declarationSha256: signed.sha256, versions: versions.length };
  },
  audit: ({ subject, result }) => ({
    subject: subject.id,
    libraryId: subject.libraryId,
    detail: { ...result },
  }),
});

function parseForm(draft: Record<string, unknown>, deal: string): DeliveryForm {
  const parsed = DeliveryForm.safeParse({ ...EMPTY_FORM, ...draft, deal });
  if (parsed.success) return parsed.data;
  const fields: Record<string, string> = {};
  for (const issue of parsed.error.issues) fields[issue.path.join(".")] ??= issue.message;
  throw new Invalid(
    `Before it can be signed: ${parsed.error.issues[0]?.message ?? "something is missing"}`,
    fields,
  );
}

const EMPTY_FORM = {
  otherTitles: [],
  iswc: null,
  bpm: null,
  musicalKey: null,
  moreGenres: [],
  uses: [],
  voiceLanguage: null,
  keywords: [],
  sections: [],
  explicitContent: "none",
  yearRecorded: null,
  restrictedTerritories: [],
  refusedUses: [],
  publishers: [],
  linkedFamilyId: null,
};

async function readyVersions(tx: Tx, deliveryId: string, isLinked: boolean): Promise<VersionRow[]> {
  const rows = await tx
    .select()
    .from(deliveryVersions)
    .where(and(eq(deliveryVersions.deliveryId, deliveryId), isNull(deliveryVersions.replacedBy)))
    .orderBy(asc(deliveryVersions.position));
  if (rows.length === 0) throw new Invalid("A delivery needs at least one file.", { files: "no file yet" });
  const waiting = rows.filter((row) => row.state === "arrived" || row.state === "measuring");
  if (waiting.length > 0)
    throw new Precondition(
      `${waiting.length === 1 ? "One file is" : `${waiting.length} files are`} still being measured. This takes moments; then you can sign.`,
    );
  const unreadable = rows.find((row) => row.state === "unreadable");
  if (unreadable)
    throw new Invalid(
      `${unreadable.fileName} cannot be read: replace it or take it out. Everything else is kept.`,
      { files: unreadable.stateWords },
    );
  const repeated = rows.find((row) => row.stateWords.startsWith("You already delivered"));
  if (repeated) throw new Invalid(repeated.stateWords, { files: repeated.stateWords });
  const heads = rows.filter((row) => row.versionRole === "full");
  if (!isLinked && heads.length !== 1)
    throw new Invalid(
      heads.length === 0
        ? "One version must be the full mix: it is the head of its family."
        : "Only one version can be the full mix.",
      { files: "one full mix" },
    );
  return [...rows].sort(
    (a, b) => Number(b.versionRole === "full") - Number(a.versionRole === "full") || a.position - b.position,
  );
}

function sharesOf(form: DeliveryForm, writers: readonly ResolvedWriter[]): Share[] {
  return [
    ...writers.map(
      (writer): Share => ({
        side: "writer",
        personId: writer.personId,
        name: writer.name,
        ipi: writer.ipi,
        role: writer.role,
        shareBps: writer.share,
        acceptedAt: writer.acceptedAt,
      }),
    ),
    ...form.publishers.map(
      (publisher): Share => ({
        side: "publisher",
        personId: null,
        name: publisher.name,
        ipi: publisher.ipi,
        role: publisher.role,
        shareBps: publisher.share,
        acceptedAt: null,
      }),
    ),
  ];
}

/** Versions added to a family that is held already: only by its accepted writer or its own library. */
async function joinFamily(
  tx: Tx,
  args: {
    delivery: DeliveryRow;
    actorPersonId: string;
    familyId: string;
    versions: VersionRow[];
    ending: string;
    now: Date;
  },
) {
  const family = await familyById(tx, args.familyId);
  const writers = (await splitsNow(tx, [args.familyId])).get(args.familyId) ?? [];
  const mayLink =
    family &&
    family.libraryId === args.delivery.libraryId &&
    (args.delivery.delivererKind !== "composer" ||
      writers.some((writer) => writer.acceptedAt !== null && writer.personId === args.actorPersonId));
  if (!family || !mayLink)
    throw new NotFound("That family is not held in this library, or you are not one of its writers.");
  const present = await recordingsOfFamily(tx, family.id);
  const recordingIds: string[] = [];
  for (const [index, version] of args.versions.entries()) {
    const id = newId("rec");
    recordingIds.push(id);
    await insertRecording(tx, {
      id,
      familyId: family.id,
      libraryId: family.libraryId,
      position: present.length + index,
      recording: recordingOf(version, args.ending),
      now: args.now,
    });
  }
  return { familyId: family.id, recordingIds };
}

async function writeDeclaration(
  tx: Tx,
  args: { deliveryId: string; personId: string; declaration: Declaration; now: Date },
) {
  const answers = args.declaration as unknown as Record<string, unknown>;
  const sha256 = createHash("sha256")
    .update(JSON.stringify({ textVersion: DECLARATION_TEXT_VERSION, answers }))
    .digest("hex");
  await tx.insert(declarations).values({
    id: newId("dec"),
    deliveryId: args.deliveryId,
    version: 1,
    textVersion: DECLARATION_TEXT_VERSION,
    answers,
    sha256,
    signedBy: args.personId,
    signedName: args.declaration.signedName,
    signedAt: args.now,
  });
  return { sha256 };
}

async function sendReceipt(
  tx: Tx,
  args: {
    delivery: DeliveryRow;
    title: string;
    versions: readonly VersionRow[];
    personId: string;
    now: Date;
  },
): Promise<void> {
  const person = (await peopleByIds(tx, [args.personId])).get(args.personId);
  if (!person) return;
  await enqueueMail(tx, {
    toAddress: person.email,
    personId: person.id,
    template: "delivery-receipt",
    subjectId: args.delivery.id,
    props: {
      title: args.title,
      receivedAt: args.now.toISOString(),
      files: args.versions.map((version) => ({
        name: version.fileName,
        sizeBytes: version.sizeBytes,
        sha256: version.sha256,
      })),
      nextNewsBy: new Date(args.now.getTime() + DAY_MS / 3).toISOString(),
      url: `${env.SITE_URL}/deliveries/${args.delivery.id}`,
      zone: person.timeZone,
    },
  });
}

async function askWriters(
  tx: Tx,
  args: {
    delivery: DeliveryRow;
    title: string;
    writers: readonly ResolvedWriter[];
    delivererName: string;
    now: Date;
  },
): Promise<void> {
  const library = await libraryById(tx, args.delivery.libraryId);
  const people = await peopleByIds(
    tx,
    args.writers.flatMap((writer) => (writer.personId ? [writer.personId] : [])),
  );
  const percent = (bps: number) => (bps / 100).toFixed(2);
  for (const [position, writer] of args.writers.entries()) {
    await tx.insert(deliveryWriters).values({
      id: newId("wri"),
      deliveryId: args.delivery.id,
      position,
      personId: writer.personId,
      name: writer.name,
      email: writer.contact,
      ipi: writer.ipi,
      role: writer.role,
      shareBps: writer.share,
      state: writer.state,
      askedAt: args.now,
      answeredAt: writer.acceptedAt,
      answerUntil: writer.state === "asked" ? new Date(args.now.getTime() + ANSWER_DAYS * DAY_MS) : null,
    });
    const person = writer.personId ? people.get(writer.personId) : undefined;
    if (writer.state !== "asked" || !person) continue;
    await enqueueMail(tx, {
      toAddress: person.email,
      personId: person.id,
      template: "split-acceptance-request",
      subjectId: args.delivery.id,
      props: {
        title: args.title,
        delivererName: args.delivererName,
        libraryName: library?.name ?? "the library",
        sharePercent: percent(writer.share),
        shares: args.writers.map((other) => ({ writerName: other.name, percent: percent(other.share) })),
        url: `${env.SITE_URL}/deliveries/${args.delivery.id}`,
      },
    });
  }
}
