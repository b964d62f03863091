import { mkdirSync } from "node:fs";
import { join } from "node:path";
import type { Locator, Page } from "@playwright/test";
import { renderLanternSteps, writeWav } from "@/fixtures/audio";
import {
  choose,
  expect,
  expectAccessible,
  FILES_URL,
  mailTo,
  PEOPLE,
  pickFiles,
  press,
  signIn,
  tabTo,
  test,
  type,
} from "./support";

/*
 * A composer delivers one family with the keyboard alone; its co-writer accepts, its library takes it in, and a stranger
 * hears it. Each test goes on from the one before.
 */
test.describe.configure({ mode: "serial" });

const DESCRIPTION =
  "Plucked guitar climbs by steps over a slow drum, rests on each landing and turns back down.";
const files: Record<"full" | "bed" | "30" | "30 too long", string> = {
  full: "lantern-steps_full.wav",
  bed: "lantern-steps_bed.wav",
  "30": "lantern-steps_30.wav",
  "30 too long": "lantern-steps_cutdown_30.wav",
};
const pathOf = (role: keyof typeof files) => files[role];
let address = "";

test.beforeAll(() => {
  const folder = join(test.info().project.outputDir, ".lantern-steps");
  mkdirSync(folder, { recursive: true });
  for (const role of ["full", "bed", "30", "30 too long"] as const) {
    const path = join(folder, files[role]);
    writeWav(path, renderLanternSteps(role, { seconds: 60 }));
    files[role] = path;
  }
});

test.beforeEach(({ guard }) => guard.allowOrigin(FILES_URL));

const versionRow = (page: Page, fileName: string): Locator =>
  page.getByRole("main").getByRole("listitem", { name: fileName });

async function goToStep(page: Page, words: string): Promise<void> {
  await press(
    page,
    page.getByRole("navigation", { name: "Steps of this delivery" }).getByRole("button", { name: words }),
  );
  await expect(
    page.getByRole("heading", { level: 2, name: new RegExp(`^Step \\d of 5: ${words}$`) }),
  ).toBeFocused();
}

test("delivers three files by keyboard, and has one of them put right", async ({ open }) => {
  test.setTimeout(300_000);
  const page = await open(null);
  await page.addInitScript(() => {
    const counted = window as unknown as { plays: number };
    counted.plays = 0;
    const { play } = HTMLMediaElement.prototype;
    HTMLMediaElement.prototype.play = function count() {
      counted.plays += 1;
      return play.call(this);
    };
  });

  await test.step("sign in, open Deliver: the heading is read first, and no sound starts", async () => {
    await signIn(page, PEOPLE.ailsa);
    await expect(page).toHaveURL(/\/deliveries$/);
    await press(page, page.getByRole("link", { name: "Deliver a family" }));
    await expect(page.getByRole("heading", { level: 1, name: /^A family is one work/ })).toBeFocused();
    await type(page, page.getByLabel("Title"), "Lantern Steps");
    await page.keyboard.press("Enter");
    await expect(page).toHaveURL(/\/deliveries\/del_/);
    await expect(page.getByRole("heading", { level: 2, name: "Step 1 of 5: Files" })).toBeVisible();
    await expect(page.locator("[aria-current=step]")).toHaveText(/^Files, not complete yet$/);
  });
  address = new URL(page.url()).pathname;

  await test.step("three files at once: roles guessed from their names, each read back", async () => {
    await pickFiles(page, page.getByRole("button", { name: "Add files" }), [
      pathOf("full"),
      pathOf("bed"),
      pathOf("30 too long"),
    ]);
    await expect(page.getByText(/files? (on the way|arrived)/).first()).toBeAttached();
    for (const [name, role, length] of [
      ["_full.wav", "full", "1:00"],
      ["_bed.wav", "bed", "1:00"],
      ["_cutdown_30.wav", "30", "30.40 s"],
    ] as const) {
      const row = versionRow(page, name);
      await expect(row.getByLabel("What it is")).toHaveValue(role, { timeout: 120_000 });
      await expect(
        row.getByText(
          new RegExp(
            `^${length.replace(" ", "\\s")}, .*48\\skHz, 24\\sbit, stereo, −[\\d.]+\\sLUFS, peak −[\\d.]+\\sdBTP$`,
          ),
        ),
      ).toBeVisible({ timeout: 120_000 });
    }
  });

  await test.step("a 30 of 30.4 s comes back with what was measured, the limit and a remedy", async () => {
    const row = versionRow(page, "_cutdown_30.wav");
    await expect(row.getByText(/^T03: /)).toBeVisible();
    await expect(row.getByText(/^Measured 30\.40.s; the limit: 29\.95.s to 30\.05.s\./)).toBeVisible();
    await expect(row.getByText(/The other files and all you wrote are kept\.$/)).toBeVisible();
    await expect(versionRow(page, "_full.wav").getByText(/passes the checks/)).toBeVisible();
    await expect(versionRow(page, "_bed.wav").getByText(/passes the checks/)).toBeVisible();
    await expectAccessible(page);
  });

  await test.step("roles can be changed, and exactly one version is the full mix", async () => {
    const needed = page.getByRole("complementary").getByRole("list", { name: "Still needed" });
    const role = versionRow(page, "_bed.wav").getByLabel("What it is");
    await choose(page, role, "full");
    await expect(needed).toContainText("only one version can be the full mix");
    await choose(page, role, "bed");
    await expect(needed).not.toContainText("only one version can be the full mix");
  });

  await test.step("the music", async () => {
    await goToStep(page, "The music");
    await type(page, page.getByLabel("Tempo in beats a minute"), "92");
    await choose(page, page.getByLabel("Genre"), "acoustic folk");
    await choose(page, page.getByLabel("How it ends"), "button");
    await choose(page, page.getByLabel("Shape"), "builds");
    await choose(page, page.getByLabel("How full it is"), "sparse");
    await type(page, page.getByLabel("Description"), DESCRIPTION);
    for (const [legend, name] of [
      ["Moods", "calm"],
      ["Moods", "hopeful"],
      ["Instruments", "acoustic guitar"],
    ] as const)
      await press(page, page.getByRole("group", { name: legend }).getByLabel(name, { exact: true }), "Space");
    await expectAccessible(page);
    await press(page, page.getByRole("button", { name: "Go on to writers" }));
    await expect(page.getByRole("heading", { level: 2, name: "Step 3 of 5: Writers" })).toBeFocused();
  });

  await test.step("the 30 is replaced: only it is measured again, and every answer is kept", async () => {
    await goToStep(page, "Files");
    const readBack = versionRow(page, "_full.wav").getByText(/^1:00, /);
    const full = await readBack.textContent();
    await pickFiles(page, page.getByRole("button", { name: "Replace the 30" }), pathOf("30"));
    const row = versionRow(page, "steps_30.wav");
    await expect(row.getByText(/passes the checks/)).toBeVisible({ timeout: 120_000 });
    await expect(row.getByText(/^30\.00.s, /)).toBeVisible();
    await expect(row.getByLabel("What it is")).toHaveValue("30");
    await expect(readBack).toHaveText(full ?? "");
    await expect(versionRow(page, "_full.wav").getByText(/passes the checks/)).toBeVisible();
    await page.reload();
    await goToStep(page, "The music");
    await expect(page.getByLabel("Description")).toHaveValue(DESCRIPTION);
    await expect(page.getByLabel("Tempo in beats a minute")).toHaveValue("92");
    await expect(page.getByRole("group", { name: "Moods" }).getByLabel("hopeful")).toBeChecked();
  });

  await test.step("shares of 99.99 stop here (M01); an IPI with a wrong check digit is told the right one", async () => {
    await goToStep(page, "Writers");
    const writer = (number: number) => page.getByRole("group", { name: `Writer ${number}` });
    if ((await writer(1).count()) === 0)
      await press(page, page.getByRole("button", { name: "Add a writer" }));
    await press(page, page.getByRole("button", { name: "Add a writer" }));
    await type(page, writer(1).getByLabel("Name", { exact: true }), "Ailsa Trevarrick-Moe");
    await type(page, writer(1).getByLabel("E-mail address"), PEOPLE.ailsa);
    await type(page, writer(1).getByLabel("IPI name number"), "99900000159");
    await type(page, writer(1).getByLabel("Share, %"), "60.00");
    await type(page, writer(2).getByLabel("Name", { exact: true }), "Celandine Harrowgill");
    await type(page, writer(2).getByLabel("E-mail address"), PEOPLE.celandine);
    await type(page, writer(2).getByLabel("IPI name number"), "99900000354");
    await type(page, writer(2).getByLabel("Share, %"), "39.99");
    await expect(writer(1).getByText(/check digits.*did you mean 99900000158\?/i)).toBeVisible();
    await expect(page.getByText("Together they make 99.99, missing 0.01.")).toBeVisible();
    await expect(page.getByText(/Correct a share to go on.*\(M01\)/)).toBeVisible();
    await press(page, page.getByRole("button", { name: "Go on to declarations" }));
    await expect(page.getByRole("heading", { level: 2, name: /^Step 3 of 5: Writers$/ })).toBeVisible();
    await expectAccessible(page);
    await press(page, page.getByRole("button", { name: "Use 99900000158" }));
    await expect(writer(1).getByLabel("IPI name number")).toHaveValue("99900000158");
    await type(page, writer(2).getByLabel("Share, %"), "40.00");
    await expect(page.getByText("Together they make 100.00.")).toBeVisible();
    await press(page, page.getByRole("button", { name: "Go on to declarations" }));
  });

  await test.step("declarations and signature; the co-writer is asked", async () => {
    await expect(page.getByRole("heading", { level: 2, name: /Declarations$/ })).toBeFocused();
    await press(page, page.getByLabel(/^I wrote this music/), "Space");
    await type(page, page.getByLabel("Who owns the master"), "Ailsa Trevarrick-Moe");
    await press(page, page.getByLabel("I performed all of it."), "Space");
    await expectAccessible(page);
    const signed = page.getByLabel("Your name, as signature");
    await expect(page.getByText("Everything that is needed is here.")).toBeVisible();
    await press(page, page.getByLabel(/^All of this is true/), "Space");
    await type(page, signed, "Ailsa Trevarrick-Moe");
    await press(page, page.getByRole("button", { name: "Sign and deliver" }));
    await expect(page.getByRole("heading", { level: 2, name: "Waiting on your co-writer" })).toBeVisible({
      timeout: 60_000,
    });
    await expect(page.getByText(/name confirmed by the library; asked .*, may answer until/)).toBeVisible();
    const mail = await mailTo(PEOPLE.celandine, /Lantern Steps/);
    expect(mail.text).toContain("40.00");
    const receipt = await mailTo(
      PEOPLE.ailsa,
      /Lantern Steps.*(delivered|received)|(Received|Receipt|delivered).*Lantern Steps/i,
    );
    expect(receipt.text).toMatch(/[0-9a-f]{64}/);
  });
  expect(await page.evaluate(() => (window as unknown as { plays: number }).plays)).toBe(0);
});

test("watches the screening end, and hears how each version came out", async ({ open }) => {
  test.setTimeout(240_000);
  const page = await open("ailsa");
  await page.goto(address);
  const versions = page.getByRole("list", { name: "Versions" });
  await expect(page.getByRole("heading", { level: 1 })).toContainText("Screened and clear.", {
    timeout: 180_000,
  });
  // Whichever of them was compared first had no family in the index yet.
  for (const name of ["Full", "Bed", "30"])
    await expect(
      versions.getByText(
        new RegExp(
          `^${name}: (?:nothing in common was found with|it matches its own family, as a version should)`,
        ),
      ),
    ).toBeVisible();
  await versions.getByText("Show its screening certificate").first().click();
  await expect(
    versions.getByText(/is not a finding of infringement or of originality/).first(),
  ).toBeVisible();
  await expectAccessible(page);
  await expect(page.getByText("Waiting on your co-writer")).toBeVisible();
});

test("the same file again comes back as what it is, without blame", async ({ open }) => {
  const page = await open("ailsa");
  await page.goto("/deliver");
  await page.getByLabel("Title").fill("Lantern Steps again");
  await page.getByRole("button", { name: "Start the delivery" }).click();
  await expect(page).toHaveURL(/\/deliveries\/del_/);
  await pickFiles(page, page.getByRole("button", { name: "Add files" }), pathOf("full"));
  await expect(page.getByText(/^You already delivered this as .?Lantern Steps/)).toBeVisible({
    timeout: 120_000,
  });
  await expect(page.getByRole("list", { name: "Still needed" })).toContainText(
    "must be replaced or taken out",
  );
  await page.getByRole("button", { name: /^Take it out: / }).click();
  await expect(page.getByText(/^You already delivered this/)).toHaveCount(0);
});

test("the co-writer accepts, the library takes it in, and anybody can play it", async ({ open }) => {
  test.setTimeout(240_000);
  const celandine = await open("celandine");
  await celandine.goto("/deliveries");
  await expect(celandine.getByText(/Ailsa Trevarrick-Moe names you with 40\.00 % of/)).toBeVisible();
  await celandine.goto(address);
  await celandine.getByRole("button", { name: "Accept these shares" }).click();
  await expect(celandine.getByRole("heading", { level: 2, name: "Every writer has accepted" })).toBeVisible();

  const morag = await open("morag");
  await morag.goto(address);
  await morag.getByRole("button", { name: "Accept into the catalogue" }).click();
  const cue = morag.getByRole("main").getByRole("link", { name: /^SM\d{4}$/ });
  await expect(cue).toBeVisible({ timeout: 120_000 });

  const stranger = await open(null);
  await stranger.goto((await cue.getAttribute("href")) ?? "");
  await expect(stranger.getByRole("heading", { level: 1 })).toHaveText(
    /^Lantern Steps, by Ailsa Trevarrick-Moe and Celandine Harrowgill\.$/,
  );
  await expect(stranger.getByText(DESCRIPTION)).toBeVisible();
});

// Not seen to pass yet as a whole; its first sentence is.
test.fixme("a registered loop explains its eight places by itself, and no person is waited for", async ({
  open,
}) => {
  const page = await open("dov");
  await page.goto("/deliveries");
  await page.getByRole("main").getByRole("link", { name: "Badge Scan Boogie" }).click();
  await expect(page.getByText(/explained by registered loop LP-003, 8 places/i).first()).toBeVisible();
  await expect(page.getByRole("heading", { level: 1 })).toHaveText(/listed/);
  const plays = page.getByRole("button", { name: /^Play \d:\d\d\.\d–\d:\d\d\.\d$/ });
  await expect(plays).toHaveCount(8);
  await tabTo(page, plays.first());
  await page.keyboard.press("Enter");
  await expect(
    page
      .getByRole("region", { name: /player/i })
      .or(page.locator("[data-player]"))
      .first(),
  ).toBeVisible();
  const receipt = page.getByText(/Declaration 1|version 1/).first();
  await expect(receipt).toBeAttached();
});
