import type { Locator, Page } from "@playwright/test";
import { expect, PAYMENTS_URL, tellProcessor, test } from "./support";

/*
 * The demonstration's own sale, O-1041, as its people read it. The figures were worked by hand from rules that are common
 * practice; no outside source prints them.
 */
const asMoney = (amount: string) => new RegExp(`${amount.replace(".", "\\.")}`);

async function useRole(page: Page, words: string): Promise<void> {
  await page
    .getByRole("banner")
    .getByRole("button", { name: /Desmond Orlafay/ })
    .click();
  await page.getByRole("menu").getByText(words).click();
  await expect(page.getByRole("banner").getByRole("button", { name: new RegExp(words) })).toBeVisible();
}

const rowOf = (table: Locator, account: string | RegExp): Locator =>
  table.getByRole("row").filter({ has: table.page().getByRole("cell", { name: account }) });

test("the owner opens the payout of 31 March: 196.73 is 151.73 and 45.00 recouped, with its entry", async ({
  open,
}) => {
  const page = await open("morag");
  await page.goto("/payouts");
  await page.getByRole("main").getByRole("link", { name: "Saltmarrow Music Library" }).first().click();
  await expect(page.getByRole("heading", { level: 1 })).toHaveText(
    /^£196\.73 was paid to Saltmarrow Music Library on 31.March.2026\.$/,
  );
  const main = page.getByRole("main");
  for (const amount of ["99.77", "51.96", "45.00"])
    await expect(main.getByText(asMoney(amount)).first()).toBeVisible();
  await expect(main).toContainText(/recoup|advance/i);
  await expect(main.getByText(/journal entry \w+_/)).toBeVisible();
  await expect(main).toContainText(/Released by Desmond Orlafay/);
  await expect(main).toContainText(/Confirmed by Mirela Castellane-Ode/);
});

test("the writer's own statement says the same: paid 77.20 in March, −77.20 after April", async ({
  open,
}) => {
  const page = await open("ailsa");
  await page.goto("/statements/2026-03");
  const main = page.getByRole("main");
  await expect(page.getByRole("heading", { level: 1 })).toContainText(/77\.20 was paid out/);
  for (const amount of ["59.87", "17.33"])
    await expect(main.getByText(asMoney(amount)).first()).toBeVisible();
  await page.goto("/statements/2026-04");
  await expect(page.getByRole("heading", { level: 1 })).toContainText(/to −£77\.20/);
});

test.describe("the accountant, in the marketplace's role", () => {
  test("March: five entries, each balanced to the cent", async ({ open }) => {
    const page = await open("desmond");
    await page.goto("/payouts");
    await useRole(page, "accountant for the marketplace");
    await page.goto("/journal/2026-03");
    await expect(page.getByRole("heading", { level: 1 })).toContainText(
      /posted in March.2026; each balances/,
    );
    const tables = page.getByRole("main").getByRole("table");
    const entries = await tables.evaluateAll((all) =>
      all.map((table) =>
        [...table.querySelectorAll("tbody tr")].map((row) =>
          [...row.querySelectorAll("th,td")].map((cell) => cell.textContent?.trim() ?? ""),
        ),
      ),
    );
    const minor = (text: string | undefined) => Math.round(Number((text ?? "").replace(/[^\d.]/g, "")) * 100);
    for (const rows of entries) {
      const sum = (column: number) => rows.reduce((total, row) => total + minor(row[column]), 0);
      expect(sum(1)).toBe(sum(2));
      expect(sum(1)).toBeGreaterThan(0);
    }
    const has = (entry: string[][], account: RegExp, side: "debit" | "credit", amount: string) =>
      entry.some(
        (row) => account.test(row[0] ?? "") && minor(row[side === "debit" ? 1 : 2]) === minor(amount),
      );
    const expected: readonly (readonly [RegExp, "debit" | "credit", string])[][] = [
      [
        [/clearing/i, "debit", "431.23"],
        [/fee cost/i, "debit", "6.77"],
        [/VAT/, "credit", "73.00"],
        [/platform fee/i, "credit", "54.75"],
        [/recharge/i, "credit", "6.77"],
        [/Saltmarrow|library/i, "credit", "151.73"],
        [/Ailsa/, "credit", "77.20"],
        [/Celandine/, "credit", "57.23"],
        [/Eluned/, "credit", "17.32"],
      ],
      [
        [/bank/i, "debit", "431.23"],
        [/clearing/i, "credit", "431.23"],
      ],
      [
        [/Celandine/, "debit", "45.00"],
        [/Saltmarrow|library/i, "credit", "45.00"],
      ],
    ];
    for (const lines of expected)
      expect(
        entries.some((entry) => lines.every(([account, side, amount]) => has(entry, account, side, amount))),
        lines.map(([account, side, amount]) => `${account} ${side} ${amount}`).join("; "),
      ).toBe(true);
  });

  test("the trial balance at the last second of March", async ({ open }) => {
    const page = await open("desmond");
    await page.goto("/payouts");
    await useRole(page, "accountant for the marketplace");
    await page.goto("/trial-balance");
    await page.getByLabel("Instant", { exact: true }).fill("2026-03-31T23:59:59");
    await page.getByRole("button", { name: "Show that instant" }).click();
    await expect(page.getByRole("heading", { level: 1 })).toHaveText(
      /^Debits and credits are equal at 31.March.2026, 23:59:59.UTC\.$/,
    );
    const table = page.getByRole("table", { name: "Accounts in GBP" });
    for (const [account, amount] of [
      [/^Bank/, "157.30"],
      [/^VAT/, "73.00"],
      [/Celandine/, "12.23"],
      [/Eluned/, "17.32"],
      [/^Platform fee/, "54.75"],
      [/fee cost/, "6.77"],
      [/recharged/, "6.77"],
    ] as const)
      await expect(rowOf(table, account).first()).toContainText(amount);
    await expect(
      page.getByText("Every rule that stored entries can show holds for the whole journal."),
    ).toBeVisible();
  });

  test("after refund and chargeback in April: −77.20 and −196.73, the others at nothing", async ({
    open,
  }) => {
    const page = await open("desmond");
    await page.goto("/payouts");
    await useRole(page, "accountant for the marketplace");
    await page.goto("/trial-balance?at=2026-04-30T23:59:59");
    const table = page.getByRole("table", { name: "Accounts in GBP" });
    const cells = (account: RegExp) => rowOf(table, account).getByRole("cell");
    // A debit of a payable is what its holder owes.
    await expect(cells(/Ailsa/).nth(1)).toHaveText("£77.20");
    await expect(cells(/^(?:Library|.*Saltmarrow)/).nth(1)).toHaveText("£196.73");
    await expect(rowOf(table, /Celandine/)).toHaveCount(0);
    await expect(rowOf(table, /Eluned/)).toHaveCount(0);
    await page.goto("/journal/2026-04");
    const main = page.getByRole("main");
    for (const amount of ["150.00", "288.00", "15.00", "45.00"])
      await expect(main.getByRole("cell", { name: `£${amount}` }).first()).toBeVisible();
  });

  test("a payout opens into the licence lines and the recoupment it is the sum of", async ({ open }) => {
    const page = await open("desmond");
    await page.goto("/payouts");
    await page.getByRole("main").getByRole("link", { name: "Saltmarrow Music Library" }).first().click();
    await expect(page.getByRole("heading", { level: 1 })).toContainText("£196.73");
    const main = page.getByRole("main");
    await expect(main).toContainText("Salt on the Window Frame");
    await expect(main).toContainText("Kettle Before Dawn");
    await expect(main).toContainText(/LR-2026-0101/);
    await expect(main).toContainText(/LR-2026-0102/);
    await expect(main).toContainText(/recoup|advance/i);
  });

  test("the same payment event again makes no second entry", async ({ open, request }) => {
    const page = await open("desmond");
    await page.goto("/payouts");
    await useRole(page, "accountant for the marketplace");
    await page.goto("/trial-balance");
    const read = async () => (await page.getByRole("table", { name: "Accounts in GBP" }).textContent()) ?? "";
    const entries = async () => {
      await page.goto("/journal/2026-03");
      return (await page.getByRole("heading", { level: 1 }).textContent()) ?? "";
    };
    const before = { balance: await read(), entries: await entries() };
    const events = await (await request.get(`${PAYMENTS_URL}/events`)).text();
    const ids = [...new Set(events.match(/evt_\w+/g) ?? [])];
    expect(ids.length).toBeGreaterThan(0);
    // The stand-in answers when the site has taken the event, for which it waits.
    for (const id of ids) await tellProcessor({ repeat: id });
    const again = await (await request.get(`${PAYMENTS_URL}/events`)).text();
    expect(again).not.toMatch(/, [45]\d\d, \d+ attempts/);
    await page.goto("/trial-balance");
    expect({ balance: await read(), entries: await entries() }).toEqual(before);
  });
});
