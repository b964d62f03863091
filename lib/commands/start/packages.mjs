import { existsSync, readFileSync } from "node:fs";
import { join } from "node:path";
import { runToEnd } from "./children.mjs";
import { findProgram, projectDir } from "./paths.mjs";
import { Stop, say } from "./progress.mjs";

const PROGRAMS = {
  "mariadb-server": ["mariadbd", "mariadb-install-db"],
  ffmpeg: ["ffmpeg", "ffprobe"],
  chromium: ["chromium"],
  sox: ["sox"],
  "rubberband-cli": ["rubberband"],
  "espeak-ng": ["espeak-ng"],
};

export function missingDebianPackages(wanted, find = findProgram) {
  return wanted.filter((name) => PROGRAMS[name].some((program) => find(program) === null));
}

export function installCommand(packages) {
  return `apt-get update && apt-get install -y --no-install-recommends ${packages.join(" ")}`;
}

async function apt(args, report) {
  const lines = [];
  const { code } = await runToEnd({
    command: "apt-get",
    args,
    cwd: "/",
    env: { ...process.env, DEBIAN_FRONTEND: "noninteractive" },
    onLine(line) {
      if (line.trim() === "") return;
      lines.push(line);
      report(line.trim());
    },
  });
  if (code !== 0) {
    throw new Stop(`apt-get ${args.join(" ")} ended with ${code}:\n${lines.slice(-15).join("\n")}`);
  }
}

/** Names what is missing before it installs it; without root, or without apt, says what to do and stops. */
export async function installDebianPackages(wanted, report) {
  const missing = missingDebianPackages(wanted);
  if (missing.length === 0) return `${wanted.join(", ")} are there`;
  if (findProgram("apt-get") === null) {
    const programs = missing.flatMap((name) => PROGRAMS[name]);
    throw new Stop(
      `These programs are needed and not found: ${programs.join(", ")}. Install them, then start again.`,
    );
  }
  if (process.getuid() !== 0) {
    throw new Stop(
      `Missing: ${missing.join(", ")}. Run this, then start again:\n\n  sudo sh -c '${installCommand(missing)}'\n`,
    );
  }
  say(`\n  Installing from Debian: ${missing.join(", ")}`);
  await apt(["update"], report);
  await apt(["install", "-y", "--no-install-recommends", ...missing], report);
  const still = missingDebianPackages(missing);
  if (still.length > 0) throw new Stop(`Installed, yet their programs are not found: ${still.join(", ")}.`);
  return `installed ${missing.join(", ")}`;
}

/**
 * Whether what npm recorded as installed is what the lock file asks for. npm writes its own record last,
 * so an interrupted install counts as missing. Packages for other platforms are optional and may be absent.
 */
export function isInstalledAsLocked(lock, installed) {
  for (const [path, wanted] of Object.entries(lock.packages)) {
    if (path === "" || wanted.link) continue;
    const found = installed.packages[path];
    if (found === undefined ? !wanted.optional : found.version !== wanted.version) return false;
  }
  return true;
}

export function npmPackagesAreInstalled(dir = projectDir) {
  const record = join(dir, "node_modules", ".package-lock.json");
  if (!existsSync(record)) return false;
  return isInstalledAsLocked(
    JSON.parse(readFileSync(join(dir, "package-lock.json"), "utf8")),
    JSON.parse(readFileSync(record, "utf8")),
  );
}

/** The paths that npm will fill on this machine; optional packages for other platforms stay away. */
function expectedPaths(lock) {
  const suits = (allowed, own) => allowed === undefined || allowed.includes(own);
  return Object.entries(lock.packages)
    .filter(
      ([path, entry]) => path !== "" && suits(entry.os, process.platform) && suits(entry.cpu, process.arch),
    )
    .map(([path]) => join(projectDir, path, "package.json"));
}

export async function installNpmPackages(report) {
  if (npmPackagesAreInstalled()) return "as package-lock.json asks";
  const expected = expectedPaths(JSON.parse(readFileSync(join(projectDir, "package-lock.json"), "utf8")));
  const lines = [];
  const timer = setInterval(() => {
    report(`${expected.filter((path) => existsSync(path)).length} of ${expected.length} packages`);
  }, 1_000);
  try {
    const { code } = await runToEnd({
      command: "npm",
      args: ["ci", "--no-audit", "--no-fund", "--loglevel=error"],
      cwd: projectDir,
      env: process.env,
      onLine: (line) => lines.push(line),
    });
    if (code !== 0) throw new Stop(`npm ci ended with ${code}:\n${lines.slice(-20).join("\n")}`);
  } finally {
    clearInterval(timer);
  }
  return `${expected.length} packages installed`;
}
