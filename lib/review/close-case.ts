import { and, eq, inArray, isNull } from "drizzle-orm";
import type { Tx } from "@/db/client";
import { cases, confirmations, findings } from "@/db/schema/review";
import { peopleByIds } from "@/lib/accounts";
import { familyById, placeHold, recordingsOfFamily } from "@/lib/catalogue";
import { applyFinding, deliveryOfFamily, type FindingEffect } from "@/lib/deliveries";
import { addDays, civilDateIn, endOfDay, sameDayOrLast } from "@/lib/kernel/calendar";
import { env } from "@/lib/kernel/env";
import { assert } from "@/lib/kernel/errors";
import { enqueueMail } from "@/lib/mail";
import { hitsByIds } from "@/lib/screening";
import { groupsOfCase } from "./case-hits";
import { FINDING_OUTCOMES, type FindingOutcome, RIGHTS_CODES, type RightsCode } from "./states";

const WORST: readonly FindingEffect[] = ["refused", "held", "returned", "clear"];
type Finding = typeof findings.$inferSelect;

/** The case closes, and the letters go out once, when every group is answered with what needs a second person confirmed. */
export async function closeIfAnswered(tx: Tx, args: { caseId: string; now: Date }): Promise<boolean> {
  const groups = await groupsOfCase(tx, args.caseId);
  const current = await tx
    .select()
    .from(findings)
    .where(and(eq(findings.caseId, args.caseId), isNull(findings.supersededBy)));
  const confirmed = current.length
    ? await tx
        .select()
        .from(confirmations)
        .where(
          inArray(
            confirmations.findingId,
            current.map((finding) => finding.id),
          ),
        )
    : [];
  const effective = current.filter(
    (finding) =>
      !finding.needsSecond || confirmed.some((row) => row.findingId === finding.id && row.confirmed),
  );
  const answered = groups.every((group) => effective.some((finding) => finding.groupId === group.id));
  if (!answered || effective.some((finding) => finding.outcome === "refer out")) return false;
  const [row] = await tx.select().from(cases).where(eq(cases.id, args.caseId));
  assert(row, "the case is locked by its caller");
  await tx.update(cases).set({ state: "closed", closedAt: args.now }).where(eq(cases.id, row.id));
  const effects = await effectsOf(tx, row.familyId, groups, effective);
  const worst = worstOf(effective);
  await applyFinding(tx, {
    deliveryId: row.deliveryId,
    effects,
    words: wordsOf(worst),
    codes: worst.codes,
    personId: worst.deciderId,
    now: args.now,
  });
  if (effectOf(worst) === "held")
    await placeHold(tx, {
      familyId: row.familyId,
      cause: "finding",
      causeId: worst.id,
      reason: "A rights question is open.",
      now: args.now,
    });
  await tellDeliverer(tx, {
    deliveryId: row.deliveryId,
    familyId: row.familyId,
    finding: worst,
    now: args.now,
  });
  return true;
}

const effectOf = (finding: Finding): FindingEffect =>
  FINDING_OUTCOMES[finding.outcome as FindingOutcome].effect;

function worstOf(list: readonly Finding[]): Finding {
  const [worst] = [...list].sort((a, b) => WORST.indexOf(effectOf(a)) - WORST.indexOf(effectOf(b)));
  assert(worst, "an answered case has a finding");
  return worst;
}

/** Each recording takes the worst answer of the groups that it is in. */
async function effectsOf(
  tx: Tx,
  familyId: string,
  groups: Awaited<ReturnType<typeof groupsOfCase>>,
  effective: readonly Finding[],
): Promise<Map<string, FindingEffect>> {
  const effects = new Map<string, FindingEffect>();
  const hits = await hitsByIds(
    tx,
    groups.flatMap((group) => group.hitIds),
  );
  const own = new Set((await recordingsOfFamily(tx, familyId)).map((recording) => recording.id));
  for (const group of groups) {
    const finding = effective.find((candidate) => candidate.groupId === group.id);
    if (!finding) continue;
    const ids =
      group.referenceKind === "own"
        ? [group.referenceKey]
        : hits.filter((hit) => group.hitIds.includes(hit.id)).map((hit) => hit.recordingId);
    for (const id of ids) {
      const before = effects.get(id);
      const effect = effectOf(finding);
      if (own.has(id) && (!before || WORST.indexOf(effect) < WORST.indexOf(before))) effects.set(id, effect);
    }
  }
  return effects;
}

function wordsOf(finding: Finding): string {
  switch (finding.outcome as FindingOutcome) {
    case "nothing in common":
      return "A person listened and found nothing in common.";
    case "explained":
      return `A person listened: explained by ${finding.explainedBy}.`;
    case "send back":
      return finding.reasons;
    case "hold for rights":
    case "refer out":
      return "A rights question is open. Nothing is decided yet.";
    case "cannot be listed":
      return "It cannot be listed. A second person has confirmed the reasons.";
  }
}

async function tellDeliverer(
  tx: Tx,
  args: { deliveryId: string; familyId: string; finding: Finding; now: Date },
): Promise<void> {
  const delivery = await deliveryOfFamily(tx, args.familyId, args.deliveryId);
  const family = await familyById(tx, args.familyId);
  const person = delivery
    ? (await peopleByIds(tx, [delivery.delivererId])).get(delivery.delivererId)
    : undefined;
  if (!delivery || !family || !person) return;
  await enqueueMail(tx, {
    toAddress: person.email,
    personId: person.id,
    template: "finding-statement",
    subjectId: args.deliveryId,
    props: statementProps({ ...args, title: family.title, zone: person.timeZone }),
  });
}

/** What the letter says; the same facts stand on the delivery's page. */
export function statementProps(args: {
  deliveryId: string;
  finding: Finding;
  title: string;
  zone: string;
  now: Date;
}): Record<string, unknown> {
  const { finding } = args;
  const url = `${env.SITE_URL}/deliveries/${args.deliveryId}`;
  const common = { title: args.title, decidedAt: args.now.toISOString(), url, zone: args.zone };
  const effect = effectOf(finding);
  const codeWords = (code: string) => RIGHTS_CODES[code as RightsCode] ?? code;
  if (effect === "clear")
    return {
      outcome: "clear",
      ...common,
      ...(finding.outcome === "explained" ? { explanation: finding.reasons } : {}),
    };
  if (effect === "returned")
    return {
      outcome: "returned",
      ...common,
      fixes: (finding.codes.length ? finding.codes : ["M04"]).map((code) => ({
        code,
        text: finding.reasons,
      })),
    };
  const appealUntil = endOfDay(addDays(sameDayOrLast(civilDateIn(args.now, "Etc/UTC"), 6), 1), "Etc/UTC");
  const reasons = {
    since: args.now.toISOString(),
    appliesTo: "everywhere on this service",
    reliedOn: [
      "the passages found by comparing the recordings, heard by a person",
      "the declarations signed with the delivery",
    ],
    isFoundBySoftware: true,
    rule:
      finding.codes.map((code) => `${code}: ${codeWords(code)}`).join("; ") ||
      "the library's terms of delivery",
    why: [finding.reasons, finding.notDecided ? `Not decided: ${finding.notDecided}` : ""]
      .filter(Boolean)
      .join("\n\n"),
    earnings: "Nothing has been earned with this recording here.",
    licences: "No licence has been issued for it.",
    appealUrl: url,
    appealUntil: appealUntil.toISOString(),
  };
  if (effect === "held")
    return { outcome: "hold", ...common, ...reasons, untilInWords: "until the question is answered" };
  return { outcome: "refused", ...common, ...reasons, reasonCode: finding.codes[0] ?? "R01" };
}
