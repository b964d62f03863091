import { expect, PEOPLE, test } from "./support";

test("a wrong password and an unknown address are answered alike", async ({ open, guard }) => {
  // Chromium's own line about the answer that is asked for here.
  guard.allowError(/status of 401 .*\/api\/auth\/callback\/password/);
  const page = await open(null);
  await page.goto("/sign-in");
  for (const email of [PEOPLE.tobias, "nobody@thistlemoth.example"]) {
    await page.getByLabel("E-mail address").fill(email);
    await page.getByLabel("Password").fill("not the password of anybody");
    const answered = page.waitForResponse((answer) => answer.url().includes("/callback/password"));
    await page.getByRole("button", { name: "Sign in", exact: true }).click();
    expect((await answered).status()).toBe(401);
    await expect(page.getByText("This address and this password do not belong together.")).toBeVisible();
    await page.reload();
  }
});

test("without a session a page of a role leads to the sign-in, and back to itself", async ({ open }) => {
  const page = await open(null);
  await page.goto("/deliveries");
  await expect(page).toHaveURL(/\/sign-in\?to=%2Fdeliveries$/);
});

test("a page of another role is not there", async ({ open, guard }) => {
  guard.allowError(/status of 404/);
  const page = await open("ailsa");
  for (const path of ["/cases", "/sales", "/people", "/trial-balance", "/reported-works"]) {
    await page.goto(path);
    await expect(page.getByRole("heading", { level: 1 })).toHaveText(
      "There is nothing at this address, or it is not yours to see.",
    );
  }
});
