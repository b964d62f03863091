import { chmodSync, readFileSync, renameSync, writeFileSync } from "node:fs";

const NAME = /^[A-Z][A-Z0-9_]*$/;

/**
 * KEY=value lines that Node's --env-file and a POSIX shell's `.` read alike: every value stands in
 * double quotes when it holds anything but plain characters, and characters that the two read
 * differently are refused.
 */
export function formatEnv(values) {
  const lines = [];
  for (const [name, value] of Object.entries(values)) {
    if (!NAME.test(name)) throw new Error(`not a name for the environment: ${name}`);
    const text = String(value);
    if (/["\\$`\n\r]/.test(text)) throw new Error(`${name} holds a character that an env file cannot carry`);
    lines.push(/^[\w.:/@+,=-]*$/.test(text) ? `${name}=${text}` : `${name}="${text}"`);
  }
  return `${lines.join("\n")}\n`;
}

export function parseEnv(text) {
  const values = {};
  for (const line of text.split("\n")) {
    const trimmed = line.trim();
    if (trimmed === "" || trimmed.startsWith("#")) continue;
    const equals = trimmed.indexOf("=");
    const name = trimmed.slice(0, Math.max(equals, 0));
    if (!NAME.test(name)) throw new Error(`not a KEY=value line: ${trimmed.slice(0, 40)}`);
    const raw = trimmed.slice(equals + 1);
    values[name] = raw.length > 1 && raw.startsWith('"') && raw.endsWith('"') ? raw.slice(1, -1) : raw;
  }
  return values;
}

/** Written whole and renamed into place, so that a reader never sees half a file; only its owner can read it. */
export function writePrivateFile(path, text) {
  const draft = `${path}.${process.pid}.new`;
  writeFileSync(draft, text, { mode: 0o600 });
  chmodSync(draft, 0o600);
  renameSync(draft, path);
}

export function readEnvFile(path) {
  try {
    return parseEnv(readFileSync(path, "utf8"));
  } catch (error) {
    if (error.code === "ENOENT") return null;
    throw error;
  }
}
