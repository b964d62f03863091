import { mkdtempSync, rmSync } from "node:fs";
import { join } from "node:path";
import { runBrowserSuite } from "./start/browser-suite.mjs";
import { runToEnd, stopAllChildren, stopTasks } from "./start/children.mjs";
import { addCounts, closingLine, countReport, countVitest, NOTHING } from "./start/counts.mjs";
import { formatEnv, writePrivateFile } from "./start/env-file.mjs";
import { childEnvironment, demoEnvironment } from "./start/environment.mjs";
import { databaseUrl, startMariadb, TEST_ADMIN } from "./start/mariadb.mjs";
import { installDebianPackages, installNpmPackages } from "./start/packages.mjs";
import { dataDir, makeDataDir, projectDir } from "./start/paths.mjs";
import { pickPorts } from "./start/ports.mjs";
import { Stop, say, secondsSince, stage } from "./start/progress.mjs";
import { keepSecrets, makeSecrets, TEST_MAKERS } from "./start/secrets.mjs";
import { SUITES, sortIntoSuites } from "./start/suites.mjs";

// Far from the usual ports of `npm run up`, so that both can run side by side.
const TEST_PORTS = { site: 3600, files: 3610, payments: 3620, mail: 3630, database: 3507 };
const DEBIAN_PACKAGES = ["mariadb-server", "ffmpeg", "chromium", "sox", "rubberband-cli", "espeak-ng"];

const cleanups = [];
let isStopping = false;
let runDir = null;

async function cleanUp() {
  for (const cleanup of cleanups.splice(0).reverse()) await cleanup();
  await stopAllChildren();
  // Last, when nothing can write there any more.
  if (runDir !== null) rmSync(runDir, { recursive: true, force: true, maxRetries: 5 });
}

async function startTestDatabase({ dir, ports, secrets }) {
  const { adminPassword } = secrets;
  const database = await startMariadb({
    dir,
    wantedPort: ports.database,
    isForTests: true,
    passwords: { ownerPassword: secrets.ownerPassword, appPassword: secrets.appPassword, adminPassword },
  });
  cleanups.push(() => database.stop());
  ports.database = database.port;
  const adminUrl = databaseUrl({
    user: TEST_ADMIN,
    password: adminPassword,
    port: database.port,
    database: "",
  });
  const values = {
    ...demoEnvironment({ ports, secrets, mediaDir: join(dir, "media") }),
    TEST_DATABASE_ADMIN_URL: adminUrl.replace(/\/$/, ""),
  };
  return { database, values };
}

async function runVitest({ title, paths, values, reportDir }) {
  const startMs = performance.now();
  const report = join(reportDir, `vitest-${title.replace(/\W+/g, "-").toLowerCase()}.json`);
  say(`\n${title}: ${paths.length} ${paths.length === 1 ? "path" : "paths"}`);
  const { code } = await runToEnd({
    command: process.execPath,
    args: [
      join(projectDir, "node_modules/vitest/vitest.mjs"),
      "run",
      "--reporter=default",
      "--reporter=json",
      `--outputFile.json=${report}`,
      ...paths,
    ],
    cwd: projectDir,
    env: childEnvironment(values),
    onLine: (line) => say(line),
  });
  const counts = countReport({ path: report, count: countVitest, exitCode: code });
  say(`${title}: ${closingLine(counts)} (${secondsSince(startMs)})`);
  return counts;
}

async function runAll({ values, ports, reportDir, chosenPaths }) {
  if (chosenPaths.length > 0) {
    return runVitest({ title: "Chosen tests", paths: chosenPaths, values, reportDir });
  }
  let total = NOTHING;
  const bySuite = sortIntoSuites(join(projectDir, "tests"));
  for (const { name, title } of SUITES) {
    if (bySuite[name].length === 0 || isStopping) continue;
    total = addCounts(total, await runVitest({ title, paths: bySuite[name], values, reportDir }));
  }
  if (!isStopping)
    total = addCounts(total, await runBrowserSuite({ values, ports, runDir: reportDir, cleanups }));
  return total;
}

async function serve() {
  const dir = makeDataDir("test", "mariadb");
  const ports = await pickPorts(TEST_PORTS);
  const secrets = keepSecrets(join(dataDir, "test", "secrets.json"), TEST_MAKERS);
  const { database, values } = await stage("Test database", () => startTestDatabase({ dir, ports, secrets }));
  const envPath = join(dataDir, "test", "env");
  writePrivateFile(envPath, formatEnv(values));
  cleanups.push(async () => rmSync(envPath, { force: true }));
  say(
    `\nMariaDB for tests answers on 127.0.0.1:${database.port} until Ctrl-C. Against it, as often as you like:`,
  );
  say("  node --env-file=.data/test/env node_modules/vitest/vitest.mjs run tests/<folder>");
  const { code } = await database.child.exited;
  if (!isStopping) throw new Stop(`MariaDB ended by itself (${code}); its log is ${database.log}`);
  return 0;
}

async function test(chosenPaths) {
  const startMs = performance.now();
  await stage("Debian packages", (report) => installDebianPackages(DEBIAN_PACKAGES, report));
  await stage("npm packages", installNpmPackages);
  runDir = mkdtempSync(join(makeDataDir("test"), "run-"));
  const ports = await pickPorts(TEST_PORTS);
  const secrets = makeSecrets({}, TEST_MAKERS);
  const { values } = await stage("Test database", () =>
    startTestDatabase({ dir: join(runDir, "mariadb"), ports, secrets }),
  );
  const total = await runAll({ values, ports, reportDir: runDir, chosenPaths });
  await cleanUp();
  if (isStopping) return 130;
  say(`\nAll suites: ${secondsSince(startMs)}`);
  say(closingLine(total));
  return total.failed > 0 || total.passed === 0 ? 1 : 0;
}

for (const signal of ["SIGINT", "SIGTERM", "SIGHUP"]) {
  process.on(signal, async () => {
    if (isStopping) return;
    isStopping = true;
    await stopTasks();
    say("\nStopping …");
    await cleanUp();
    process.exit(130);
  });
}

const args = process.argv.slice(2);
const isServing = args.includes("--serve") || args.includes("--database");
try {
  process.exitCode = await (isServing ? serve() : test(args.filter((arg) => !arg.startsWith("--"))));
} catch (error) {
  if (isStopping) await new Promise(() => {});
  await cleanUp();
  say(error instanceof Stop ? `\n${error.message}` : `\n${error.stack}`);
  if (!isServing) say(closingLine({ ...NOTHING, failed: 1 }));
  process.exitCode = 1;
}
