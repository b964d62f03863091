import "@/tests/support/database";
import { and, eq } from "drizzle-orm";
import { describe, expect, test } from "vitest";
import { db } from "@/db/client";
import { people } from "@/db/schema/accounts";
import { holds } from "@/db/schema/catalogue";
import { deliveries, deliveryVersions } from "@/db/schema/deliveries";
import { mailOutbox } from "@/db/schema/infrastructure";
import { auditLog } from "@/db/schema/kernel";
import { cases, disclosures, findings, upheldFindings } from "@/db/schema/review";
import { unpackContour } from "@/lib/audio";
import { type ActorOf, system } from "@/lib/kernel/actor";
import { withBusinessClock } from "@/lib/kernel/clock";
import { Forbidden, Invalid, NotFound, Precondition } from "@/lib/kernel/errors";
import {
  answerQuestion,
  askComposer,
  confirmFinding,
  declareConflict,
  getCase,
  getCaseOfDelivery,
  handOver,
  hearOwnPassage,
  hearPassage,
  listCases,
  openCase,
  openPapers,
  recordFinding,
  takeCase,
} from "@/lib/review";
import { makeLibrary } from "@/tests/support/make";
import {
  freshLibraryWith,
  type MadeCase,
  makeCase,
  makeHeldDelivery,
  makeHit,
  makeModerator,
  makeReference,
} from "@/tests/support/make-case";

const worker = system("tests");
const REASONS =
  "The same performance is heard in both recordings from the first bar on. The papers show no licence for it.";

type Finding = Parameters<typeof recordFinding>[1];
const nothing = (made: MadeCase, index = 0): Finding => ({
  caseId: made.caseId,
  groupId: made.groupIds[index] ?? "",
  outcome: "nothing in common",
  reasons: REASONS,
});
const refusal = (made: MadeCase, index = 0): Finding => ({
  ...nothing(made, index),
  outcome: "cannot be listed",
  codes: ["R01"],
  knowing: false,
});

async function libraryCase(
  options: { references?: number; moderators?: number } = {},
): Promise<{ made: MadeCase; first: ActorOf<"moderator">; second: ActorOf<"moderator">; libraryId: string }> {
  const { libraryId, moderators } = await freshLibraryWith(options.moderators ?? 2);
  const references = [];
  for (let index = 0; index < (options.references ?? 1); index++)
    references.push(await makeReference({ libraryId, state: "listed" }));
  const made = await makeCase({ libraryId, deliveringLibraryId: libraryId, references });
  const [first, second] = moderators;
  if (!first) throw new Error("a library of this test has a moderator");
  return { made, first, second: second ?? first, libraryId };
}

const stateOf = async (caseId: string) =>
  (await db().select({ state: cases.state }).from(cases).where(eq(cases.id, caseId)))[0]?.state;
const versionStates = async (made: { deliveryId: string }) =>
  (
    await db()
      .select({ state: deliveryVersions.state })
      .from(deliveryVersions)
      .where(eq(deliveryVersions.deliveryId, made.deliveryId))
      .orderBy(deliveryVersions.position)
  ).map((row) => row.state);
const letters = async (made: { deliveryId: string }) =>
  db()
    .select({ template: mailOutbox.template, props: mailOutbox.props })
    .from(mailOutbox)
    .where(and(eq(mailOutbox.subjectId, made.deliveryId), eq(mailOutbox.template, "finding-statement")));

describe("the holder of a case", () => {
  test("REVIEW-1: of two who take a case at once exactly one holds it, and hands it over in words", async () => {
    const { made, first, second } = await libraryCase();
    const { caseId } = made;
    const answers = await Promise.allSettled([takeCase(first, { caseId }), takeCase(second, { caseId })]);
    expect(answers.map((answer) => answer.status).sort()).toEqual(["fulfilled", "rejected"]);
    const [holder, other] = answers[0].status === "fulfilled" ? [first, second] : [second, first];
    await expect(recordFinding(other, nothing(made))).rejects.toThrow(Precondition);
    await expect(handOver(other, { caseId, toPersonId: other.personId, words: "Mine now." })).rejects.toThrow(
      Precondition,
    );
    await handOver(holder, { caseId, toPersonId: other.personId, words: "I heard the first passage." });
    expect((await getCase(other, { caseId })).holder?.isYou).toBe(true);
    await expect(takeCase(holder, { caseId })).rejects.toThrow(Precondition);
    expect((await getCase(other, { caseId })).messages.map((message) => message.words)).toContain(
      "I heard the first passage.",
    );
  });

  test("REVIEW-2: the deliverer is a role until the papers are opened, and opening them is on record", async () => {
    const { made, first } = await libraryCase();
    const [deliverer] = await db().select().from(people).where(eq(people.id, made.delivererId));
    const name = deliverer?.name ?? "nobody";
    const before = await getCase(first, { caseId: made.caseId });
    expect(before.papers).toBeNull();
    await openPapers(first, { caseId: made.caseId });
    const after = await getCase(first, { caseId: made.caseId });
    expect(after.papers?.delivery.delivererName).toBe(name);
    expect(JSON.stringify(before)).not.toContain(name);
    const log = await db().select().from(disclosures).where(eq(disclosures.caseId, made.caseId));
    expect(log.map((row) => [row.kind, row.personId])).toEqual([["papers", first.personId]]);
  });
});

describe("a finding", () => {
  test("REVIEW-3: it needs two sentences; a refusal also its code and the separate answer about intent", async () => {
    const { made, first } = await libraryCase();
    const given = refusal(made);
    const wrong: [Partial<Finding>, string][] = [
      [{ reasons: "It is the same recording as one that we hold here, heard from start to end" }, "reasons"],
      [{ reasons: "It is. The same." }, "reasons"],
      [{ codes: [] }, "codes"],
      [{ knowing: null }, "knowing"],
      [{ knowing: true, knowingBecause: "" }, "knowingBecause"],
      [{ outcome: "explained", explainedBy: null }, "explainedBy"],
    ];
    for (const [change, field] of wrong) {
      const refused = await recordFinding(first, { ...given, ...change }).catch((error: unknown) => error);
      expect(refused, field).toBeInstanceOf(Invalid);
      expect(Object.keys((refused as Invalid).fields), field).toContain(field);
    }
    expect(await db().select().from(findings).where(eq(findings.caseId, made.caseId))).toEqual([]);
  });

  test("REVIEW-3: a refusal does nothing until somebody else confirms it, and its author is named in it", async () => {
    const { made, first, second } = await libraryCase();
    const { findingId, closed } = await recordFinding(first, refusal(made));
    expect(closed).toBe(false);
    expect(await versionStates(made)).toEqual(["held"]);
    expect(await letters(made)).toEqual([]);
    const words = "I heard both; it is one performance.";
    await expect(confirmFinding(first, { findingId, confirm: true, words })).rejects.toThrow(Forbidden);
    expect(await versionStates(made)).toEqual(["held"]);
    expect(await confirmFinding(second, { findingId, confirm: true, words })).toEqual({ closed: true });
    expect(await versionStates(made)).toEqual(["refused"]);
    const [row] = await db().select().from(findings).where(eq(findings.id, findingId));
    expect(row).toMatchObject({ deciderId: first.personId, reasons: REASONS, codes: ["R01"] });
    expect(await letters(made)).toHaveLength(1);
  });

  test("REVIEW-3: where a library has one moderator, the second person is the marketplace's", async () => {
    const { made, first } = await libraryCase({ moderators: 1 });
    const marketplace = await makeModerator(null);
    await expect(getCase(marketplace, { caseId: made.caseId })).rejects.toThrow(NotFound);
    const { findingId } = await recordFinding(first, refusal(made));
    expect((await listCases(marketplace, {})).map((row) => row.id)).toContain(made.caseId);
    const words = "I heard both; it is one performance.";
    expect(await confirmFinding(marketplace, { findingId, confirm: true, words })).toEqual({ closed: true });
    expect(await versionStates(made)).toEqual(["refused"]);
  });

  test("REVIEW-3: not confirmed, it goes back with a note, nothing is applied and nothing is sent", async () => {
    const { made, first, second } = await libraryCase();
    const { findingId } = await recordFinding(first, {
      ...refusal(made),
      knowing: true,
      knowingBecause: REASONS,
    });
    const words = "The second passage is a loop that many use.";
    expect(await confirmFinding(second, { findingId, confirm: false, words })).toEqual({ closed: false });
    expect(await stateOf(made.caseId)).toBe("open");
    expect(await versionStates(made)).toEqual(["held"]);
    expect(await letters(made)).toEqual([]);
    const view = await getCase(first, { caseId: made.caseId });
    expect(view.findings).toEqual([]);
    expect(view.messages.map((message) => message.words)).toContain(`Not confirmed: ${words}`);
    expect(await db().select().from(upheldFindings).where(eq(upheldFindings.findingId, findingId))).toEqual(
      [],
    );
  });

  test("REVIEW-4: who declared a conflict takes, opens, hears, asks, decides and confirms nothing in the case", async () => {
    const { made, first, second } = await libraryCase();
    const { caseId } = made;
    const { findingId } = await recordFinding(first, refusal(made));
    await declareConflict(second, { caseId, words: "I work with the deliverer." });
    const words = "I heard both; it is one performance.";
    const tries = [
      takeCase(second, { caseId }),
      openPapers(second, { caseId }),
      hearPassage(second, { passageId: made.hits[0]?.passageId ?? "" }),
      askComposer(second, { caseId, words: "Is the tambourine from a pack of loops?" }),
      recordFinding(second, nothing(made)),
      confirmFinding(second, { findingId, confirm: true, words }),
    ];
    for (const answer of await Promise.allSettled(tries))
      expect(answer.status === "rejected" && answer.reason).toBeInstanceOf(Forbidden);
    expect(await versionStates(made)).toEqual(["held"]);
    expect((await getCase(second, { caseId })).youDeclaredConflict).toBe(true);
  });

  test("REVIEW-4: declaring one while holding the case gives it back to the queue", async () => {
    const { made, first } = await libraryCase();
    await takeCase(first, { caseId: made.caseId });
    await declareConflict(first, { caseId: made.caseId, words: "I wrote the reference." });
    const [row] = await db().select().from(cases).where(eq(cases.id, made.caseId));
    expect(row?.holderId).toBeNull();
  });
});

describe("what another library holds", () => {
  /** As openCase never leaves it: a case in a library's own queue with an outside reference. The reads must hold alone. */
  async function leakyCase(state: "listed" | "pending") {
    const { libraryId, moderators } = await freshLibraryWith(2);
    const reference = await makeReference({ libraryId: await makeLibrary(), state });
    const made = await makeCase({ libraryId, deliveringLibraryId: libraryId, references: [reference] });
    const [moderator] = moderators;
    if (!moderator) throw new Error("made with moderators");
    return { made, moderator, reference };
  }

  test("REVIEW-5: a confidential holding has no title, writer, picture or sound for a library's moderator, also with the papers open", async () => {
    const { made, moderator, reference } = await leakyCase("pending");
    await openPapers(moderator, { caseId: made.caseId });
    const view = await getCase(moderator, { caseId: made.caseId });
    const [group] = view.groups;
    expect(group?.reference).toMatchObject({
      title: null,
      catalogueNumber: null,
      isConfidential: true,
      words: "a confidential holding",
    });
    expect(group?.hits[0]?.reference).toBeNull();
    expect(group?.hits[0]?.passages[0]?.listening).toBeNull();
    expect(view.papers?.references).toEqual([]);
    const text = JSON.stringify(view);
    for (const secret of [reference.title, reference.recordingId, `file-${reference.recordingId}`])
      expect(text).not.toContain(secret);
    await expect(hearPassage(moderator, { passageId: made.hits[0]?.passageId ?? "" })).rejects.toThrow(
      NotFound,
    );
  });

  test("REVIEW-5: of a listed recording of another library only the overlapping seconds are drawn and heard", async () => {
    const { made, moderator, reference } = await leakyCase("listed");
    const view = await getCase(moderator, { caseId: made.caseId });
    const drawn = view.groups[0]?.hits[0]?.reference;
    expect(drawn?.wholeIsDrawn).toBe(false);
    const contour = unpackContour(new Uint8Array(Buffer.from(drawn?.contour ?? "", "base64")));
    const inked = [...(contour.channels[0]?.peak ?? [])].flatMap((value, bin) =>
      value > 0 ? [bin / contour.binsPerSecond] : [],
    );
    expect(Math.min(...inked)).toBeGreaterThanOrEqual(30);
    expect(Math.max(...inked)).toBeLessThanOrEqual(40);
    expect(JSON.stringify(view)).not.toContain(reference.title);
    expect(await hearPassage(moderator, { passageId: made.hits[0]?.passageId ?? "" })).toHaveProperty(
      "fileKey",
    );
  });

  test("REVIEW-5: the marketplace's moderators hear both sides, and every hearing is on record", async () => {
    const deliveringLibraryId = await makeLibrary();
    const reference = await makeReference({ libraryId: await makeLibrary(), state: "pending" });
    const made = await makeCase({ libraryId: null, deliveringLibraryId, references: [reference] });
    const marketplace = await makeModerator(null);
    const passageId = made.hits[0]?.passageId ?? "";
    await hearPassage(marketplace, { passageId });
    await hearPassage(marketplace, { passageId });
    const log = await db().select().from(disclosures).where(eq(disclosures.caseId, made.caseId));
    expect(log.map((row) => [row.kind, row.personId, row.subjectId])).toEqual([
      ["hearing", marketplace.personId, passageId],
      ["hearing", marketplace.personId, passageId],
    ]);
    expect((await getCase(marketplace, { caseId: made.caseId })).groups[0]?.reference.title).toBe(
      reference.title,
    );
  });

  test("REVIEW-5: the deliverer gets the places in their own recording and nothing else of a confidential holding", async () => {
    const deliveringLibraryId = await makeLibrary();
    const reference = await makeReference({ libraryId: await makeLibrary(), state: "pending" });
    const made = await makeCase({ libraryId: null, deliveringLibraryId, references: [reference] });
    const composer: ActorOf<"composer"> = {
      kind: "composer",
      personId: made.delivererId,
      name: "The deliverer",
      libraryId: deliveringLibraryId,
    };
    const owner: ActorOf<"owner"> = { ...composer, kind: "owner", personId: "per_owner" };
    for (const actor of [composer, owner]) {
      const view = await getCaseOfDelivery(actor, { deliveryId: made.deliveryId });
      expect(view?.groups[0]).toMatchObject({
        reference: "a confidential holding",
        passages: [{ startS: 10, endS: 20, mayHear: false }],
      });
      const text = JSON.stringify(view);
      for (const secret of [reference.title, reference.recordingId, reference.familyId, reference.libraryId])
        expect(text).not.toContain(secret);
      expect(text).not.toMatch(/contour|fileKey|refStartS/);
    }
    await expect(hearOwnPassage(composer, { passageId: made.hits[0]?.passageId ?? "" })).rejects.toThrow(
      NotFound,
    );
    const stranger = { ...composer, personId: "per_somebody_else" };
    await expect(getCaseOfDelivery(stranger, { deliveryId: made.deliveryId })).rejects.toThrow(NotFound);
  });

  test("REVIEW-5: the deliverer hears the overlapping seconds of a listed reference, in their own case only", async () => {
    const libraryId = await makeLibrary();
    const reference = await makeReference({ libraryId, state: "listed" });
    const made = await makeCase({ libraryId: null, deliveringLibraryId: libraryId, references: [reference] });
    const passageId = made.hits[0]?.passageId ?? "";
    const composer = { kind: "composer" as const, personId: made.delivererId, name: "D", libraryId };
    expect(await hearOwnPassage(composer, { passageId })).toEqual({ fileKey: `listening-${passageId}` });
    await expect(hearOwnPassage({ ...composer, personId: "per_other" }, { passageId })).rejects.toThrow(
      NotFound,
    );
  });
});

describe("closing", () => {
  test("REVIEW-6: the case closes and one letter goes out when every group is answered; a repeat sends no second", async () => {
    const { made, first } = await libraryCase({ references: 2 });
    expect(await recordFinding(first, nothing(made, 0))).toMatchObject({ closed: false });
    expect(await letters(made)).toEqual([]);
    const operationId = `test:${made.caseId}`;
    const last = { ...nothing(made, 1), outcome: "send back" as const, codes: ["T07" as const] };
    const answer = await recordFinding(first, last, { operationId });
    expect(answer.closed).toBe(true);
    expect(await recordFinding(first, last, { operationId })).toEqual(answer);
    expect(await letters(made)).toHaveLength(1);
    expect(await stateOf(made.caseId)).toBe("closed");
    await expect(recordFinding(first, nothing(made, 0))).rejects.toThrow(Precondition);
    expect(await versionStates(made)).toEqual(["clear", "returned"]);
  });

  test("REVIEW-6: two last answers at once close the case once", async () => {
    const { made, first } = await libraryCase({ references: 2 });
    const answers = await Promise.all([
      recordFinding(first, nothing(made, 0)),
      recordFinding(first, nothing(made, 1)),
    ]);
    expect(answers.filter((answer) => answer.closed)).toHaveLength(1);
    expect(await letters(made)).toHaveLength(1);
  });

  const effects: [Partial<Finding>, string, string][] = [
    [{ outcome: "nothing in common" }, "clear", "clear"],
    [{ outcome: "explained", explainedBy: "licensed sample" }, "clear", "clear"],
    [{ outcome: "send back", codes: ["R05"] }, "returned", "returned"],
    [{ outcome: "hold for rights", codes: ["R03"] }, "held", "hold"],
    [{ outcome: "cannot be listed", codes: ["R02"], knowing: false }, "refused", "refused"],
  ];
  test.each(effects)(
    "REVIEW-6: %j leaves the version %s and its letter says %s",
    async (change, state, letter) => {
      const { made, first, second } = await libraryCase();
      const { findingId } = await recordFinding(first, { ...nothing(made), ...change });
      if (change.outcome === "cannot be listed")
        await confirmFinding(second, { findingId, confirm: true, words: "I heard both; it is one." });
      expect(await stateOf(made.caseId)).toBe("closed");
      expect(await versionStates(made)).toEqual([state]);
      expect((await letters(made)).map((mail) => mail.props.outcome)).toEqual([letter]);
      const open = await db().select().from(holds).where(eq(holds.familyId, made.familyId));
      expect(open.map((hold) => hold.cause)).toEqual(state === "held" ? ["finding"] : []);
      const [delivery] = await db().select().from(deliveries).where(eq(deliveries.id, made.deliveryId));
      expect(delivery?.state).toBe(state === "refused" ? "refused" : "delivered");
    },
  );

  test("REVIEW-6: referred out, the case stays open and nothing is decided", async () => {
    const { made, first } = await libraryCase();
    expect(await recordFinding(first, { ...nothing(made), outcome: "refer out" })).toMatchObject({
      closed: false,
    });
    expect(await stateOf(made.caseId)).toBe("open");
    expect(await versionStates(made)).toEqual(["held"]);
  });

  test("an upheld finding of 18 May 2026 counts from its confirmation through 17 May 2028; one that was not knowing goes on no record", async () => {
    const { made, first, second } = await libraryCase({ references: 2 });
    const at = new Date("2026-05-18T10:00:00Z");
    await withBusinessClock(at, async () => {
      for (const [index, knowing] of [true, false].entries()) {
        const given = { ...refusal(made, index), knowing, knowingBecause: knowing ? REASONS : "" };
        const { findingId } = await recordFinding(first, given);
        await confirmFinding(second, { findingId, confirm: true, words: "I heard both; it is one." });
      }
    });
    const rows = await db()
      .select()
      .from(upheldFindings)
      .where(eq(upheldFindings.personId, made.delivererId));
    expect(rows).toHaveLength(1);
    expect(rows[0]?.fromAt.toISOString()).toMatch(/^2026-05-18T10:00/);
    expect(rows[0]?.throughAt.toISOString()).toMatch(/^2028-05-17T23:59:59/);
  });
});

describe("whose case it is", () => {
  const open = (made: { deliveryId: string; familyId: string }) =>
    openCase(worker, { deliveryId: made.deliveryId, familyId: made.familyId });

  test("REVIEW-7: references inside the library leave the case with its own moderators", async () => {
    const { libraryId, moderators } = await freshLibraryWith(1);
    const delivery = await makeHeldDelivery({ libraryId });
    await makeHit(delivery.recordingIds[0] ?? "", await makeReference({ libraryId, state: "listed" }));
    const { caseId } = await open(delivery);
    const [own] = moderators;
    if (!own || !caseId) throw new Error("a case was opened");
    expect((await listCases(own, {})).map((row) => row.id)).toEqual([caseId]);
    await expect(getCase(await makeModerator(null), { caseId })).rejects.toThrow(NotFound);
    await expect(getCase(await makeModerator(await makeLibrary()), { caseId })).rejects.toThrow(NotFound);
  });

  const outside: [string, () => Promise<Parameters<typeof makeHit>[1]>][] = [
    [
      "a listed recording of another library",
      async () => makeReference({ libraryId: await makeLibrary(), state: "listed" }),
    ],
    ["an unlisted one", async () => makeReference({ libraryId: await makeLibrary(), state: "pending" })],
    ["a reported work", async () => ({ reported: "rw_00000000000000000000000000" })],
  ];
  test.each(outside)(
    "REVIEW-7: with %s among the references the whole case is the marketplace's",
    async (_what, reference) => {
      const { libraryId, moderators } = await freshLibraryWith(1);
      const delivery = await makeHeldDelivery({ libraryId, versions: 2 });
      await makeHit(delivery.recordingIds[0] ?? "", await makeReference({ libraryId, state: "listed" }));
      await makeHit(delivery.recordingIds[1] ?? "", await reference());
      const { caseId } = await open(delivery);
      const [own] = moderators;
      if (!own || !caseId) throw new Error("a case was opened");
      const marketplace = await makeModerator(null);
      expect((await getCase(marketplace, { caseId })).groups).toHaveLength(2);
      await expect(getCase(own, { caseId })).rejects.toThrow(NotFound);
      await expect(takeCase(own, { caseId })).rejects.toThrow(NotFound);
      expect(await listCases(own, {})).toEqual([]);
    },
  );

  test("REVIEW-7: an outside reference that turns up later moves the open case whole; asking twice opens no second case", async () => {
    const { libraryId, moderators } = await freshLibraryWith(1);
    const delivery = await makeHeldDelivery({ libraryId });
    const [recordingId = ""] = delivery.recordingIds;
    await makeHit(recordingId, await makeReference({ libraryId, state: "listed" }));
    const first = await open(delivery);
    expect(await open(delivery)).toEqual(first);
    await makeHit(recordingId, await makeReference({ libraryId: await makeLibrary(), state: "listed" }));
    expect(await open(delivery)).toEqual(first);
    const [own] = moderators;
    if (!own || !first.caseId) throw new Error("a case was opened");
    await expect(getCase(own, { caseId: first.caseId })).rejects.toThrow(NotFound);
    expect((await getCase(await makeModerator(null), { caseId: first.caseId })).groups).toHaveLength(2);
    expect(await db().select().from(cases).where(eq(cases.deliveryId, delivery.deliveryId))).toHaveLength(1);
  });

  test("REVIEW-7: a library without a moderator of its own leaves its cases to the marketplace", async () => {
    const libraryId = await makeLibrary();
    const delivery = await makeHeldDelivery({ libraryId });
    await makeHit(delivery.recordingIds[0] ?? "", await makeReference({ libraryId, state: "listed" }));
    const { caseId } = await open(delivery);
    expect((await getCase(await makeModerator(null), { caseId: caseId ?? "" })).forMarketplace).toBe(true);
  });

  // Common practice: a first look within two working days. 25 May 2026 is a bank holiday in England.
  test("a case of Friday 22 May 2026, 15:00, is due by the end of Wednesday 27 May in London", async () => {
    const { libraryId } = await freshLibraryWith(1);
    const delivery = await makeHeldDelivery({ libraryId });
    await makeHit(delivery.recordingIds[0] ?? "", await makeReference({ libraryId, state: "listed" }));
    const { caseId } = await withBusinessClock(new Date("2026-05-22T14:00:00Z"), () => open(delivery));
    const [row] = await db()
      .select()
      .from(cases)
      .where(eq(cases.id, caseId ?? ""));
    expect(row?.dueAt.toISOString()).toMatch(/^2026-05-27T22:59:59/);
  });
});

describe("a question", () => {
  test("it has a deadline in the deliverer's own zone, one person may answer it, and the case comes back", async () => {
    const { made, first, libraryId } = await libraryCase();
    const { caseId, deliveryId } = made;
    const words = "From 0:10 to 0:20 the tambourine is the same. Is it from a pack of loops?";
    const asked = await withBusinessClock(new Date("2026-05-18T10:00:00Z"), () =>
      askComposer(first, { caseId, words }),
    );
    expect(asked.answerUntil.toISOString()).toMatch(/^2026-05-25T21:59:59/);
    expect(await stateOf(caseId)).toBe("waiting on composer");
    await expect(recordFinding(first, nothing(made))).rejects.toThrow(Precondition);
    const composer = { kind: "composer" as const, personId: made.delivererId, name: "D", libraryId };
    const answer = { deliveryId, words: "It is; the receipt is in the papers.", fileKey: null };
    await expect(answerQuestion({ ...composer, personId: "per_other" }, answer)).rejects.toThrow(NotFound);
    await expect(answerQuestion(composer, { ...answer, fileKey: "not-among-the-papers" })).rejects.toThrow(
      Invalid,
    );
    await withBusinessClock(new Date("2026-05-19T10:00:00Z"), () => answerQuestion(composer, answer));
    expect(await stateOf(caseId)).toBe("open");
    await expect(answerQuestion(composer, answer)).rejects.toThrow(NotFound);
    const view = await getCaseOfDelivery(composer, { deliveryId });
    expect(view?.messages.map((message) => message.kind)).toEqual(["question", "answer"]);
  });

  test("a colleague's private note reaches neither the deliverer nor a moderator who does not hold the case", async () => {
    const { made, first, second, libraryId } = await libraryCase();
    const { caseId, deliveryId } = made;
    await takeCase(first, { caseId });
    await handOver(first, { caseId, toPersonId: first.personId, words: "I doubt the session file." });
    const composer = { kind: "composer" as const, personId: made.delivererId, name: "D", libraryId };
    expect(JSON.stringify(await getCaseOfDelivery(composer, { deliveryId }))).not.toContain("doubt");
    expect(JSON.stringify(await getCase(second, { caseId }))).not.toContain("doubt");
    expect(JSON.stringify(await getCase(first, { caseId }))).toContain("doubt");
  });
});

test("every step of a case stands in the audit log under the person who took it", async () => {
  const { made, first, second } = await libraryCase();
  await takeCase(first, { caseId: made.caseId });
  const { findingId } = await recordFinding(first, refusal(made));
  await confirmFinding(second, { findingId, confirm: true, words: "I heard both; it is one." });
  const rows = await db().select().from(auditLog).where(eq(auditLog.subject, made.caseId));
  expect(rows.map((row) => [row.verb, row.actorPersonId]).sort()).toEqual(
    [
      ["review.takeCase", first.personId],
      ["review.recordFinding", first.personId],
      ["review.confirmFinding", second.personId],
    ].sort(),
  );
});
