import "@/tests/support/database";
import { mkdtempSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, expect, test } from "vitest";
import { sampleRateHz, writeWav } from "@/fixtures/audio";
import { measureFile, packContour, technicalChecks } from "@/lib/audio";
import { fileArrived, getDelivery, recordMeasurement, setVersion, startDelivery } from "@/lib/deliveries";
import { system } from "@/lib/kernel/actor";
import { makeLibrary } from "@/tests/support/make";
import { composerOf, freshTitle, makeWriter } from "@/tests/support/make-delivery";

const folder = mkdtempSync(join(tmpdir(), "sedgewren-deliveries-"));
afterAll(() => rmSync(folder, { recursive: true, force: true }));
const worker = system("tests");

/** A struck chord that rings out, every three seconds; the last one well before the end. */
function thirty(seconds: number): string {
  const path = join(folder, `${seconds}.wav`);
  const frames = Math.round(seconds * sampleRateHz);
  const channel = Float32Array.from({ length: frames }, (_, index) => {
    const atS = index / sampleRateHz;
    const sinceHitS = Math.min(atS % 3, atS > 27 ? atS - 24 : 3);
    const fade = Math.min(1, (seconds - atS) / 0.4);
    return (
      0.3 *
      Math.min(1, sinceHitS * 200) *
      Math.exp(-2.4 * sinceHitS) *
      fade *
      Math.sin(2 * Math.PI * 220 * atS)
    );
  });
  writeWav(path, { sampleRateHz, channels: [channel, Float32Array.from(channel, (value) => value * 0.9)] });
  return path;
}

/** What the worker does with a file that has arrived, without its thread. */
async function measure(versionId: string, path: string, versionRole: string): Promise<void> {
  const { facts, measures, contour } = await measureFile(path, {});
  await recordMeasurement(worker, {
    versionId,
    sha256: versionId.padEnd(64, "0").replaceAll("_", "0").slice(0, 64),
    facts: JSON.parse(JSON.stringify(facts)) as Record<string, unknown>,
    measures: JSON.parse(JSON.stringify(measures)) as Record<string, unknown>,
    contour: packContour(contour),
    checks: technicalChecks(facts, measures, { versionRole, endingDeclared: "ring-out" }).map((check) => ({
      ...check,
    })),
  });
}

/** Common practice: an advert's slot is exact, within 0.05 s. */
test("a 30 of 30.4 s gets T03 with measured length, limit and remedy; the right file in its place passes", async () => {
  const libraryId = await makeLibrary();
  const writer = await makeWriter(libraryId, "99900000158");
  const actor = composerOf(libraryId, writer);
  const { deliveryId } = await startDelivery(actor, { title: freshTitle() });
  const arrive = (key: string, replaces: string | null) =>
    fileArrived(worker, {
      deliveryId,
      personId: writer.id,
      key: `${key}-${deliveryId}`,
      name: "Lantern_30.wav",
      sizeBytes: 1,
      replaces,
    });
  const { versionId } = await arrive("long", null);
  await measure(versionId, thirty(30.4), "30");
  const long = (await getDelivery(actor, { deliveryId })).versions[0];
  expect(long).toMatchObject({ versionRole: "30", state: "returned" });
  expect(long?.words).toContain("T03");
  expect(long?.checks?.find((check) => check.check === "length")).toMatchObject({
    code: "T03",
    verdict: "return",
    measured: "30.40\u00a0s",
    limit: "29.95\u00a0s to 30.05\u00a0s",
    remedy: "Shorten the file by 0.40\u00a0s to 30.00\u00a0s.",
  });
  const { versionId: right } = await arrive("right", versionId);
  await measure(right, thirty(30), "30");
  const mended = (await getDelivery(actor, { deliveryId })).versions;
  expect(mended.map((version) => [version.id, version.versionRole, version.state])).toEqual([
    [right, "30", "measured"],
  ]);
  await setVersion(actor, { deliveryId, versionId: right, versionRole: "bed" });
  expect((await getDelivery(actor, { deliveryId })).versions[0]?.versionRole).toBe("bed");
});
