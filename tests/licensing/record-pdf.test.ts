import "@/tests/support/database";
import { execFileSync } from "node:child_process";
import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, beforeAll, expect, test } from "vitest";
import { renderRecordPdf } from "@/components/licensing/pdf/record-pdf";
import { getLicence, getOrder, type LicencePage } from "@/lib/licensing";
import { makeCue, makeShop, openTill, PROGRAMME, paid, type Till } from "./shop";

let till: Till;
let page: LicencePage;
beforeAll(async () => {
  till = await openTill();
  const shop = await makeShop();
  const { familyId } = await makeCue(shop.libraryId);
  const orderId = await paid(shop, till, [{ familyId, use: PROGRAMME }]);
  const [line] = (await getOrder(shop.approver, { orderId })).lines;
  page = await getLicence(shop.approver, { number: line?.licenceNumber ?? "" });
});
afterAll(() => till.close());

/** The text of a PDF as another program reads it (Poppler's pdftotext); the test is left out where that is not installed. */
function textOf(pdf: Buffer): string | null {
  const folder = mkdtempSync(join(tmpdir(), "sedgewren-pdf-"));
  try {
    writeFileSync(join(folder, "record.pdf"), pdf);
    return execFileSync("pdftotext", ["-layout", "record.pdf", "-"], { cwd: folder, encoding: "utf8" });
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code === "ENOENT") return null;
    throw error;
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

test("the record on paper is a PDF with the site's own typefaces embedded", async () => {
  const titled = structuredClone(page);
  titled.record.cue.title = "Łódź <b>Ring</b>";
  const pdf = await renderRecordPdf(titled);
  expect(pdf.subarray(0, 5).toString()).toBe("%PDF-");
  const raw = pdf.toString("latin1");
  expect(raw).toMatch(/Commissioner/);
  expect(raw).toMatch(/Piazzolla/);
  // A typeface that is not embedded stands in a PDF without a font file beside its descriptor.
  expect(raw).not.toMatch(/\/Type1\b/);
}, 60_000);

test("another program reads its text: number, parties, scope, what is not included, terms, signature", async (context) => {
  const text = textOf(await renderRecordPdf(page))?.replace(/\s+/g, " ");
  if (!text) return context.skip();
  for (const words of [
    page.record.number,
    page.proofCode,
    page.licensee.name,
    "Harbour Mornings",
    "United Kingdom and Ireland",
    "Public performance",
    "absence of a match is not clearance",
    "The grant.",
    page.record.signing.keyId,
    "GBP 240.00 net",
  ])
    expect(text).toContain(words);
}, 60_000);
