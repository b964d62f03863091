import { existsSync, mkdirSync, readFileSync } from "node:fs";
import { join } from "node:path";
import {
  type Browser,
  type BrowserContext,
  type BrowserContextOptions,
  test as base,
  expect,
  type Locator,
  type Page,
  type TestInfo,
} from "@playwright/test";
import { DEMO_PASSWORD } from "@/lib/accounts/states";

export const PEOPLE = {
  ailsa: "ailsa@trevarrick-moe.example",
  celandine: "celandine@harrowgill.example",
  dov: "dov@marchettiruane.example",
  tamsin: "tamsin@wolstrop.example",
  morag: "morag@saltmarrow.example",
  harriet: "harriet@brindlecote.example",
  ruan: "ruan@saltmarrow.example",
  ingrid: "ingrid@saltmarrow.example",
  desmond: "desmond@saltmarrow.example",
  callum: "callum@brindlecote.example",
  lucien: "lucien@ostravelle.example",
  solveig: "solveig@sedgewren.example",
  mirela: "mirela@sedgewren.example",
  otto: "otto@sedgewren.example",
  noor: "noor@thistlemoth.example",
  tobias: "tobias@thistlemoth.example",
  beatrix: "beatrix@thistlemoth.example",
  ysolde: "ysolde@quillbeck.example",
} as const;
export type Person = keyof typeof PEOPLE;

const SECOND_FACTOR = /\/sign-in\/second-factor/;

/** Through the real form, the second factor included; ends on the first page of the role. */
export async function signIn(page: Page, email: string): Promise<void> {
  await page.goto("/sign-in");
  await page.getByLabel("E-mail address").fill(email);
  await page.getByLabel("Password").fill(DEMO_PASSWORD);
  await page.getByRole("button", { name: "Sign in", exact: true }).click();
  await page.waitForURL((url) => url.pathname !== "/sign-in");
  await giveSecondFactor(page);
  await expect(page.getByRole("banner").getByText(/, (?:no role yet|.+ (?:of|at|for) .+)$/)).toBeAttached();
}

async function giveSecondFactor(page: Page): Promise<void> {
  await page.waitForLoadState("domcontentloaded");
  if (!SECOND_FACTOR.test(page.url())) return;
  // A code works once: where both present ones are used, the page says so until there is a next one.
  await expect(async () => {
    if ((await page.getByLabel("Code").inputValue()) === "") await page.reload();
    await expect(page.getByLabel("Code")).toHaveValue(/^\d{6}$/, { timeout: 1_000 });
  }).toPass({ timeout: 90_000, intervals: [2_000] });
  await page.getByRole("button", { name: "Go on" }).click();
  await page.waitForURL((url) => !SECOND_FACTOR.test(url.href));
}

// Playwright empties its output folder when a run begins, so a state lives for one run.
function statePath(testInfo: TestInfo, person: Person): string {
  const folder = join(testInfo.project.outputDir, ".sessions");
  mkdirSync(folder, { recursive: true });
  return join(folder, `${person}.json`);
}

async function storageStateOf(browser: Browser, testInfo: TestInfo, person: Person): Promise<string> {
  const path = statePath(testInfo, person);
  if (existsSync(path)) return path;
  const context = await browser.newContext(settingsOf(testInfo));
  const page = await context.newPage();
  await signIn(page, PEOPLE[person]);
  await context.storageState({ path });
  await context.close();
  return path;
}

function settingsOf(testInfo: TestInfo): BrowserContextOptions {
  const { baseURL, locale, timezoneId } = testInfo.project.use;
  return {
    ...(baseURL ? { baseURL } : {}),
    ...(locale ? { locale } : {}),
    ...(timezoneId ? { timezoneId } : {}),
    serviceWorkers: "block",
  };
}

/** What a page may not do: say an error, or ask another origin. */
export class Guard {
  readonly faults: string[] = [];
  private readonly allowedOrigins = new Set<string>();
  private readonly allowedErrors: RegExp[] = [];

  constructor(private readonly site: string) {}

  /** The upload's store, or the payment page. */
  allowOrigin(url: string): void {
    this.allowedOrigins.add(new URL(url).origin);
  }

  /** Chromium's own line about an answer that a test asks for on purpose. */
  allowError(pattern: RegExp): void {
    this.allowedErrors.push(pattern);
  }

  watch(context: BrowserContext): void {
    context.on("page", (page) => this.watchPage(page));
    for (const page of context.pages()) this.watchPage(page);
  }

  private watchPage(page: Page): void {
    const isOwn = () => {
      const url = page.url();
      return url === "about:blank" || url.startsWith(this.site);
    };
    page.on("console", (message) => {
      if (message.type() !== "error" || !isOwn()) return;
      const line = `${message.text()} (${message.location().url}) on ${page.url()}`;
      if (!this.allowedErrors.some((pattern) => pattern.test(line))) this.faults.push(`console: ${line}`);
    });
    page.on("pageerror", (error) => {
      if (isOwn()) this.faults.push(`thrown on ${page.url()}: ${error.message}`);
    });
    page.on("request", (request) => {
      const url = request.url();
      if (!/^(?:https?|wss?):/.test(url)) return;
      const { origin } = new URL(url);
      if (origin === new URL(this.site).origin || this.allowedOrigins.has(origin)) return;
      this.faults.push(`asked ${origin}: ${request.method()} ${url} from ${page.url()}`);
    });
  }
}

interface Looks {
  width?: number;
  height?: number;
  colorScheme?: "light" | "dark";
}

interface Fixtures {
  guard: Guard;
  /** A page of its own for a person, signed in once a run; nobody: a stranger. */
  open: (person: Person | null, looks?: Looks) => Promise<Page>;
}

export const test = base.extend<Fixtures>({
  guard: async ({ baseURL }, use) => {
    const guard = new Guard(baseURL ?? "");
    await use(guard);
    expect(guard.faults, "no console error, no request off the site").toEqual([]);
  },
  open: async ({ browser, guard }, use, testInfo) => {
    const contexts: BrowserContext[] = [];
    await use(async (person, looks = {}) => {
      const context = await browser.newContext({
        ...settingsOf(testInfo),
        ...(person ? { storageState: await storageStateOf(browser, testInfo, person) } : {}),
        viewport: { width: looks.width ?? 1440, height: looks.height ?? 900 },
        colorScheme: looks.colorScheme ?? "light",
        reducedMotion: "reduce",
        acceptDownloads: true,
      });
      contexts.push(context);
      guard.watch(context);
      return context.newPage();
    });
    for (const context of contexts) await context.close();
  },
});

export { expect };

const AXE = readFileSync(join(process.cwd(), "node_modules", "axe-core", "axe.min.js"), "utf8");

interface AxeAnswer {
  violations: { id: string; help: string; nodes: { target: unknown; failureSummary?: string }[] }[];
}

/**
 * Every rule of axe-core but one: without `preload`, by which axe writes style elements that the policy refuses, the
 * lock of orientation is not looked at. Base-ui's focus guards are spans that a person never meets.
 */
export async function axeViolations(page: Page): Promise<string[]> {
  const hasAxe = await page.evaluate(() => "axe" in window);
  if (!hasAxe) await page.evaluate(AXE);
  const answer = await page.evaluate(async () => {
    const { axe } = window as unknown as {
      axe: { run: (context: unknown, options: unknown) => Promise<unknown> };
    };
    return axe.run(
      { exclude: [["[data-base-ui-focus-guard]"]] },
      { resultTypes: ["violations"], preload: false },
    );
  });
  return (answer as AxeAnswer).violations.map(
    ({ id, help, nodes }) =>
      `${id}: ${help}\n${nodes.map((node) => `  ${JSON.stringify(node.target)} ${node.failureSummary ?? ""}`).join("\n")}`,
  );
}

/** In a state that a journey brought the page to; the states at rest are accessibility.spec.ts's. */
export async function expectAccessible(page: Page): Promise<void> {
  expect(await axeViolations(page), page.url()).toEqual([]);
}

/** Pixels by which the page is wider than its window. */
export function overflowPx(page: Page): Promise<number> {
  return page.evaluate(() => {
    const root = document.documentElement;
    return root.scrollWidth - root.clientWidth;
  });
}

/** Goes to a control by the Tab key alone, as somebody without a mouse does. */
export async function tabTo(page: Page, target: Locator): Promise<void> {
  await expect(target).toBeVisible();
  for (let presses = 0; presses < 300; presses += 1) {
    if (await target.evaluate((element) => element === document.activeElement)) return;
    await page.keyboard.press("Tab");
  }
  throw new Error(`${target} was not reached by Tab`);
}

export async function press(page: Page, target: Locator, key = "Enter"): Promise<void> {
  await tabTo(page, target);
  await page.keyboard.press(key);
}

/** Types into a field that was reached by Tab; what stood there goes. */
export async function type(page: Page, target: Locator, text: string): Promise<void> {
  await tabTo(page, target);
  await page.keyboard.press("ControlOrMeta+A");
  await page.keyboard.press("Delete");
  await page.keyboard.type(text);
}

/** Chooses in a list of the browser's own by typing the beginning of the choice. */
export async function choose(page: Page, target: Locator, words: string): Promise<void> {
  await tabTo(page, target);
  // Letters typed within a second of earlier ones go on with them.
  await expect(async () => {
    await page.keyboard.type(words);
    await expect(target.locator("option:checked")).toHaveText(words, { timeout: 1_200 });
  }).toPass({ timeout: 15_000 });
}

/** Files through the picker that the button opens. */
export async function pickFiles(page: Page, button: Locator, paths: string | string[]): Promise<void> {
  const picker = page.waitForEvent("filechooser");
  await press(page, button);
  await (await picker).setFiles(paths);
}

export interface Mail {
  to: string[];
  subject: string;
  text: string | null;
  links: string[];
  attachments: { filename: string; contentType: string; sizeBytes: number }[];
}

const INBOX_URL = process.env.RESEND_BASE_URL ?? "http://127.0.0.1:3430";
export const PAYMENTS_URL = process.env.STRIPE_API_BASE ?? "http://127.0.0.1:3420";
export const FILES_URL = process.env.UPLOADTHING_INGEST_URL ?? "http://127.0.0.1:3410";

export async function mailsTo(email: string): Promise<Mail[]> {
  const answer = await fetch(`${INBOX_URL}/inbox?to=${encodeURIComponent(email)}`);
  return ((await answer.json()) as { mails: Mail[] }).mails;
}

/** The newest mail whose subject fits; mails go out through the worker, so it is waited for. */
export async function mailTo(email: string, subject: RegExp): Promise<Mail> {
  const found = async () => (await mailsTo(email)).find((mail) => subject.test(mail.subject));
  await expect.poll(found, { message: `a mail to ${email}: ${subject}`, timeout: 90_000 }).toBeTruthy();
  return (await found()) as Mail;
}

/** Tells the payment service's stand-in what a bank does. */
export async function tellProcessor(message: Record<string, unknown>): Promise<Record<string, unknown>> {
  const answer = await fetch(`${PAYMENTS_URL}/__control`, {
    method: "POST",
    headers: { "content-type": "application/json" },
    body: JSON.stringify(message),
  });
  expect(answer.ok, `the stand-in answered ${answer.status}`).toBe(true);
  return (await answer.json()) as Record<string, unknown>;
}
