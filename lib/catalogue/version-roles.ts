/** Roles a version can have in its family. A role ending in ":" takes a name after it, as in "without:piano". */

export interface VersionRole {
  readonly id: string;
  readonly label: string;
  readonly rule: string;
  /** Nominal file length; the file may differ by `exactLengthToleranceS`. */
  readonly exactS?: number;
  readonly longestS?: number;
}

/** Common practice: advert slots are exact. */
export const exactLengthToleranceS = 0.05;

const cutRule = (seconds: number) =>
  `Exactly ${seconds} seconds (±0.05), with its last hit at least half a second before the end.`;

export const versionRoles = [
  { id: "full", label: "full", rule: "The complete mix and the head of its family; one in each family." },
  { id: "instrumental", label: "instrumental", rule: "The full mix without any voice." },
  { id: "no-lead", label: "no lead", rule: "The full mix without its lead line." },
  { id: "bed", label: "bed", rule: "No melody, made to lie under speech." },
  { id: "no-drums", label: "no drums", rule: "The full mix without drums or percussion." },
  { id: "drums-and-bass", label: "drums and bass", rule: "Only the rhythm section." },
  { id: "light", label: "light", rule: "A thinner mix with fewer layers than the full one." },
  { id: "a-cappella", label: "a cappella", rule: "Voices only, no accompaniment." },
  { id: "60", label: "60", rule: cutRule(60), exactS: 60 },
  { id: "30", label: "30", rule: cutRule(30), exactS: 30 },
  { id: "20", label: "20", rule: cutRule(20), exactS: 20 },
  { id: "15", label: "15", rule: cutRule(15), exactS: 15 },
  { id: "10", label: "10", rule: cutRule(10), exactS: 10 },
  { id: "6", label: "6", rule: cutRule(6), exactS: 6 },
  {
    id: "sting",
    label: "sting",
    rule: "A short closing phrase, at most seven seconds, tail included.",
    longestS: 7,
  },
  { id: "bumper", label: "bumper", rule: "A short phrase that leads in or out of a break." },
  { id: "loop", label: "loop", rule: "Repeats without a seam: its end meets its beginning." },
  { id: "intro", label: "intro", rule: "The opening alone." },
  { id: "ending", label: "ending", rule: "The closing alone." },
  { id: "without:", label: "without", rule: "The full mix less one named layer." },
  { id: "only:", label: "only", rule: "One named layer or group, heard alone as a version of its own." },
  {
    id: "stem:",
    label: "stem",
    rule: "One named layer at full length; all stems together sum to the full mix.",
  },
  { id: "treated:", label: "treated", rule: "The full mix passed through a named treatment." },
  { id: "clean", label: "clean", rule: "The lyric without its explicit words." },
  { id: "remaster", label: "remaster", rule: "The same mix mastered again." },
  { id: "re-record", label: "re-record", rule: "The same work in a new performance." },
  { id: "live", label: "live", rule: "A performance recorded before an audience." },
] as const satisfies readonly VersionRole[];

type ListedRoleId = (typeof versionRoles)[number]["id"];
type OpenRoleId = Extract<ListedRoleId, `${string}:`>;

/** A role as stored with a version: a listed one, or an open one with its name. */
export type VersionRoleId = Exclude<ListedRoleId, OpenRoleId> | `${OpenRoleId}${string}`;

export function findVersionRole(id: string): VersionRole | null {
  const colon = id.indexOf(":");
  const listedId = colon < 0 ? id : id.slice(0, colon + 1);
  const role = versionRoles.find((candidate) => candidate.id === listedId);
  if (!role || (colon >= 0 && colon === id.length - 1)) return null;
  return role;
}

export function versionRoleLabel(id: string): string {
  const role = findVersionRole(id);
  if (!role) return id;
  const colon = id.indexOf(":");
  if (colon < 0) return role.label;
  const name = id.slice(colon + 1);
  if (role.id === "treated:") return name;
  return role.id === "only:" ? `${name} only` : `${role.label} ${name}`;
}
