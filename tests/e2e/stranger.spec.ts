import { execFileSync, spawnSync } from "node:child_process";
import { mkdirSync, readFileSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import type { Page } from "@playwright/test";
import { expect, expectAccessible, test } from "./support";

/** A delivery clerk without an account checks a record that somebody gave her, and keeps the means to do so without us. */
test.describe.configure({ mode: "serial" });

let proof = "";
let folder = "";

test.beforeAll(() => {
  folder = join(test.info().project.outputDir, ".checked");
  mkdirSync(folder, { recursive: true });
});

/** The code on the record, as its licensee reads it out. */
async function readProofCode(page: Page): Promise<string> {
  await page.goto("/records");
  await page
    .getByRole("main")
    .getByRole("link", { name: /^LR-2026-0103/ })
    .click();
  await expect(page.getByRole("heading", { level: 1 })).toHaveText(
    /use Peat Smoke and Ladders in Tide Tables/,
  );
  const words =
    (await page
      .getByText(/^Proof code .*-/)
      .first()
      .textContent()) ?? "";
  return /[2-9A-HJ-NP-Z]{4}(-[2-9A-HJ-NP-Z]{4}){3}-[2-9A-HJ-NP-Z]/.exec(words)?.[0] ?? "";
}

async function download(page: Page, name: string, from: string | RegExp): Promise<string> {
  const started = page.waitForEvent("download");
  await page.getByRole("link", { name: from }).first().click();
  const path = join(folder, name);
  await (await started).saveAs(path);
  return path;
}

async function dropFile(page: Page, path: string): Promise<void> {
  const picker = page.waitForEvent("filechooser");
  await page.getByRole("button", { name: "Choose a file" }).first().click();
  await (await picker).setFiles(path);
}

test("one wrong letter is caught before anything is looked up", async ({ open }) => {
  proof = await readProofCode(await open("noor"));
  expect(proof).toMatch(/./);
  const page = await open(null);
  await page.goto("/check");
  const asked: string[] = [];
  page.on("request", (request) => {
    if (/\/check\/|\/api\/check/.test(request.url())) asked.push(request.url());
  });
  const last = proof.at(-1) === "7" ? "8" : "7";
  await page
    .getByLabel("Proof code")
    .fill(`${proof.slice(0, 2)}${proof[2] === "K" ? "M" : "K"}${proof.slice(3)}`);
  await page.keyboard.press("Enter");
  await expect(page.getByLabel("Proof code")).toHaveAttribute("aria-invalid", "true");
  await expect(page.getByLabel("Proof code")).toHaveAccessibleDescription(/check/i);
  await page.getByLabel("Proof code").fill(proof.slice(0, -1) + last);
  await page.keyboard.press("Enter");
  await expect(page.getByLabel("Proof code")).toHaveAccessibleDescription(/check/i);
  await page.getByLabel("Proof code").fill("LR-2026-0103");
  await page.keyboard.press("Enter");
  await expect(page.getByLabel("Proof code")).toHaveAttribute("aria-invalid", "true");
  expect(asked).toEqual([]);
});

test("the right code: genuine, in force, for what, and what is never included", async ({ open }) => {
  const page = await open(null);
  await page.goto("/check");
  await page.getByLabel("Proof code").fill(proof.toLowerCase().replaceAll("-", " "));
  await page.keyboard.press("Enter");
  const heading = page.getByRole("heading", { level: 1 });
  await expect(heading).toContainText("This licence is genuine.");
  await expect(heading).toContainText("It is in force today.");
  const main = page.getByRole("main");
  await expect(main).toContainText("Thistlemoth Pictures");
  await expect(main).toContainText("Tide Tables");
  await expect(main).toContainText("Peat Smoke and Ladders");
  await expect(main).toContainText(/United Kingdom and Ireland/);
  await expect(main).not.toContainText(/1,?536/);
  await expectAccessible(page);
  const not = page
    .getByRole("heading", { name: "What it does not include" })
    .locator("xpath=ancestor::section[1]");
  await expect(not).toContainText(/[Pp]ublic performance/);
  await expect(not).toContainText(/society/);
  await page.getByLabel("Ask about another day").fill("2026-03-20");
  await page.getByRole("button", { name: "Ask about this day" }).click();
  await expect(heading).toContainText("It was in force on 20 March 2026, and it is in force today.");
  await page.getByLabel("Ask about another day").fill("2026-02-19");
  await page.getByRole("button", { name: "Ask about this day" }).click();
  await expect(heading).toContainText("It was not in force on 19 February 2026");
});

test("a dropped record: genuine; with one digit of its price changed: altered, and which part", async ({
  open,
}) => {
  const noor = await open("noor");
  await readProofCode(noor);
  const path = await download(noor, "record.json", "The same, signed, as JSON");
  const page = await open(null);
  await page.goto("/check");
  await dropFile(page, path);
  await expect(page.getByText(/^record\.json is genuine: licence LR-2026-0103/)).toBeVisible();
  const text = readFileSync(path, "utf8");
  const altered = text.replaceAll("1536.00", "1537.00");
  expect(altered).not.toBe(text);
  const alteredPath = join(folder, "altered.json");
  writeFileSync(alteredPath, altered);
  await dropFile(page, alteredPath);
  await expect(page.getByText(/^altered\.json: .*(altered|does not verify|changed)/i)).toBeVisible();
  await expect(page.getByText(/^altered\.json: .*fee/i)).toBeVisible();
});

test("the verifier and the published keys say the same without the site", async ({ open }) => {
  const page = await open(null);
  await page.goto(`/check/${proof.replaceAll("-", "")}`);
  await download(page, "public.json", "Download the signed record");
  const verifier = await download(page, "sedgewren-verify.mjs", "verifier");
  const keys = await download(page, "sedgewren-keys.json", "list of public keys");
  const run = (file: string, ...more: string[]): { code: number; words: string } => {
    // Of the environment only PATH: what it says must not depend on anything of ours.
    const env = { PATH: process.env.PATH ?? "", NODE_ENV: "production" } as const;
    const { status, stdout } = spawnSync(process.execPath, [verifier, file, keys, ...more], {
      cwd: folder,
      env,
      encoding: "utf8",
    });
    return { code: status ?? -1, words: stdout };
  };
  const genuine = run("record.json", "--on", "2026-03-20");
  expect(genuine.code).toBe(0);
  expect(genuine.words).toMatch(/genuine/i);
  expect(genuine.words).toMatch(/in force/i);
  expect(run("public.json").words).toMatch(/genuine/i);
  const altered = run("altered.json");
  expect(altered.code).toBe(1);
  expect(altered.words).toMatch(/altered/i);
  expect(altered.words).toMatch(/fee/i);
});

// Not seen to pass since the question about another day is left off paper.
test.fixme("the answer prints on paper whole, every fact of it in words", async ({ open }) => {
  const page = await open(null);
  await page.goto(`/check/${proof.replaceAll("-", "")}`);
  await expect(page.getByRole("heading", { level: 1 })).toContainText("This licence is genuine.");
  const path = join(folder, "printed.pdf");
  writeFileSync(path, await page.pdf({ format: "A4" }));
  const words = execFileSync("pdftotext", ["-layout", path, "-"]).toString().replace(/\s+/g, " ");
  for (const part of [
    "This licence is genuine. It is in force today.",
    "Thistlemoth Pictures",
    "Peat Smoke and Ladders",
    "What it allows",
    "What it does not include",
    "What has happened to it",
  ])
    expect(words).toContain(part);
  for (const control of ["Ask about this day", "Ask about another day"]) expect(words).not.toContain(control);
});
