import "@/tests/support/database";
import { execFileSync } from "node:child_process";
import { copyFileSync, mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { eq } from "drizzle-orm";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { db } from "@/db/client";
import { ledgerEntries } from "@/db/schema/ledger";
import { dayRoots, licenceRecords, masterDownloads } from "@/db/schema/licensing";
import { type Actor, ANONYMOUS, system } from "@/lib/kernel/actor";
import { withBusinessClock } from "@/lib/kernel/clock";
import { parseProofCode } from "@/lib/kernel/proof-code";
import {
  getLicence,
  getLicenceFile,
  getOrder,
  getPublicFile,
  importLicence,
  linkToMaster,
  listKeys,
  listLicences,
  listRoots,
  openSeries,
  publishDays,
  readMaster,
  refundLines,
  sendRefund,
  setWithheld,
  verifyByProof,
  verifyFile,
} from "@/lib/licensing";
import { canonicalJson, type JsonValue } from "@/lib/licensing/record/canonical-json";
import type { LicenceFile } from "@/lib/licensing/record/sign-record";
import { verifyRecord } from "@/lib/licensing/record/verify-record";
import { CHECKS_PER_MINUTE } from "@/lib/licensing/states";
import {
  makeCue,
  makeProduction,
  makeShop,
  ONLINE,
  openTill,
  PROGRAMME,
  paid,
  type Shop,
  type Till,
} from "./shop";

let till: Till;
let shop: Shop;
beforeAll(async () => {
  till = await openTill();
  await openSeries(system("tests"), { name: "licence:2026", last: 100 });
  shop = await makeShop();
});
afterAll(() => till.close());

async function licensed(use = PROGRAMME, options: Parameters<typeof makeCue>[1] = {}) {
  const cue = await makeCue(shop.libraryId, options);
  const productionId = await makeProduction(shop.companyId);
  const orderId = await paid({ ...shop, productionId }, till, [{ familyId: cue.familyId, use }]);
  const [line] = (await getOrder(shop.approver, { orderId })).lines;
  const number = line?.licenceNumber ?? "";
  const page = await getLicence(shop.approver, { number });
  return { ...cue, orderId, lineId: line?.id ?? "", number, page };
}

const verifier = fileURLToPath(new URL("../../public/verify/sedgewren-verify.mjs", import.meta.url));

/** Runs the offline verifier in a folder that holds nothing else. */
async function offline(
  file: unknown,
  ...more: string[]
): Promise<{ code: number; answer: Record<string, unknown> }> {
  const folder = mkdtempSync(join(tmpdir(), "sedgewren-offline-"));
  try {
    copyFileSync(verifier, join(folder, "sedgewren-verify.mjs"));
    writeFileSync(join(folder, "record.json"), JSON.stringify(file));
    writeFileSync(join(folder, "keys.json"), JSON.stringify(await listKeys(ANONYMOUS, {})));
    const run = () =>
      execFileSync(
        process.execPath,
        ["sedgewren-verify.mjs", "record.json", "keys.json", "--json", ...more],
        {
          cwd: folder,
          env: { NODE_ENV: "test" },
          encoding: "utf8",
        },
      );
    try {
      return { code: 0, answer: JSON.parse(run()) };
    } catch (error) {
      const failed = error as { status: number; stdout: string };
      return { code: failed.status, answer: JSON.parse(failed.stdout) };
    }
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

describe("a licence record", () => {
  test("LICENSING-5: holds the twenty items, signed, and both verifiers call its file genuine", async () => {
    const { page, number } = await licensed();
    const { record } = page;
    expect(record.number).toBe(number);
    expect(record.licensor.capacity).toBe("exclusive administrator");
    expect(page.licensee.endClient).toBe("Quay Television");
    expect(record.cue.versions).toHaveLength(2);
    expect(record.shares.writers.map(({ share }) => share)).toEqual(["60.00", "40.00"]);
    expect(record.scope.territory).toMatchObject({
      words: "the United Kingdom and Ireland",
      countries: ["GB", "IE"],
    });
    expect(record.scope.contextLimits).toEqual(["political advertising"]);
    expect(record.notIncluded[0]).toContain("Public performance");
    expect(page.fee).toMatchObject({ net: "240.00", tax: "48.00", gross: "288.00", basis: "150 × 1.6" });
    expect(page.fee.invoiceNumber).toMatch(/^[A-Z]{3}-2026-\d{4}$/);
    expect(record.terms.text.length).toBeGreaterThan(2000);
    expect(record.screening).toMatchObject({
      recordingsCompared: 112,
      result: "Nothing shared outside its own family.",
    });
    expect(record.screening.caution).toContain("absence of a match is not clearance");
    expect(record.cueSheetLines).toHaveLength(2);
    expect(record.acceptance.method).toBe("accepted on the site");

    const file = await getLicenceFile(shop.approver, { number });
    const keys = await listKeys(ANONYMOUS, {});
    expect(verifyRecord(JSON.stringify(file), keys)).toMatchObject({ verdict: "genuine", failing: [] });
    expect(await offline(file)).toMatchObject({ code: 0, answer: { verdict: "genuine" } });
    const altered = structuredClone(file) as unknown as {
      disclosed: Record<string, { value: { net: string } }>;
    };
    const fee = altered.disclosed["fee.details"];
    if (fee) fee.value.net = "340.00";
    expect(await verifyFile(ANONYMOUS, { text: JSON.stringify(altered) })).toMatchObject({
      verdict: "altered",
      failing: ["fee.details"],
    });
    expect(await offline(altered)).toMatchObject({
      code: 1,
      answer: { verdict: "altered", failing: ["fee.details"] },
    });
  });

  test("LICENSING-5: nobody can change or delete what was signed, the application's own user included", async () => {
    const { number } = await licensed();
    const at = eq(licenceRecords.number, number);
    await expect(db().update(licenceRecords).set({ canonical: "{}" }).where(at)).rejects.toThrow();
    await expect(db().delete(licenceRecords).where(at)).rejects.toThrow();
  });

  test("a term over a change of clocks ends at 23:59:59 of its own zone", async () => {
    // 14 March to 13 March of the next year: both in winter time. Three months from 8 April: in summer time.
    const winter = await withBusinessClock(new Date("2026-03-14T09:00:00Z"), () => licensed());
    expect(winter.page.record.scope.term).toMatchObject({
      startsOn: "2026-03-14",
      zone: "Europe/London",
      lastUseAt: "2027-03-13T23:59:59.000Z",
    });
    const summer = await withBusinessClock(new Date("2026-04-08T09:00:00Z"), () =>
      licensed({ ...PROGRAMME, termMonths: 3 }),
    );
    expect(summer.page.record.scope.term.lastUseAt).toBe("2026-07-07T22:59:59.000Z");
    const lateEvening = await withBusinessClock(new Date("2026-04-08T23:30:00Z"), () => licensed());
    expect(lateEvening.page.record.scope.term.startsOn).toBe("2026-04-09");
  });

  test("LICENSING-6: a refund is a dated line; the record's own text stays as it was", async () => {
    const { orderId, lineId, number, page } = await licensed(ONLINE);
    const before = await getLicenceFile(shop.approver, { number });
    const { refundId } = await refundLines(shop.owner, {
      orderId,
      lineIds: [lineId],
      words: "A goodwill refund.",
    });
    await sendRefund(refundId);
    const after = await getLicenceFile(shop.approver, { number });
    expect(canonicalJson(after.record as unknown as JsonValue)).toBe(
      canonicalJson(before.record as unknown as JsonValue),
    );
    const answer = await verifyByProof(ANONYMOUS, { proof: page.proofCode });
    expect(answer).toMatchObject({ verdict: "genuine", today: { answer: "in force for part of the day" } });
    const next = await verifyByProof(ANONYMOUS, { proof: page.proofCode, on: "2026-12-01" });
    expect(next).toMatchObject({
      on: { answer: "not in force", sentence: expect.stringContaining("refunded") },
    });
    expect(await offline(after, "--on", "2026-12-01")).toMatchObject({ code: 0 });
  });

  test("LICENSING-3: a record is for its licensee and its library; to every other it does not exist", async () => {
    const { number } = await licensed();
    const other = await makeShop();
    expect((await getLicence(shop.owner, { number })).record.number).toBe(number);
    for (const actor of [other.approver, other.owner] as Actor[])
      await expect(getLicence(actor, { number })).rejects.toMatchObject({ code: "not_found" });
    expect((await listLicences(shop.proposer, {})).map((entry) => entry.number)).toContain(number);
    expect(await listLicences(other.approver, {})).toEqual([]);
  });
});

describe("a check by a stranger", () => {
  test("LICENSING-10: a mistyped code is told before any look-up, an unknown one is unknown, a number alone reveals nothing", async () => {
    const { page, number } = await licensed();
    const wrong = page.proofCode.startsWith("A")
      ? `B${page.proofCode.slice(1)}`
      : `A${page.proofCode.slice(1)}`;
    expect(await verifyByProof(ANONYMOUS, { proof: wrong })).toMatchObject({ verdict: "mistyped" });
    expect(await verifyByProof(ANONYMOUS, { proof: "2222-2222-2222-2222-2" })).toMatchObject({
      verdict: "unknown",
    });
    const absent = number.replace(/-\d{4}-.$/, "-9999-0");
    const [known, mistyped] = [
      await verifyByProof(ANONYMOUS, { proof: number }),
      await verifyByProof(ANONYMOUS, { proof: absent }),
    ];
    expect(known.verdict).toBe("unknown");
    expect(known.sentence).toContain("alone reveals nothing");
    expect(mistyped.verdict).toBe("mistyped");
    expect(
      await verifyByProof(ANONYMOUS, { proof: page.proofCode.toLowerCase().replaceAll("-", " ") }),
    ).toMatchObject({
      verdict: "genuine",
      licence: {
        licensee: page.licensee.name,
        endClient: "Quay Television",
        production: { title: "Harbour Mornings" },
      },
    });
  });

  test("LICENSING-10: more than the allowed look-ups from one address in a minute are refused, and say for how long", async () => {
    const { page } = await licensed();
    const check = () => verifyByProof(ANONYMOUS, { proof: page.proofCode, address: "192.0.2.77" });
    for (let index = 0; index < CHECKS_PER_MINUTE; index++)
      expect(await check()).toMatchObject({ verdict: "genuine" });
    await expect(check()).rejects.toMatchObject({
      code: "limit",
      message: expect.stringMatching(/wait \d+ seconds/),
    });
    expect(await verifyByProof(ANONYMOUS, { proof: page.proofCode, address: "192.0.2.78" })).toMatchObject({
      verdict: "genuine",
    });
  });

  test("what the licensee keeps private is left out of page and file, and the file still verifies", async () => {
    const { page, number } = await licensed();
    await expect(
      setWithheld(shop.proposer, { number, withheld: ["licensee.endClient"] }),
    ).rejects.toMatchObject({ code: "forbidden" });
    await setWithheld(shop.approver, { number, withheld: ["licensee.endClient", "production.title"] });
    const answer = await verifyByProof(ANONYMOUS, { proof: page.proofCode });
    expect(answer).toMatchObject({
      verdict: "genuine",
      licence: {
        endClient: null,
        production: { title: null },
        withheld: ["licensee.endClient", "production.title"],
      },
    });
    const file = await getPublicFile(ANONYMOUS, { proof: page.proofCode });
    expect(JSON.stringify(file)).not.toContain("Quay Television");
    expect(JSON.stringify(file)).not.toContain("Harbour Mornings");
    expect(JSON.stringify(file)).not.toContain("288.00");
    expect(await offline(file)).toMatchObject({ code: 0, answer: { verdict: "genuine" } });
  });

  test("a file of somebody else's making is unknown", async () => {
    expect(await verifyFile(ANONYMOUS, { text: "{}" })).toMatchObject({ verdict: "unknown" });
    expect(await verifyFile(ANONYMOUS, { text: "not JSON" })).toMatchObject({ verdict: "unknown" });
  });
});

describe("a licence brought in", () => {
  const brought = (familyId: string, number: string) => ({
    number,
    licensedOn: "2026-02-20",
    companyId: shop.companyId,
    productionId: null,
    licensee: { name: "Thistle Pictures", endClient: "Skerry TV", address: null },
    production: { title: "Tides", type: "TV programme", parts: "Episodes 1 to 6" },
    familyId,
    use: { ...PROGRAMME, termMonths: 36, episodes: 6 },
    net: "1536.00",
    acceptedBy: "B. Lomond",
  });

  test("LICENSING-9: keeps its number, says so, has no journal row, and numbering goes on above it", async () => {
    const { familyId } = await makeCue(shop.libraryId);
    const entries = (await db().select().from(ledgerEntries)).length;
    const { number, proofCode } = await importLicence(shop.owner, brought(familyId, "LR-2026-0900"));
    expect(number).toMatch(/^LR-2026-0900-[0-9A-Z]$/);
    expect(await db().select().from(ledgerEntries)).toHaveLength(entries);
    const answer = await verifyByProof(ANONYMOUS, { proof: proofCode, on: "2026-03-20" });
    expect(answer).toMatchObject({
      verdict: "genuine",
      on: { answer: "in force" },
      licence: {
        origin: "brought in",
        term: { startsOn: "2026-02-20", lastUseAt: "2029-02-19T23:59:59.000Z" },
      },
    });
    expect((await getLicence(shop.approver, { number })).fee).toMatchObject({
      net: "1536.00",
      invoiceNumber: null,
    });
    expect(await offline(await getLicenceFile(shop.approver, { number }))).toMatchObject({ code: 0 });
    await expect(importLicence(shop.owner, brought(familyId, number))).rejects.toMatchObject({
      code: "conflict",
    });
    await expect(importLicence(shop.owner, brought(familyId, "LR-2026-0901-0"))).rejects.toMatchObject({
      code: "invalid",
    });
    expect((await licensed()).number).toMatch(/^LR-2026-0901-/);
  });

  test("an owner brings in licences of the own library only", async () => {
    const other = await makeShop();
    const { familyId } = await makeCue(other.libraryId);
    await expect(importLicence(shop.owner, brought(familyId, "LR-2026-0950"))).rejects.toMatchObject({
      code: "not_found",
    });
  });
});

describe("the published log", () => {
  test("LICENSING-7: every day has a signed root that names the day before, a record its proof, and closed days stay closed", async () => {
    const { number, page } = await licensed();
    const { day } = page.record.signing.log;
    const next = new Date(Date.parse(day) + 3 * 86_400_000).toISOString().slice(0, 10);
    await publishDays(system("tests"), { before: next });
    expect(await publishDays(system("tests"), { before: next })).toEqual({ days: 0 });
    const roots = await listRoots(ANONYMOUS, {});
    roots.forEach(({ root }, index) => {
      const before = roots[index - 1];
      if (before) expect(root.statement.previous?.day).toBe(before.day);
    });
    expect(roots.at(-1)?.leafSha256).toEqual([]);
    const file: LicenceFile = await getLicenceFile(shop.approver, { number });
    expect(file.inclusion?.root.statement.day).toBe(day);
    expect(await offline(file)).toMatchObject({ code: 0, answer: { verdict: "genuine" } });
    const moved = structuredClone(file) as unknown as { inclusion: { path: string[] } };
    moved.inclusion.path = [...moved.inclusion.path.slice(1), "00".repeat(32)];
    expect(await offline(moved)).toMatchObject({ code: 1, answer: { failing: ["inclusion"] } });
    const later = await licensed();
    expect(later.page.record.signing.log).toEqual({ day: next, position: 0 });
    await expect(db().delete(dayRoots)).rejects.toThrow();
  });
});

describe("a master", () => {
  test("LICENSING-11: goes to the licensee while the licence is in force, by a link that lapses, and is logged", async () => {
    const { number, head, bed, orderId, lineId } = await licensed(ONLINE);
    const other = await makeShop();
    await expect(linkToMaster(other.approver, { number, recordingId: head })).rejects.toMatchObject({
      code: "not_found",
    });
    const link = await linkToMaster(shop.proposer, { number, recordingId: bed });
    const token = link?.path.split("/").at(-1) ?? "";
    expect(await readMaster(ANONYMOUS, { token })).toMatchObject({
      fileKey: `master-${bed}`,
      fileName: expect.stringMatching(/bed\.wav$/),
    });
    await expect(
      readMaster(ANONYMOUS, { token: `${token.slice(0, -1)}${token.endsWith("0") ? "1" : "0"}` }),
    ).rejects.toMatchObject({
      code: "forbidden",
    });
    const logged = await db().select().from(masterDownloads).where(eq(masterDownloads.licenceNumber, number));
    expect(logged).toHaveLength(1);
    expect((await getLicence(shop.approver, { number })).downloads).toMatchObject([
      { recordingId: bed, person: expect.any(String) },
    ]);
    const { refundId } = await refundLines(shop.owner, { orderId, lineIds: [lineId], words: "Given back." });
    await sendRefund(refundId);
    const tomorrow = new Date("2026-05-20T09:00:00Z");
    await expect(
      withBusinessClock(tomorrow, () => linkToMaster(shop.proposer, { number, recordingId: head })),
    ).rejects.toMatchObject({ code: "precondition" });
  });

  test("a proof code has 80 random bits and its check character", async () => {
    const codes = await Promise.all([licensed(), licensed()]);
    for (const { page } of codes) expect(parseProofCode(page.proofCode).ok).toBe(true);
    expect(codes[0]?.page.proofCode).not.toBe(codes[1]?.page.proofCode);
  });
});
