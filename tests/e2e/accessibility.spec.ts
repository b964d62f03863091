import type { Page } from "@playwright/test";
import { axeViolations, expect, overflowPx, type Person, test } from "./support";

interface Screen {
  person: Person | null;
  /** The address, or a list and the link on it that leads there. */
  path: string;
  follow?: readonly RegExp[];
  heading: RegExp;
}

// Route by role; the heading is a part of the page's one first sentence.
const SCREENS: readonly Screen[] = [
  // a stranger
  { person: null, path: "/", heading: /^Something .*music|^Something/ },
  { person: null, path: "/find?q=fragile%20piano", heading: /^Something/ },
  { person: null, path: "/cues/SM0001", heading: /Salt on the Window Frame, by/ },
  { person: null, path: "/cues/SM0001/license", heading: /^License Salt on the Window Frame/ },
  { person: null, path: "/libraries/SM", heading: /Saltmarrow Music Library/ },
  { person: null, path: "/check", heading: /^Anybody can check a licence/ },
  { person: null, path: "/check/LR-0000", heading: /./ },
  { person: null, path: "/report", heading: /./ },
  { person: null, path: "/report/RW-0000-0000", heading: /./ },
  { person: null, path: "/sign-in", heading: /^Sign in with your address/ },
  { person: null, path: "/sign-in/link", heading: /./ },
  { person: null, path: "/invitation/none", heading: /./ },
  { person: null, path: "/no-such-page", heading: /./ },
  // a composer
  { person: "ailsa", path: "/deliveries", heading: /deliver/i },
  { person: "ailsa", path: "/deliver", heading: /^A family is one work/ },
  { person: "ailsa", path: "/deliveries", follow: [/^Salt on the Window Frame$/], heading: /listed/ },
  { person: "ailsa", path: "/statements", heading: /./ },
  { person: "ailsa", path: "/statements/2026-03", heading: /In March.2026 the balance went/ },
  { person: "ailsa", path: "/account", heading: /you act as composer at Saltmarrow/ },
  { person: "ailsa", path: "/company", heading: /./ },
  { person: "ailsa", path: "/sign-out", heading: /./ },
  { person: "ailsa", path: "/find", heading: /^Something/ },
  { person: "dov", path: "/deliveries", follow: [/^Badge Scan Boogie$/], heading: /Badge Scan Boogie/ },
  { person: "tamsin", path: "/deliveries", follow: [/^Silence Study$/], heading: /Silence Study/ },
  { person: "tamsin", path: "/deliveries", follow: [/^Rain Ledger Beat$/], heading: /Rain Ledger Beat/ },
  // a library's owner
  { person: "morag", path: "/sales", heading: /./ },
  { person: "morag", path: "/sales?on=2026-03-20", heading: /./ },
  { person: "morag", path: "/payouts", heading: /./ },
  { person: "morag", path: "/payouts", follow: [/^Saltmarrow Music Library$/], heading: /was paid to/ },
  { person: "morag", path: "/statements/2026-04", heading: /In April.2026 the balance went/ },
  { person: "morag", path: "/deliveries", heading: /deliver/i },
  { person: "morag", path: "/deliveries", follow: [/^Window Salt/], heading: /Window Salt/ },
  { person: "morag", path: "/rate-card", heading: /./ },
  { person: "morag", path: "/roster", heading: /./ },
  { person: "morag", path: "/log", heading: /./ },
  {
    person: "morag",
    path: "/sales",
    follow: [/^LR-2026-0101/],
    heading: /lets Quillbeck Media use Salt on the Window Frame/,
  },
  { person: "morag", path: "/account", heading: /you act as owner of Saltmarrow/ },
  // a library's moderator
  { person: "ingrid", path: "/cases", heading: /case|Case/ },
  { person: "ingrid", path: "/cases", follow: [/Window Salt/], heading: /Window Salt/ },
  { person: "ingrid", path: "/registers", heading: /registered/ },
  // the marketplace's moderator
  { person: "solveig", path: "/cases", heading: /case|Case/ },
  {
    person: "solveig",
    path: "/cases",
    follow: [/Ring Road Runner/],
    heading: /2.semitones up and 3.% faster/,
  },
  { person: "solveig", path: "/cases", follow: [/Rain Ledger Beat/], heading: /Rain Ledger Beat/ },
  { person: "solveig", path: "/registers", heading: /registered/ },
  { person: "solveig", path: "/reported-works", heading: /report/i },
  // a buyer who proposes
  { person: "noor", path: "/find?production=", heading: /^Something/ },
  { person: "noor", path: "/cues/OA0002", heading: /Winter Timetable, by/ },
  { person: "noor", path: "/cues/OA0002/license", heading: /^License Winter Timetable/ },
  { person: "noor", path: "/productions", heading: /production/ },
  { person: "noor", path: "/productions", follow: [/^Tide Tables/], heading: /shortlist/ },
  { person: "noor", path: "/records", heading: /./ },
  {
    person: "noor",
    path: "/records",
    follow: [/^LR-2026-0103/],
    heading: /lets Thistlemoth Pictures use Peat Smoke/,
  },
  { person: "noor", path: "/account", heading: /you act as buyer for Thistlemoth/ },
  // a buyer who approves and pays
  { person: "beatrix", path: "/records", heading: /./ },
  {
    person: "beatrix",
    path: "/records",
    follow: [/^LR-2026-0103/],
    heading: /lets Thistlemoth Pictures use Peat Smoke/,
  },
  {
    person: "ysolde",
    path: "/records",
    follow: [/^LR-2026-0101/, /^The order it came from/],
    heading: /order O-1041/,
  },
  // a library's accountant
  { person: "desmond", path: "/sales", heading: /./ },
  { person: "desmond", path: "/payouts", heading: /./ },
  { person: "desmond", path: "/trial-balance?at=2026-03-31T23:59:59", heading: /31.March.2026/ },
  { person: "desmond", path: "/journal/2026-03", heading: /March.2026/ },
  // the marketplace's accountant
  { person: "mirela", path: "/payouts", heading: /./ },
  { person: "mirela", path: "/trial-balance?at=2026-03-31T23:59:59", heading: /31.March.2026/ },
  { person: "mirela", path: "/journal/2026-03", heading: /March.2026/ },
  // the admin
  { person: "otto", path: "/people", heading: /./ },
  { person: "otto", path: "/log", heading: /./ },
];

const LOOKS = [
  { width: 1440, height: 900, colorScheme: "light" },
  { width: 1440, height: 900, colorScheme: "dark" },
  { width: 390, height: 844, colorScheme: "dark" },
  { width: 390, height: 844, colorScheme: "light" },
] as const;

async function openScreen(page: Page, { path, follow = [] }: Screen): Promise<void> {
  await page.goto(path);
  for (const name of follow) {
    const before = page.url();
    const screen = page.getByRole("main").or(page.getByRole("complementary"));
    await screen.getByRole("link", { name }).first().click();
    await page.waitForURL((url) => url.href !== before);
  }
}

for (const screen of SCREENS) {
  const title = [screen.path, ...(screen.follow ?? []).map(({ source }) => source.replace(/[\^$\\]/g, ""))];
  test(`${title.join(" > ")}, ${screen.person ?? "a stranger"}`, async ({ open, guard }) => {
    // An address that leads nowhere answers 404, and Chromium says so by itself.
    guard.allowError(/status of 404.*\/(?:no-such-page|invitation\/none|report\/RW-0000-0000)/);
    const page = await open(screen.person);
    await openScreen(page, screen);
    const heading = page.getByRole("heading", { level: 1 });
    await expect(heading).toHaveCount(1);
    await expect(heading).toHaveText(screen.heading);
    for (const { width, height, colorScheme } of LOOKS) {
      await page.setViewportSize({ width, height });
      await page.emulateMedia({ colorScheme });
      const look = `${width} px, ${colorScheme}`;
      expect.soft(await axeViolations(page), look).toEqual([]);
      expect.soft(await overflowPx(page), `pixels beyond the window at ${look}`).toBe(0);
    }
  });
}
