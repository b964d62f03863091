import { and, asc, desc, eq, inArray, isNull, or } from "drizzle-orm";
import { z } from "zod";
import type { Reader } from "@/db/client";
import {
  declarations,
  deliveries,
  deliveryEvents,
  deliveryVersions,
  deliveryWriters,
} from "@/db/schema/deliveries";
import { confirmedNamesOf, peopleByIds } from "@/lib/accounts";
import { familyById, libraryById } from "@/lib/catalogue";
import { jobsFor } from "@/lib/jobs";
import { SIGNED_IN } from "@/lib/kernel/actor";
import { NotFound } from "@/lib/kernel/errors";
import { open, query } from "@/lib/kernel/verb";
import { certificateOf, hitsOf } from "@/lib/screening";
import { DELIVERERS, type DeliveryRow, maySee } from "./own-delivery";
import { papersOfDelivery } from "./papers";
import { type Standing, standingOf } from "./standing";

export interface DeliverySummary {
  id: string;
  title: string;
  libraryName: string;
  delivererName: string;
  state: string;
  standing: Standing | null;
  words: string;
  versions: number;
  deliveredAt: Date | null;
  updatedAt: Date;
}

/** Deliveries that this person may see in the role in use: a composer's own, or all of the library's that are signed. */
export const listDeliveries = query({
  name: "deliveries.listDeliveries",
  who: DELIVERERS,
  input: z.object({}),
  authorise: open("the list holds only what the actor may see"),
  run: async ({ reader, actor }): Promise<DeliverySummary[]> => {
    const mine = eq(deliveries.delivererId, actor.personId);
    const signed = inArray(deliveries.state, ["delivered", "listed", "returned", "refused", "withdrawn"]);
    const scope = actor.kind === "composer" ? mine : or(mine, signed);
    const rows = await reader
      .select()
      .from(deliveries)
      .where(and(eq(deliveries.libraryId, actor.libraryId), scope))
      .orderBy(desc(deliveries.updatedAt))
      .limit(300);
    const people = await peopleByIds(
      reader,
      rows.map((row) => row.delivererId),
    );
    const library = await libraryById(reader, actor.libraryId);
    const versions = await versionsOf(
      reader,
      rows.map((row) => row.id),
    );
    const unsettled = await unsettledWriters(
      reader,
      rows.map((row) => row.id),
    );
    return rows.map((row) => {
      const own = versions.filter((version) => version.deliveryId === row.id);
      const { standing, words } = standingOf(
        row,
        own,
        unsettled.filter((writer) => writer.deliveryId === row.id),
      );
      return {
        id: row.id,
        title: row.title || "Untitled draft",
        libraryName: library?.name ?? "",
        delivererName: people.get(row.delivererId)?.name ?? "",
        state: row.state,
        standing,
        words,
        versions: own.length,
        deliveredAt: row.deliveredAt,
        updatedAt: row.updatedAt,
      };
    });
  },
});

async function unsettledWriters(reader: Reader, deliveryIds: readonly string[]) {
  if (deliveryIds.length === 0) return [];
  return reader
    .select({
      deliveryId: deliveryWriters.deliveryId,
      state: deliveryWriters.state,
      name: deliveryWriters.name,
    })
    .from(deliveryWriters)
    .where(
      and(
        inArray(deliveryWriters.deliveryId, [...deliveryIds]),
        inArray(deliveryWriters.state, ["declined", "lapsed"]),
      ),
    );
}

async function versionsOf(reader: Reader, deliveryIds: readonly string[]) {
  if (deliveryIds.length === 0) return [];
  return reader
    .select({
      deliveryId: deliveryVersions.deliveryId,
      state: deliveryVersions.state,
      versionRole: deliveryVersions.versionRole,
      stateWords: deliveryVersions.stateWords,
    })
    .from(deliveryVersions)
    .where(and(inArray(deliveryVersions.deliveryId, [...deliveryIds]), isNull(deliveryVersions.replacedBy)))
    .orderBy(asc(deliveryVersions.position));
}

/** A delivery as its deliverer, its library or one of its writers sees it. */
export const getDelivery = query({
  name: "deliveries.getDelivery",
  who: SIGNED_IN,
  input: z.object({ deliveryId: z.string() }),
  authorise: async ({ reader, actor, input }) => {
    const [delivery] = await reader.select().from(deliveries).where(eq(deliveries.id, input.deliveryId));
    if (!delivery) throw new NotFound();
    const writers = await reader
      .select()
      .from(deliveryWriters)
      .where(eq(deliveryWriters.deliveryId, delivery.id))
      .orderBy(asc(deliveryWriters.position));
    const isWriter = writers.some((writer) => writer.personId === actor.personId);
    if (!maySee(actor, delivery) && !isWriter) throw new NotFound();
    return { delivery, writers };
  },
  run: async ({ reader, actor, subject: { delivery, writers } }) => {
    const versions = await reader
      .select()
      .from(deliveryVersions)
      .where(and(eq(deliveryVersions.deliveryId, delivery.id), isNull(deliveryVersions.replacedBy)))
      .orderBy(asc(deliveryVersions.position));
    const confirmed = await confirmedNamesOf(
      reader,
      delivery.libraryId,
      writers.flatMap((writer) => (writer.personId ? [writer.personId] : [])),
    );
    const signed = await reader
      .select({
        version: declarations.version,
        textVersion: declarations.textVersion,
        sha256: declarations.sha256,
        signedName: declarations.signedName,
        signedAt: declarations.signedAt,
        answers: declarations.answers,
      })
      .from(declarations)
      .where(eq(declarations.deliveryId, delivery.id))
      .orderBy(asc(declarations.version));
    const events = await reader
      .select()
      .from(deliveryEvents)
      .where(eq(deliveryEvents.deliveryId, delivery.id))
      .orderBy(asc(deliveryEvents.happenedAt), asc(deliveryEvents.id));
    const library = await libraryById(reader, delivery.libraryId);
    const family = delivery.familyId ? await familyById(reader, delivery.familyId) : null;
    return {
      id: delivery.id,
      title: delivery.title || "Untitled draft",
      state: delivery.state,
      ...standingOf(delivery, versions, writers),
      draft: delivery.draft,
      isDeliverer: delivery.delivererId === actor.personId,
      /** Who may play the files themselves: the deliverer and the library. */
      mayHear: maySee(actor, delivery),
      /** Papers are for who handed them in and for the library, not for every writer. */
      papers: maySee(actor, delivery) ? await papersOfDelivery(reader, delivery.id) : [],
      mayJudge:
        (actor.kind === "owner" || (actor.kind === "staff" && actor.granted.includes("editorial"))) &&
        actor.libraryId === delivery.libraryId,
      libraryId: delivery.libraryId,
      libraryName: library?.name ?? "",
      catalogueNumber: family?.catalogueNumber ?? null,
      familyState: family?.state ?? null,
      deliveredAt: delivery.deliveredAt,
      writersAcceptedAt: delivery.writersAcceptedAt,
      editorialAcceptedAt: delivery.editorialAcceptedAt,
      writers: writers.map((writer) => ({
        id: writer.id,
        name: writer.name,
        ipi: writer.ipi,
        role: writer.role,
        shareBps: writer.shareBps,
        state: writer.state,
        askedAt: writer.askedAt,
        answeredAt: writer.answeredAt,
        answerUntil: writer.answerUntil,
        isYou: writer.personId === actor.personId,
        confirmed: writer.personId !== null && confirmed.has(writer.personId),
      })),
      declarations: signed,
      events: events.map((event) => ({
        at: event.happenedAt,
        words: event.words,
        codes: event.codes,
        versionId: event.versionId,
      })),
      versions: await Promise.all(
        versions
          .toSorted((a, b) => Number(b.versionRole === "full") - Number(a.versionRole === "full"))
          .map((version) => versionView(reader, delivery, version)),
      ),
    };
  },
});

export type DeliveryView = Awaited<ReturnType<typeof getDelivery>>;
export type VersionView = DeliveryView["versions"][number];

async function versionView(
  reader: Reader,
  delivery: DeliveryRow,
  version: typeof deliveryVersions.$inferSelect,
) {
  const recordingId = version.recordingId;
  const waiting =
    recordingId && version.state === "screening"
      ? await jobsFor(reader, ["screening.screen"], "recordingId", recordingId)
      : version.state === "arrived"
        ? await jobsFor(reader, ["delivery.measure"], "versionId", version.id)
        : [];
  const found = recordingId ? await hitsOf(reader, [recordingId]) : [];
  const certificate = recordingId ? await certificateOf(reader, recordingId) : null;
  return {
    id: version.id,
    recordingId,
    position: version.position,
    fileName: version.fileName,
    sizeBytes: version.sizeBytes,
    sha256: version.sha256,
    versionRole: version.versionRole,
    isrc: version.isrc,
    state: version.state,
    words: version.stateWords,
    progress: waiting[0]?.progress ?? null,
    facts: version.facts,
    measures: version.measures,
    checks: version.checks,
    contour: version.contour ? version.contour.toString("base64") : null,
    certificate: certificate
      ? { issuedAt: certificate.issuedAt, sha256: certificate.sha256, body: certificate.body }
      : null,
    /** What the deliverer may know of a match: where in their own recording, and how it is explained. */
    matches: found
      .filter((hit) => hit.band === "hold")
      .map((hit) => ({
        relation: hit.relation,
        explainedBy: hit.explainedBy,
        explanation: hit.explanation,
        sameLibrary: hit.referenceLibraryId === delivery.libraryId,
        passages: hit.passages.map((passage) => ({ startS: passage.startS, endS: passage.endS })),
      })),
  };
}

/** Shares that wait for this person's answer, in any library. */
export const listSplitRequests = query({
  name: "deliveries.listSplitRequests",
  who: SIGNED_IN,
  input: z.object({}),
  authorise: open("only rows that name the actor are read"),
  run: async ({ reader, actor }) => {
    const rows = await reader
      .select({
        deliveryId: deliveryWriters.deliveryId,
        title: deliveries.title,
        shareBps: deliveryWriters.shareBps,
        state: deliveryWriters.state,
        answerUntil: deliveryWriters.answerUntil,
        delivererId: deliveries.delivererId,
        libraryId: deliveries.libraryId,
      })
      .from(deliveryWriters)
      .innerJoin(deliveries, eq(deliveries.id, deliveryWriters.deliveryId))
      .where(and(eq(deliveryWriters.personId, actor.personId), eq(deliveryWriters.state, "asked")));
    const people = await peopleByIds(
      reader,
      rows.map((row) => row.delivererId),
    );
    return rows.map((row) => ({
      deliveryId: row.deliveryId,
      title: row.title,
      shareBps: row.shareBps,
      answerUntil: row.answerUntil,
      delivererName: people.get(row.delivererId)?.name ?? "",
    }));
  },
});
