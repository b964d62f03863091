import { versionRoles } from "@/lib/catalogue/version-roles";

const WORDS: readonly [RegExp, string][] = [
  [/\b(no|without)[ _-]?drums?\b/, "no-drums"],
  [/\bno[ _-]?(lead|melody)\b/, "no-lead"],
  [/\b(no|without)[ _-]([a-z]+)\b/, "without:"],
  [/\bstem[ _-]([a-z]+)\b/, "stem:"],
  [/\b(instrumental|inst)\b/, "instrumental"],
  [/\b(a[ _-]?cappella|acap)\b/, "a-cappella"],
  [/\b(drums?[ _-]?(and|n|&)?[ _-]?bass)\b/, "drums-and-bass"],
  [/\b(underscore|bed)\b/, "bed"],
  [/\b(60|30|20|15|10|6)( ?s(ec)?)?\b(?! ?bpm)/, ""],
];

/** Guesses a version's role from its file name. A hint that the person may change, never identity. */
export function guessRole(fileName: string, taken: readonly string[]): string {
  const words = fileName
    .toLowerCase()
    .replace(/\.[a-z0-9]{2,5}$/, "")
    .replace(/\d{2,3}(\.\d)?bpm/, "")
    .replace(/^[a-z]{2,4}\d{3,5}-\d{2}_/, "")
    .replace(/_/g, " ");
  for (const [pattern, role] of WORDS) {
    const match = pattern.exec(words);
    if (!match) continue;
    if (role.endsWith(":")) return `${role}${match[2] ?? match[1]}`;
    return role || (match[1] ?? "full");
  }
  for (const role of versionRoles) {
    if (!role.id.endsWith(":") && new RegExp(`\\b${role.label}\\b`).test(words)) return role.id;
  }
  return taken.includes("full") ? "treated:other" : "full";
}
