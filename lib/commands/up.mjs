import { existsSync, readFileSync } from "node:fs";
import { join } from "node:path";
import { stopAllChildren, stopTasks } from "./start/children.mjs";
import { formatEnv, readEnvFile, writePrivateFile } from "./start/env-file.mjs";
import { demoEnvironment, USUAL_PORTS } from "./start/environment.mjs";
import { endLeftoverMariadb, startMariadb } from "./start/mariadb.mjs";
import { installDebianPackages, installNpmPackages } from "./start/packages.mjs";
import { dataDir, makeDataDir } from "./start/paths.mjs";
import { pickPorts } from "./start/ports.mjs";
import { Stop, say, secondsSince, stage } from "./start/progress.mjs";
import { takeLock } from "./start/run-lock.mjs";
import { keepSecrets } from "./start/secrets.mjs";
import { buildSite } from "./start/site-build.mjs";
import {
  migrate,
  readProgress,
  seed,
  serviceUrls,
  startServices,
  startSite,
  startWorker,
  waitForAnswers,
} from "./start/stack.mjs";
import { endLeftovers, Supervisor } from "./start/supervise.mjs";

const DEBIAN_PACKAGES = ["mariadb-server", "ffmpeg"];
const DIST_DIR = ".next";
const PROGRESS_EVERY_MS = 2_000;
const DATABASE_RESTARTS_MAX = 5;

const isDev = process.argv.includes("--dev");
const logPath = (name) => join(dataDir, "logs", `${name}.log`);
const sleep = (ms) => new Promise((resolve) => setTimeout(resolve, ms));

const cleanups = [];
let isStopping = false;

async function stop(exitCode) {
  if (isStopping) return;
  isStopping = true;
  const hasStarted = cleanups.length > 1;
  if (hasStarted) say("\n  Stopping what was started …");
  await stopTasks();
  for (const cleanup of cleanups.splice(0).reverse()) await cleanup();
  await stopAllChildren();
  if (hasStarted) say("  Stopped. The data are kept in .data; `npm run up` goes on from here.");
  process.exit(exitCode);
}

/** An interrupted stage fails too; only a failure that nobody asked for is told. */
async function giveUp(error) {
  if (isStopping) return;
  say(error instanceof Stop ? `\n  ${error.message}` : `\n${error.stack}`);
  await stop(1);
}

function readPorts(path) {
  return existsSync(path) ? JSON.parse(readFileSync(path, "utf8")) : {};
}

function claimCheckout() {
  const lock = takeLock(join(makeDataDir(), "up.lock"));
  if (lock.holder !== undefined) {
    const address = readEnvFile(join(dataDir, "env"))?.SITE_URL;
    const where = address === undefined ? "" : ` at ${address}`;
    throw new Stop(
      `Sedgewren already runs from this folder${where} (process ${lock.holder.pid}). Ctrl-C there ends it.`,
    );
  }
  cleanups.push(async () => lock.release());
}

/** A server that dies under us (a crash, the system short of memory) is started again where it was. */
async function startDatabase({ wantedPort, secrets }) {
  const start = (port) =>
    startMariadb({
      dir: makeDataDir("mariadb"),
      wantedPort: port,
      passwords: { ownerPassword: secrets.ownerPassword, appPassword: secrets.appPassword },
    });
  let database = await start(wantedPort);
  const { port } = database;
  const watch = async () => {
    for (let restarts = 0; ; restarts += 1) {
      await database.child.exited;
      if (isStopping) return;
      if (restarts === DATABASE_RESTARTS_MAX)
        throw new Stop(`MariaDB ended again; its log is ${database.log}`);
      say("  MariaDB ended by itself; starting it again.");
      database = await start(port);
      if (database.port !== port) throw new Stop(`Port ${port} of MariaDB was taken while it was down.`);
    }
  };
  cleanups.push(() => database.stop());
  void watch().catch(giveUp);
  return port;
}

/** Another database than our own, named by the person who starts: the application's account and the owner's. */
function readOtherDatabase() {
  const { DATABASE_URL, DATABASE_OWNER_URL } = process.env;
  if (DATABASE_URL === undefined) return null;
  if (DATABASE_OWNER_URL === undefined) {
    throw new Stop(
      "DATABASE_URL is set without DATABASE_OWNER_URL, the account that migrates. Set both, or neither.",
    );
  }
  return { DATABASE_URL, DATABASE_OWNER_URL };
}

async function prepareEnvironment() {
  const other = readOtherDatabase();
  const secrets = keepSecrets(join(dataDir, "secrets.json"));
  const portsPath = join(dataDir, "ports.json");
  const ports = await pickPorts(USUAL_PORTS, readPorts(portsPath));
  if (other === null) ports.database = await startDatabase({ wantedPort: ports.database, secrets });
  writePrivateFile(portsPath, `${JSON.stringify(ports)}\n`);
  const values = { ...demoEnvironment({ ports, secrets, mediaDir: makeDataDir("media") }), ...other };
  writePrivateFile(join(dataDir, "env"), formatEnv(values));
  return { ports, values };
}

function sayAddresses({ values, signIns, startMs }) {
  say(`\n  Sedgewren is at ${values.SITE_URL}  (after ${secondsSince(startMs)})`);
  say("  A demonstration: its people, cues and money are invented.\n");
  if (signIns.length > 0) {
    say("  Sign in as");
    const width = (key) => Math.max(...signIns.map((signIn) => signIn[key].length));
    for (const { role, name, email, password } of signIns) {
      say(
        `    ${role.padEnd(width("role"))}  ${name.padEnd(width("name"))}  ${email.padEnd(width("email"))}  ${password}`,
      );
    }
  }
  say("\n  Behind it, on this machine only");
  say(`    stored files  ${values.UPLOADTHING_INGEST_URL}`);
  say(`    payments      ${values.STRIPE_API_BASE}`);
  say(`    inbox         ${values.RESEND_BASE_URL}`);
  say("    logs          .data/logs\n");
  say("  Ctrl-C ends all of it.\n");
}

/** Says how many of the demo's cues are in, as often as the number or the step changes, until all are. */
async function followDemo(siteUrl) {
  let last = "";
  while (!isStopping) {
    const progress = await readProgress(siteUrl);
    if (progress !== null) {
      const { cuesIn, cuesTotal, step } = progress;
      const line =
        cuesIn >= cuesTotal
          ? `All ${cuesTotal} cues are in.`
          : `${cuesIn} of ${cuesTotal} cues are in${step === "" ? "" : `: ${step}`}`;
      if (line !== last) say(`  ${line}`);
      last = line;
      if (cuesIn >= cuesTotal) return;
    }
    await sleep(PROGRESS_EVERY_MS);
  }
}

async function up() {
  const startMs = performance.now();
  say(`\n  Sedgewren, starting from ${process.cwd()}\n`);
  claimCheckout();
  const recordPath = join(dataDir, "running.json");
  const databaseDir = join(dataDir, "mariadb");
  const left = [...(await endLeftovers(recordPath)), ...(await endLeftoverMariadb(databaseDir))];
  if (left.length > 0) say(`  Ended what an earlier start left running: ${left.join(", ")}`);
  await stage("Debian packages", (report) => installDebianPackages(DEBIAN_PACKAGES, report));
  await stage("npm packages", installNpmPackages);

  let started;
  await stage("MariaDB", async () => {
    started = await prepareEnvironment();
    return `at ${new URL(started.values.DATABASE_URL).host}`;
  });
  const { ports, values } = started;
  await stage("Migrations", () => migrate(values));

  const supervisor = new Supervisor({ recordPath, onGivenUp: () => void stop(1) });
  cleanups.push(() => supervisor.stop());
  await stage("Stand-ins for files, payments and mail", async () => {
    const servicesDir = makeDataDir("services");
    const services = supervisor.run("stand-ins", () =>
      startServices({ values, servicesDir, log: logPath("stand-ins") }),
    );
    await waitForAnswers({ child: services, urls: serviceUrls(values) });
  });
  if (!isDev) {
    await stage("Site, build", (report) =>
      buildSite({ distDir: DIST_DIR, values, log: logPath("build"), report }),
    );
  }
  const siteOptions = { values, port: ports.site, distDir: DIST_DIR, log: logPath("site"), isDev };
  const site = supervisor.run("site", () => startSite(siteOptions));
  let signIns = [];
  await stage("Demo world", async (report) => {
    ({ signIns } = await seed(values, report));
    return "its people are in; the worker brings the cues";
  });
  await stage("Site", () => waitForAnswers({ child: site, urls: [values.SITE_URL] }));
  supervisor.run("worker", () => startWorker({ values, log: logPath("worker"), isDev }));
  sayAddresses({ values, signIns, startMs });
  await followDemo(values.SITE_URL);
}

for (const signal of ["SIGINT", "SIGTERM", "SIGHUP"]) {
  process.on(signal, () => void stop(0));
}

// The children's pipes and the supervisor may leave nothing to wait for; the foreground stays all the same.
setInterval(() => {}, 60_000);
try {
  await up();
} catch (error) {
  await giveUp(error);
}
