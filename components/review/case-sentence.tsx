import type { ReactNode } from "react";
import { fmt } from "@/components/ui/format";
import { Title } from "@/components/ui/title";
import type { CaseGroupView, CaseView } from "@/lib/review";

type Hit = CaseGroupView["hits"][number];

/** "2 semitones up and 3 % faster", or nothing where the copy is unaltered. */
export function alterationWords(hit: Pick<Hit, "speed" | "pitchSemitones" | "reversed">): string | null {
  const parts: string[] = [];
  if (Math.abs(hit.pitchSemitones) >= 0.05) {
    const size = Math.abs(hit.pitchSemitones);
    const words = Math.abs(size - Math.round(size)) < 0.05 ? String(Math.round(size)) : size.toFixed(2);
    parts.push(
      `${words}\u00a0${words === "1" ? "semitone" : "semitones"} ${hit.pitchSemitones > 0 ? "up" : "down"}`,
    );
  }
  if (Math.abs(hit.speed - 1) >= 0.002) {
    const size = Math.abs(hit.speed - 1) * 100;
    parts.push(
      `${size >= 10 || Math.abs(size - Math.round(size)) < 0.1 ? Math.round(size) : size.toFixed(1)}\u00a0% ${hit.speed > 1 ? "faster" : "slower"}`,
    );
  }
  if (hit.reversed) parts.push("played backwards");
  return parts.length ? fmt.list(parts) : null;
}

const RELATION_WORDS: Record<string, string> = {
  "same recording": "it looks like the same recording",
  "altered copy": "it looks like an altered copy",
  excerpt: "it looks like an excerpt",
  "shared material": "it looks like shared material",
  "own version": "it looks like a version of the deliverer's own work",
  "same tune": "it looks like the same tune",
};

export function referenceName(group: CaseGroupView): ReactNode {
  return group.reference.title ? <Title>{group.reference.title}</Title> : group.reference.words;
}

/** The state of affairs of a case, from its surest hit. */
export function caseSentence(view: CaseView): ReactNode {
  const group = view.groups.find((candidate) => candidate.hits.length > 0);
  const hit = group?.hits[0];
  if (!group || !hit) {
    const reason = view.groups[0]?.relation;
    return (
      <>
        <Title>{view.title}</Title>{" "}
        {reason === "no family match"
          ? "holds a version that does not match its own full mix: is it the right file?"
          : "could not be compared as a whole; a person must listen."}
      </>
    );
  }
  const first = hit.passages[0];
  const last = hit.passages.at(-1);
  if (!first || !last) return <Title>{view.title}</Title>;
  const altered = alterationWords(hit);
  const refStart = Math.min(...hit.passages.map((passage) => passage.refStartS));
  const refEnd = Math.max(...hit.passages.map((passage) => passage.refEndS));
  return (
    <>
      {fmt.span(first.startS, last.endS)} of <Title>{view.title}</Title> lines up with{" "}
      {fmt.span(refStart, refEnd)} of {referenceName(group)}
      {hit.passages.length > 1 && <> in {fmt.countWord(hit.passages.length, "passage")}</>}
      {altered && (
        <>
          , <b className="font-strong">{altered}</b>
        </>
      )}
      : {RELATION_WORDS[hit.relation] ?? hit.relation}
      {hit.channel !== "mid" && `, in the ${hit.channel} channel`}.
    </>
  );
}
