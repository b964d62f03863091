import { existsSync } from "node:fs";
import { join, relative } from "node:path";
import { runToEnd, stopAllChildren } from "./start/children.mjs";
import { keepingCompilerConfig } from "./start/compiler-config.mjs";
import { installNpmPackages } from "./start/packages.mjs";
import { projectDir } from "./start/paths.mjs";
import { Stop, say, secondsSince, stage } from "./start/progress.mjs";
import { needsDatabase, sortIntoSuites } from "./start/suites.mjs";

const bin = (path) => join(projectDir, "node_modules", path);

async function runNode(args) {
  const lines = [];
  const { code } = await runToEnd({
    command: process.execPath,
    args,
    cwd: projectDir,
    env: { ...process.env, NEXT_TELEMETRY_DISABLED: "1" },
    onLine: (line) => lines.push(line),
  });
  return { isGood: code === 0, output: lines.join("\n") };
}

function architectureTests() {
  const testsDir = join(projectDir, "tests");
  if (!existsSync(testsDir)) return [];
  return sortIntoSuites(testsDir).architecture.filter(
    (path) => !needsDatabase(path, join(testsDir, "support")),
  );
}

/** TypeScript's native compiler does the check in a fifth of the time; the build uses the other one. */
async function checkTypes() {
  const routes = await keepingCompilerConfig(() => runNode([bin("next/dist/bin/next"), "typegen"]));
  if (!routes.isGood) return routes;
  return runNode([bin("typescript-native/bin/tsc"), "--noEmit"]);
}

async function checkArchitecture() {
  const paths = architectureTests().map((path) => relative(projectDir, path));
  if (paths.length === 0) return { isGood: false, output: "no architecture test was found" };
  return runNode([bin("vitest/vitest.mjs"), "run", ...paths]);
}

const CHECKS = [
  ["Format and lint", () => runNode([bin("@biomejs/biome/bin/biome"), "check", "--error-on-warnings", "."])],
  ["Types", checkTypes],
  ["Architecture", checkArchitecture],
];

async function check() {
  const startMs = performance.now();
  await stage("npm packages", installNpmPackages);
  const failed = [];
  for (const [name, run] of CHECKS) {
    let outcome;
    await stage(name, async () => {
      outcome = await run();
      return outcome.isGood ? "well" : "not well";
    });
    const { isGood, output } = outcome;
    if (isGood) continue;
    failed.push(name);
    say(output);
  }
  say(
    `\n${failed.length === 0 ? "All is well" : `Not well: ${failed.join(", ")}`} (${secondsSince(startMs)})`,
  );
  return failed.length === 0 ? 0 : 1;
}

for (const signal of ["SIGINT", "SIGTERM", "SIGHUP"]) {
  process.on(signal, async () => {
    await stopAllChildren();
    process.exit(130);
  });
}

try {
  process.exitCode = await check();
} catch (error) {
  say(error instanceof Stop ? `\n${error.message}` : `\n${error.stack}`);
  process.exitCode = 1;
}
