import { chmodSync, existsSync, mkdirSync } from "node:fs";
import { delimiter, join } from "node:path";
import { fileURLToPath } from "node:url";

export const projectDir = fileURLToPath(new URL("../../../", import.meta.url)).replace(/\/$/, "");
export const dataDir = join(projectDir, ".data");

// Readable by others only in the sense of passing through: the database's own account has to reach its folder.
export function makeDataDir(...parts) {
  mkdirSync(dataDir, { recursive: true });
  chmodSync(dataDir, 0o711);
  const path = join(dataDir, ...parts);
  mkdirSync(path, { recursive: true });
  return path;
}

export function findProgram(name) {
  const folders = [...(process.env.PATH ?? "").split(delimiter), "/usr/local/sbin", "/usr/sbin", "/sbin"];
  for (const folder of folders) {
    const path = join(folder, name);
    if (folder !== "" && existsSync(path)) return path;
  }
  return null;
}
