import { existsSync } from "node:fs";
import { join } from "node:path";
import { runToEnd, stopChild } from "./children.mjs";
import { closingLine, countPlaywright, countReport, NOTHING } from "./counts.mjs";
import { childEnvironment } from "./environment.mjs";
import { makeDataDir, projectDir } from "./paths.mjs";
import { Stop, say, secondsSince, stage } from "./progress.mjs";
import { takeLock } from "./run-lock.mjs";
import { buildSite } from "./site-build.mjs";
import {
  migrate,
  readProgress,
  seed,
  serviceUrls,
  startServices,
  startSite,
  startWorker,
  waitForAnswers,
} from "./stack.mjs";

// A folder of its own: a site that `npm run up` serves must not lose its files under it.
const DIST_DIR = ".data/test/next";
const DEMO_LIMIT_MS = 20 * 60_000;

const sleep = (ms) => new Promise((resolve) => setTimeout(resolve, ms));

async function takeBuildFolder(cleanups) {
  const path = join(makeDataDir("test"), "browser.lock");
  await stage("Folder for the test site", async (report) => {
    for (;;) {
      const lock = takeLock(path);
      if (lock.holder === undefined) {
        cleanups.push(async () => lock.release());
        return "free";
      }
      report(`waiting for another run, process ${lock.holder.pid}`);
      await sleep(1_000);
    }
  });
}

async function waitForDemo(siteUrl, report) {
  const deadlineMs = performance.now() + DEMO_LIMIT_MS;
  for (;;) {
    const progress = await readProgress(siteUrl);
    if (progress !== null) {
      if (progress.cuesIn >= progress.cuesTotal && progress.waiting === 0) return `${progress.cuesTotal} cues are in`;
      report(`${progress.cuesIn} of ${progress.cuesTotal} cues, ${progress.step}`);
    }
    if (performance.now() > deadlineMs) {
      throw new Stop(`The demo world was not complete after twenty minutes: ${JSON.stringify(progress)}`);
    }
    await sleep(1_000);
  }
}

async function startSiteForTests({ values, ports, runDir, cleanups }) {
  const logs = join(makeDataDir("test", "logs"));
  const log = (name) => join(logs, `${name}.log`);
  const keep = (child) => {
    cleanups.push(() => stopChild(child));
    return child;
  };
  await stage("Site, build", (report) => buildSite({ distDir: DIST_DIR, values, log: log("build"), report }));
  await stage("Migrations", () => migrate(values));
  await stage("Stand-ins", async () => {
    const services = keep(
      startServices({ values, servicesDir: join(runDir, "services"), log: log("stand-ins") }),
    );
    await waitForAnswers({ child: services, urls: serviceUrls(values) });
  });
  const site = keep(startSite({ values, port: ports.site, distDir: DIST_DIR, log: log("site") }));
  await stage("Site", () => waitForAnswers({ child: site, urls: [values.SITE_URL] }));
  await stage("Demo world", async (report) => {
    await seed(values, report);
    keep(startWorker({ values, log: log("worker") }));
    return waitForDemo(values.SITE_URL, report);
  });
}

/** Journeys and accessibility in Chromium, on a site of their own with the demo world in. */
// The first look of the demonstration, at sixty seconds a cue: what the journeys use.
const DEMO_FOR_TESTS = { DEMO_CUES: "14", DEMO_CUE_SECONDS: "60" };

export async function runBrowserSuite({ values: given, ports, runDir, cleanups }) {
  const values = { ...given, ...DEMO_FOR_TESTS };
  if (!existsSync(join(projectDir, "tests", "e2e"))) return NOTHING;
  const startMs = performance.now();
  const title = "Journeys and accessibility in the browser";
  say(`\n${title}`);
  try {
    await takeBuildFolder(cleanups);
    await startSiteForTests({ values, ports, runDir, cleanups });
  } catch (error) {
    // The other suites' counts must still be told; that the site did not come up is a failure of this one.
    if (!(error instanceof Stop)) throw error;
    say(`\n${error.message}\n${title}: ${closingLine({ ...NOTHING, failed: 1 })} (${secondsSince(startMs)})`);
    return { ...NOTHING, failed: 1 };
  }
  const report = join(runDir, "playwright.json");
  const { code } = await runToEnd({
    command: process.execPath,
    args: [join(projectDir, "node_modules/@playwright/test/cli.js"), "test", "--reporter=list,json"],
    cwd: projectDir,
    env: childEnvironment({
      ...values,
      PLAYWRIGHT_JSON_OUTPUT_NAME: report,
      PLAYWRIGHT_SKIP_BROWSER_DOWNLOAD: "1",
    }),
    onLine: (line) => say(line),
  });
  const counts = countReport({ path: report, count: countPlaywright, exitCode: code });
  say(`${title}: ${closingLine(counts)} (${secondsSince(startMs)})`);
  return counts;
}
