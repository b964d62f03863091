import { versionRoleLabel } from "@/lib/catalogue/version-roles";
import type { DeliveryRow } from "./own-delivery";
import { STANDINGS, type Standing } from "./states";

export type { Standing };

const standingOfVersion: Record<string, Standing> = {
  refused: "refused",
  held: "held for a person",
  returned: "needs you",
  unreadable: "needs you",
  arrived: "working",
  measuring: "working",
  screening: "working",
  measured: "clear",
  clear: "clear",
  listed: "clear",
};

/** The worst of a delivery's versions, and one sentence that says the state of affairs. */
export function standingOf(
  delivery: Pick<DeliveryRow, "state" | "writersAcceptedAt" | "editorialAcceptedAt">,
  versions: readonly { state: string; versionRole: string }[],
  writers: readonly { state: string; name: string }[] = [],
): { standing: Standing | null; words: string } {
  if (delivery.state === "draft") return { standing: null, words: draftWords(versions) };
  if (delivery.state === "refused")
    return { standing: "refused", words: "It cannot be listed. The reasons are below." };
  if (delivery.state === "returned")
    return {
      standing: "needs you",
      words: "The library sent it back. What to change is below; everything else is kept.",
    };
  const standings = versions.map((version) => standingOfVersion[version.state] ?? "working");
  const worst = STANDINGS.find((standing) => standings.includes(standing)) ?? "clear";
  const missing = writers.find((writer) => writer.state === "declined" || writer.state === "lapsed");
  if (missing && STANDINGS.indexOf(worst) > STANDINGS.indexOf("needs you"))
    return {
      standing: "needs you",
      words:
        missing.state === "declined"
          ? `${missing.name} declined the shares. Agree on them, then ask again.`
          : `${missing.name} did not answer in time. Ask again when you have spoken.`,
    };
  if (worst !== "clear") return { standing: worst, words: sentence(worst, versions) };
  if (delivery.state === "listed") return { standing: "clear", words: "It is listed." };
  const waiting = [
    delivery.writersAcceptedAt ? null : "its co-writers",
    delivery.editorialAcceptedAt ? null : "the library to listen",
  ].filter((part) => part !== null);
  if (waiting.length > 0)
    return {
      standing: "waiting for others",
      words: `Screened and clear. It waits for ${waiting.join(" and ")}.`,
    };
  return { standing: "clear", words: "Screened and accepted; it is being listed." };
}

const SMALL = ["No", "One", "Two", "Three", "Four", "Five", "Six", "Seven", "Eight", "Nine"];
const counted = (count: number, one: string, many: string) =>
  `${SMALL[count] ?? count} ${count === 1 ? one : many}`;

function draftWords(versions: readonly { state: string; versionRole: string }[]): string {
  if (versions.length === 0) return "A draft with no file yet.";
  const passing = versions.filter((version) => version.state === "measured").length;
  const back = versions.filter((version) => version.state === "returned" || version.state === "unreadable");
  const waiting = versions.length - passing - back.length;
  const first = back[0];
  const parts = [
    passing > 0
      ? counted(passing, "version passes the checks so far.", "versions pass the checks so far.")
      : null,
    first && back.length === 1
      ? `The ${versionRoleLabel(first.versionRole)} needs a new file from you.`
      : null,
    back.length > 1 ? counted(back.length, "", "versions need a new file from you.") : null,
    waiting > 0 ? counted(waiting, "file is being measured.", "files are being measured.") : null,
  ];
  return parts.filter((part) => part !== null).join(" ");
}

function sentence(worst: Standing, versions: readonly { state: string; versionRole: string }[]): string {
  const count = versions.filter((version) => standingOfVersion[version.state] === worst).length;
  const some = count === 1 ? "One version" : `${count} versions`;
  switch (worst) {
    case "refused":
      return `${some} cannot be listed. The reasons are below.`;
    case "rights hold":
      return "A rights question is open. Nothing is decided yet.";
    case "needs you":
      return `${some} ${count === 1 ? "needs" : "need"} a new file from you. Everything else is kept.`;
    case "held for a person":
      return `${some} ${count === 1 ? "waits" : "wait"} for a person to listen. This often has an ordinary reason; nothing is decided yet.`;
    case "working":
      return `${some} ${count === 1 ? "is" : "are"} being screened.`;
    default:
      return "Screened and clear.";
  }
}
