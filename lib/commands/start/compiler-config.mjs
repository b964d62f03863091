import { readFileSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { projectDir } from "./paths.mjs";

/** Next adds its output folder to the compiler's list of sources as it runs; a command leaves no change behind. */
export async function keepingCompilerConfig(body) {
  const path = join(projectDir, "tsconfig.json");
  const before = readFileSync(path);
  try {
    return await body();
  } finally {
    if (!readFileSync(path).equals(before)) writeFileSync(path, before);
  }
}
