import { loopFacts } from "@/fixtures/audio";
import {
  acceptEditorial,
  answerSplit,
  fileArrived,
  getDelivery,
  saveDraft,
  setVersion,
  signDelivery,
  startDelivery,
} from "@/lib/deliveries";
import { withBusinessClock } from "@/lib/kernel/clock";
import { assert } from "@/lib/kernel/errors";
import { addReportedWork } from "@/lib/reports";
import { registerLoop } from "@/lib/screening";
import { broughtInLicences } from "./brought-in";
import { sharedMaterial } from "./data/registers";
import { type Handover, handoverOf } from "./drafts";
import { firstSale } from "./first-sale";
import { storeMaster } from "./masters";
import { planner, planStep, priorityOf } from "./plan";
import { familyOfCue, later } from "./turns";
import { composerActor, type DemoWorld, demoWorld, ownerActor, personOf, seeding } from "./world";

const once = (key: string) => ({ operationId: `demo:${key}`.slice(0, 120) });

/** Brings one item of the plan, through the verbs that a person's own action would call. Safe to repeat. */
export async function bring(item: string): Promise<void> {
  const world = await demoWorld();
  const [kind, id = ""] = item.split(/:(.*)/);
  switch (kind) {
    case "loop":
      return bringLoop(id);
    case "reported":
      return bringReported(id);
    case "hold":
      return holdHarbourLights(world);
    case "sale":
      return firstSale(world);
    case "licences":
      return broughtInLicences(world);
    default:
      return handOver(world, item);
  }
}

async function bringLoop(code: string): Promise<void> {
  const row = sharedMaterial.find((candidate) => candidate.id === code);
  const facts = loopFacts[code as keyof typeof loopFacts];
  assert(row && facts, `no loop ${code}`);
  const { fileKey } = await storeMaster({ kind: "loop", id: row.id }, `loop-${code}`);
  await registerLoop(
    seeding,
    {
      code: row.id,
      title: row.title,
      lengthS: facts.lengthS,
      bpm: row.bpm,
      condition: row.isLowInformation
        ? "low information"
        : code === "LP-007"
          ? "not as principal element"
          : "with other musical content",
      conditionWords: `Its licence: ${row.condition}.`,
      coverageMaxBps: code === "LP-007" ? 5000 : 10_000,
      fileKey,
    },
    once(`loop:${code}`),
  );
}

async function bringReported(code: string): Promise<void> {
  const { fileKey } = await storeMaster({ kind: "reported", id: code }, `reported-${code}`);
  await withBusinessClock(new Date("2026-04-20T09:00:00Z"), () =>
    addReportedWork(
      seeding,
      {
        code,
        title: "Copper Sparrow, live in Varn",
        concerns: "recording",
        owner: "Tern & Anvil",
        level: "supported",
        fileKey,
      },
      once(`reported:${code}`),
    ),
  );
}

/** RW-01: a claim about a work, with no recording; the cue is hidden from new sale while it is open. */
async function holdHarbourLights(world: DemoWorld): Promise<void> {
  const familyId = await familyOfCue(world, 9);
  if (!familyId) return later("hold:RW-01");
  await withBusinessClock(new Date("2026-05-12T09:00:00Z"), () =>
    addReportedWork(
      seeding,
      {
        code: "RW-01",
        title: "Harbour Without Lamps",
        concerns: "work",
        owner: "Marisol Quenby-Achterberg",
        level: "claimed",
        fileKey: null,
        holdFamilyId: familyId,
      },
      once("reported:RW-01"),
    ),
  );
}

async function handOver(world: DemoWorld, item: string): Promise<void> {
  const handover = handoverOf(world, item);
  if (handover.files.length === 0) return;
  if (handover.joinsCue !== null && !(await familyOfCue(world, handover.joinsCue))) return later(item);
  const stored: (Handover["files"][number] & { fileKey: string; sizeBytes: number })[] = [];
  for (const file of handover.files)
    stored.push({ ...file, ...(await storeMaster(file.key, item.replace(":", "-"))) });
  await withBusinessClock(handover.at, async () => {
    const actor = composerActor(world, handover.deliverer, handover.library);
    const { deliveryId } = await startDelivery(
      actor,
      { title: String(handover.draft.title) },
      once(`${item}:start`),
    );
    await saveDraft(actor, { deliveryId, draft: handover.draft }, once(`${item}:draft`));
    for (const [index, file] of stored.entries()) {
      const { versionId } = await fileArrived(
        seeding,
        {
          deliveryId,
          personId: actor.personId,
          key: file.fileKey,
          name: file.name,
          sizeBytes: file.sizeBytes,
        },
        once(`${item}:file:${index}`),
      );
      await setVersion(
        actor,
        { deliveryId, versionId, versionRole: file.role, isrc: file.isrc },
        once(`${item}:role:${index}`),
      );
    }
    await planStep(
      planner,
      { item, priority: priorityOf(item), deliveryId, turn: 1, inS: 1 },
      once(`${item}:turn:1`),
    );
  });
}

const TURN_S = 2;
const TURNS_MAX = 3000;

/** Looks after a delivery of the plan: signs it when it is measured, lets the others accept, and the library. */
export async function seeThrough(item: string, deliveryId: string, turn: number): Promise<void> {
  const world = await demoWorld();
  const handover = handoverOf(world, item);
  if (turn > TURNS_MAX) throw new Error(`${item} does not come to an end`);
  const actor = composerActor(world, handover.deliverer, handover.library);
  const view = await getDelivery(actor, { deliveryId });
  const again = () =>
    planStep(
      planner,
      { item, priority: priorityOf(item), deliveryId, turn: turn + 1, inS: TURN_S },
      once(`${item}:turn:${turn + 1}`),
    );
  if (view.state === "draft") {
    if (view.versions.some((version) => version.state === "arrived" || version.state === "measuring"))
      return void (await again());
    // A duplicate or an unreadable file stays a draft with its answer, as it would for anybody.
    if (
      view.versions.some(
        (version) => version.state === "unreadable" || version.words.startsWith("You already delivered"),
      )
    )
      return;
    await sign(world, handover, actor, deliveryId, item);
    return void (await again());
  }
  for (const writer of view.writers.filter((candidate) => candidate.state === "asked")) {
    const key = [...world.people.values()].find((person) => person.ipi !== null && person.ipi === writer.ipi)
      ?.row.key;
    if (key)
      await answerSplit(
        { kind: "person", personId: personOf(world, key).id, name: writer.name },
        { deliveryId, accept: true },
        once(`${item}:accept:${key}`),
      );
  }
  if (handover.accept && view.state === "delivered" && !view.editorialAcceptedAt)
    await acceptEditorial(ownerActor(world, handover.library), { deliveryId }, once(`${item}:editorial`));
  const isWorking = view.versions.some((version) => version.state === "screening");
  const isGoingToList =
    handover.accept &&
    view.state === "delivered" &&
    !view.versions.some((version) => version.state === "held" || version.state === "returned");
  if (isWorking || isGoingToList) await again();
}

async function sign(
  world: DemoWorld,
  handover: Handover,
  actor: ReturnType<typeof composerActor>,
  deliveryId: string,
  item: string,
): Promise<void> {
  if (handover.joinsCue !== null) {
    const linkedFamilyId = await familyOfCue(world, handover.joinsCue);
    await saveDraft(actor, { deliveryId, draft: { linkedFamilyId } }, once(`${item}:link`));
  }
  await signDelivery(
    actor,
    {
      deliveryId,
      declaration: {
        authorship: true,
        recordingOwner: "the library, by assignment",
        performers: "all performed by me",
        samples: handover.samples as never,
        preExisting: handover.preExisting,
        preExistingWords:
          handover.preExisting === "none" ? "" : "The Cooper of Brae, traditional, first printed 1794",
        deal: handover.deal,
        truth: true,
        signedName: actor.name,
      },
    },
    once(`${item}:sign`),
  );
}
