import { createHash } from "node:crypto";
import {
  appendFileSync,
  existsSync,
  mkdirSync,
  readdirSync,
  readFileSync,
  rmSync,
  writeFileSync,
} from "node:fs";
import { dirname, join, relative } from "node:path";
import { runToEnd } from "./children.mjs";
import { keepingCompilerConfig } from "./compiler-config.mjs";
import { childEnvironment } from "./environment.mjs";
import { projectDir } from "./paths.mjs";
import { Stop, tailOf } from "./progress.mjs";

const SOURCE_FOLDERS = ["app", "components", "db", "emails", "lib", "public"];
const SOURCE_FILES = [
  "instrumentation.ts",
  "next.config.ts",
  "package-lock.json",
  "postcss.config.mjs",
  "proxy.ts",
  "tsconfig.json",
];
const NOT_BUILT = new Set(["db/migrations", "lib/commands"]);
const MARKER = "sedgewren-sources";

function listSources(dir, root) {
  if (!existsSync(dir)) return [];
  return readdirSync(dir, { withFileTypes: true }).flatMap((entry) => {
    const path = join(dir, entry.name);
    if (entry.isDirectory()) return NOT_BUILT.has(relative(root, path)) ? [] : listSources(path, root);
    return entry.name.endsWith(".md") ? [] : [path];
  });
}

/** One hash of the names and bytes of everything that goes into the site. */
export function hashSources(root = projectDir) {
  const paths = [
    ...SOURCE_FOLDERS.flatMap((folder) => listSources(join(root, folder), root)),
    ...SOURCE_FILES.map((file) => join(root, file)).filter((path) => existsSync(path)),
  ].sort();
  const hash = createHash("sha256");
  for (const path of paths) {
    const bytes = readFileSync(path);
    hash.update(`${relative(root, path)}\0${bytes.length}\0`).update(bytes);
  }
  return hash.digest("hex");
}

export function isBuilt(distDir, sources) {
  const marker = join(projectDir, distDir, MARKER);
  return existsSync(marker) && readFileSync(marker, "utf8") === sources;
}

/** Builds the site into `distDir` (relative to the project) unless that holds exactly these sources. */
export async function buildSite({ distDir, values, log, report }) {
  const sources = hashSources();
  if (isBuilt(distDir, sources)) return "built already";
  mkdirSync(dirname(log), { recursive: true });
  const marker = join(projectDir, distDir, MARKER);
  rmSync(marker, { force: true });
  const { code } = await keepingCompilerConfig(() =>
    runToEnd({
      command: process.execPath,
      args: [join(projectDir, "node_modules/next/dist/bin/next"), "build"],
      cwd: projectDir,
      env: childEnvironment({ ...values, NODE_ENV: "production", NEXT_DIST_DIR: distDir }),
      onLine(line) {
        appendFileSync(log, `${line}\n`);
        if (line.trim() !== "") report(line.trim());
      },
    }),
  );
  if (code !== 0) throw new Stop(`The site did not build (${code}):\n${tailOf(log, 40)}`);
  writeFileSync(marker, sources);
  return "built";
}
