import type { Page } from "@playwright/test";
import { expect, expectAccessible, mailTo, type Person, press, tabTo, test, type } from "./support";

/** P-01 from the queue to the letter: Ingrid steps back, Ruan decides, Solveig of the marketplace confirms. */
test.describe.configure({ mode: "serial" });

const TITLE = "Window Salt (final)";
const REASONS =
  "From 0.8 seconds on, the whole of the delivery is the listed recording, note for note and breath for breath. It was made louder by 1.5 dB and shows the edge of a lossy encoding.";
const WORDS_OF_SECOND =
  "I listened to both at the same instant, and to what differs between them. Only the artefacts of an encoding are left.";
const PARTIES = /Rufus|Stannage|Trevarrick|Harrowgill/;

async function openCase(page: Page, title: string): Promise<void> {
  await page.goto("/cases");
  await page.getByRole("main").getByRole("link", { name: title }).click();
  await expect(page).toHaveURL(/\/cases\/cas_/);
  await expect(page.getByRole("heading", { level: 1 })).toContainText(title);
}

async function inSeconds(page: Page, column: "in A" | "in B"): Promise<{ from: number; to: number }> {
  const table = page.getByRole("table", { name: "Passages" });
  const heads = await table.getByRole("columnheader").allTextContents();
  const cell = table.getByRole("row").nth(1).getByRole("cell").nth(heads.indexOf(column));
  const [from = 0, to = 0] = ((await cell.textContent()) ?? "").split("–").map((time) => {
    const [minutes = "0", seconds = "0"] = time.split(":");
    return Number(minutes) * 60 + Number(seconds);
  });
  return { from, to };
}

const asideOf = (page: Page) => page.getByRole("complementary", { name: "What do you find?" });

test("the queue is by deadline, with its kinds in words", async ({ open }) => {
  const page = await open("solveig");
  await page.goto("/cases");
  await expect(page.getByRole("heading", { level: 2, name: "By deadline" })).toBeVisible();
  const rows = page.getByRole("main").getByRole("listitem");
  await expect(rows.filter({ hasText: "Ring Road Runner" })).toContainText("looks like altered copy.");
  await expect(rows.filter({ hasText: "Rain Ledger Beat" })).toContainText("looks like shared material.");
  await expect(rows.filter({ hasText: "Badge Scan Boogie" })).toHaveCount(0);
  const due = await rows.getByText(/First look due/).allTextContents();
  const times = due.map((words) => Date.parse(/due (.+), /.exec(words)?.[1] ?? ""));
  expect(times).toEqual([...times].sort((a, b) => a - b));
});

test("a moderator with a conflict declares it, and the case is not theirs any more", async ({ open }) => {
  const page = await open("ingrid");
  await openCase(page, TITLE);
  const aside = asideOf(page);
  await aside.getByText("I know one of the people").click();
  await aside
    .getByLabel("What the conflict is")
    .fill("Celandine Harrowgill, a writer of the other side, is my cousin.");
  await aside.getByRole("button", { name: "Declare it and step back" }).click();
  await expect(
    aside.getByText("You declared a conflict of interest here. Somebody else decides this case."),
  ).toBeVisible();
  await expect(aside.getByRole("button", { name: "Take this case" })).toHaveCount(0);
});

test("the measured facts come before the names, and the times are there as a table", async ({ open }) => {
  const page = await open("ruan");
  await openCase(page, TITLE);
  await expect(page.getByRole("heading", { level: 1 })).toHaveText(/it looks like the same recording\.$/);
  await expect(page.getByRole("main")).not.toHaveText(PARTIES);
  const a = await inSeconds(page, "in A");
  const b = await inSeconds(page, "in B");
  expect(Math.abs(a.from - b.from - 0.8)).toBeLessThan(0.11);
  expect(Math.abs(a.to - a.from - (b.to - b.from))).toBeLessThan(0.11);
  const row = page.getByRole("table", { name: "Passages" }).getByRole("row").nth(1);
  await expect(row).toContainText("1.000");
  await expect(row).toContainText("0.00");
  const together = /Together (\d+).% of A and (\d+).% of B/.exec(
    (await page.getByText(/^Together/).textContent()) ?? "",
  );
  expect(Number(together?.[1])).toBeGreaterThanOrEqual(97);
  expect(Number(together?.[2])).toBeGreaterThanOrEqual(97);
  const residual = /What differs is (\d+).dB below A/.exec(
    (await page.getByText(/What differs is/).textContent()) ?? "",
  );
  expect(Number(residual?.[1])).toBeGreaterThanOrEqual(15);
  await expect(page.getByText(/It is not a finding of infringement or of originality/)).toBeVisible();

  const phone = await open("ruan", { width: 390, height: 844 });
  await phone.goto(page.url());
  await expect(phone.getByText(/A from 0:0\d\.\d equals B from 0:0\d\.\d for [\d.]+.s/)).toBeVisible();
});

test("A, B, both and what differs, by keys alone: one file, one clock, no seek", async ({ open }) => {
  const page = await open("ruan");
  await page.addInitScript(() => {
    const counted = window as unknown as { heard: HTMLAudioElement[]; seeks: number };
    counted.heard = [];
    counted.seeks = 0;
    const { play } = HTMLMediaElement.prototype;
    HTMLMediaElement.prototype.play = function remember() {
      if (!counted.heard.includes(this as HTMLAudioElement)) {
        counted.heard.push(this as HTMLAudioElement);
        this.addEventListener("seeking", () => {
          counted.seeks += 1;
        });
      }
      return play.call(this);
    };
  });
  await openCase(page, TITLE);
  const said = page.getByText(/^(Playing|Stopped; ready to play) /);
  await expect(page.getByRole("slider", { name: "Level" })).toHaveValue("0.4");
  await page.keyboard.press("1");
  await expect(said).toHaveText(/ready to play A, the delivery/);
  await page.keyboard.press("Space");
  await expect(said).toHaveText(/^Playing A, the delivery/);
  const positionS = () =>
    page.evaluate(() => (window as unknown as { heard: HTMLAudioElement[] }).heard[0]?.currentTime ?? 0);
  await expect.poll(positionS).toBeGreaterThan(0.2);
  let last = await positionS();
  for (const [key, words] of [
    ["2", "B, the reference"],
    ["3", "B, the reference"],
    ["3", "A, the delivery"],
    ["4", "A left, B right"],
    ["5", "what differs"],
  ] as const) {
    await page.keyboard.press(key);
    await expect(said).toHaveText(new RegExp(`^Playing ${words}`));
    await expect.poll(positionS).toBeGreaterThan(last);
    last = await positionS();
  }
  await page.keyboard.press("Space");
  await expect(said).toHaveText(/^Stopped/);
  const { heard, seeks } = await page.evaluate(() => {
    const counted = window as unknown as { heard: HTMLAudioElement[]; seeks: number };
    return { heard: counted.heard.map((audio) => audio.currentSrc), seeks: counted.seeks };
  });
  expect(heard).toHaveLength(1);
  expect(heard[0]).toContain("/api/listening/");
  expect(seeks).toBe(0);
});

test("a refusal needs two sentences, a code and a second person", async ({ open }) => {
  test.setTimeout(180_000);
  const page = await open("ruan");
  await openCase(page, TITLE);
  const aside = asideOf(page);
  await press(page, aside.getByRole("button", { name: "Take this case" }));
  await expect(page.getByText(/You hold this case\./)).toBeVisible();
  await press(page, page.getByRole("button", { name: "Open the papers" }));
  await expect(page.getByText(/delivered by Rufus Stannage-Pell to Saltmarrow Music Library/)).toBeVisible();

  await tabTo(page, aside.getByRole("radio").first());
  const refuse = aside.getByRole("radio", { name: /^Cannot be listed/ });
  for (let presses = 0; presses < 6 && !(await refuse.isChecked()); presses += 1)
    await page.keyboard.press("ArrowDown");
  await expect(refuse).toBeChecked();
  const find = aside.locator("form").getByRole("button").last();
  await press(page, find);
  await expect(aside.getByText(/sentences/).first()).toBeVisible();
  await expect(page.getByText(/waits for a second person/)).toHaveCount(0);
  await expectAccessible(page);

  await type(page, aside.getByLabel("Your reasons, as the deliverer will read them"), "It is the same.");
  await press(page, find);
  await expect(aside.locator("[aria-invalid=true]").first()).toBeVisible();

  await expect(aside.getByLabel("Code")).toHaveValue("R01");
  await type(page, aside.getByLabel("Your reasons, as the deliverer will read them"), REASONS);
  const yes = aside.getByRole("radio", { name: /^Yes/ });
  await tabTo(
    page,
    aside
      .getByRole("group", { name: /knowing or reckless/ })
      .getByRole("radio")
      .first(),
  );
  await page.keyboard.press("ArrowDown");
  await expect(yes).toBeChecked();
  await type(
    page,
    aside.getByLabel("Knowing or reckless, because"),
    "The silence in front and the new title hide a listed recording.",
  );
  for (const box of await aside
    .getByRole("group", { name: "Innocent explanations you considered" })
    .getByRole("checkbox")
    .all())
    await press(page, box, "Space");
  await press(page, find);
  await expect(
    aside.getByText("Your refusal waits for a second person. Nothing has been sent yet."),
  ).toBeVisible();
});

test("who declared a conflict may not be the second person", async ({ open }) => {
  const page = await open("ingrid");
  await openCase(page, TITLE);
  await expect(asideOf(page).getByText(/You declared a conflict of interest here/)).toBeVisible();
  await expect(page.getByRole("button", { name: /^Confirm/ })).toHaveCount(0);
});

test("the marketplace's moderator confirms; the letter has every part, and the finding stands on the record", async ({
  open,
}) => {
  test.setTimeout(180_000);
  const page = await open("solveig");
  await openCase(page, TITLE);
  const aside = asideOf(page);
  await aside.getByLabel("What you heard and read").fill(WORDS_OF_SECOND);
  await aside.getByRole("button", { name: "Confirm: it cannot be listed" }).click();
  await expect(page).toHaveURL(/\/cases$/);

  // The parts of a statement of reasons: Regulation (EU) 2022/2065, Article 17(3)(a) to (f).
  const mail = await mailTo("rufus@stannagepell.example", /Window Salt \(final\).*cannot be listed/);
  const text = (mail.text ?? "").replace(/\s+/g, " ");
  for (const part of [
    /cannot be listed/i,
    /What we did/i,
    /Where/,
    /Since/,
    /What we relied on/i,
    /Software pointed us to it; a person decided/,
    /The rule:/,
    /If you disagree/i,
    /appeal free of charge/,
    /out-of-court dispute body/,
    /to a court/,
  ])
    expect(text).toMatch(part);
  expect(text).toContain(REASONS);
  await refusedPage(await open("morag"), "morag");

  await openCase(page, "Ring Road Runner");
  await page.getByRole("button", { name: "Open the papers" }).click();
  await expect(page.getByText(/one upheld finding on the deliverer's record/i)).toBeVisible();
});

async function refusedPage(page: Page, _person: Person): Promise<void> {
  await page.goto("/deliveries");
  await page.getByRole("main").getByRole("link", { name: TITLE }).click();
  await expect(page.getByText("It cannot be listed.")).toBeVisible();
  await expect(
    page.getByText(/by a moderator, confirmed by a second person who had no part in it/),
  ).toBeVisible();
}

test("a copy with its tempo and pitch changed says both ratios, and can be heard with them undone", async ({
  open,
}) => {
  const page = await open("solveig");
  await openCase(page, "Ring Road Runner");
  await expect(page.getByRole("heading", { level: 1 })).toHaveText(/2.semitones up and 3.% faster/);
  const row = page.getByRole("table", { name: "Passages" }).getByRole("row").nth(1);
  await expect(row).toContainText(/1\.0(29|30|31)/);
  await expect(row).toContainText(/\+(1\.9\d|2\.0\d)/);
  await expect(page.getByRole("button", { name: /What differs in the spectra/ })).toBeVisible();
});
