"use client";

import { FactList } from "@/components/ui/facts";
import { fmt } from "@/components/ui/format";
import type { MarkKind } from "@/components/ui/mark";
import { Section } from "@/components/ui/sentence";
import { StatusSentence } from "@/components/ui/status-sentence";
import { EDITORIAL_CODES } from "@/lib/deliveries/states";
import { FINDING_OUTCOMES, type FindingOutcome, RIGHTS_CODES } from "@/lib/review/states";
import { CasePlaces } from "./case-places";
import { RELATION_WORDS } from "./version-words";
import type { CaseOnWire, DeliveryOnWire } from "./wire";

const WORDS: Record<string, { mark: MarkKind; sentence: string }> = {
  "nothing in common": { mark: "done", sentence: "Nothing in common was found; it goes on." },
  explained: { mark: "done", sentence: "The match is explained; it goes on." },
  "send back": { mark: "warn", sentence: "It was sent back to you for a correction." },
  "hold for rights": { mark: "held", sentence: "It is held while a rights question is open." },
  "cannot be listed": { mark: "warn", sentence: "It cannot be listed." },
  "refer out": { mark: "held", sentence: "It waits for an outside opinion." },
};

export function codeWords(code: string): string {
  const words = { ...EDITORIAL_CODES, ...RIGHTS_CODES } as Record<string, string>;
  return words[code] ? `${code}, ${words[code]}` : code;
}

interface FindingPartProps {
  delivery: DeliveryOnWire;
  caseOf: CaseOnWire;
  zone: string;
}

/** What was asked and answered in a case, in its order. */
export function AskedAndAnswered({ caseOf, zone }: { caseOf: CaseOnWire; zone: string }) {
  if (caseOf.messages.length === 0) return null;
  return (
    <Section className="mt-7" head="Asked and answered" note={`case ${caseOf.number}`}>
      <ol>
        {caseOf.messages.map((message) => (
          <li className="border-b border-line py-2.5" key={`${message.kind}:${message.at}`}>
            <p className="max-w-measure whitespace-pre-line">{message.words}</p>
            <p className="text-small text-ink-soft">
              {message.kind === "question" ? "asked by a moderator" : "answered"},{" "}
              {fmt.dateTime(message.at, zone)}
              {message.hasFile && ", with a file"}
            </p>
          </li>
        ))}
      </ol>
    </Section>
  );
}

/** What was found, by whom as a role, for which reasons, and how to contest it. */
export function FindingPart({ delivery, caseOf, zone }: FindingPartProps) {
  const findings = caseOf.groups.flatMap((group) =>
    group.finding ? [{ group, finding: group.finding }] : [],
  );
  if (findings.length === 0) return null;
  const mayContest = findings.some(
    ({ finding }) => FINDING_OUTCOMES[finding.outcome as FindingOutcome]?.effect !== "clear",
  );
  return (
    <Section className="mt-7" head="What was found" note={`case ${caseOf.number}`}>
      {findings.map(({ group, finding }, index) => {
        const words = WORDS[finding.outcome] ?? { mark: "open" as const, sentence: finding.outcome };
        return (
          // biome-ignore lint/suspicious/noArrayIndexKey: a group has one finding and no name on this side
          <div className="mt-3" key={index}>
            <StatusSentence
              below={`${fmt.dateTime(finding.decidedAt, zone)}, by a moderator${finding.confirmed ? ", confirmed by a second person who had no part in it" : ""}`}
              mark={words.mark}
            >
              {words.sentence}
            </StatusSentence>
            <FactList
              nameWidth="10rem"
              rows={[
                {
                  name: "About",
                  value: `It looks like ${RELATION_WORDS[group.relation] ?? group.relation}; the other side is ${group.reference}.`,
                },
                ...(finding.explainedBy ? [{ name: "Explained by", value: finding.explainedBy }] : []),
                ...(finding.codes.length > 0
                  ? [{ name: "Codes", value: fmt.list(finding.codes.map(codeWords)) }]
                  : []),
                { name: "Reasons", value: <span className="whitespace-pre-line">{finding.reasons}</span> },
                ...(finding.notDecided ? [{ name: "Not decided", value: finding.notDecided }] : []),
              ]}
            />
          </div>
        );
      })}
      <div className="mt-4">
        <CasePlaces caseOf={caseOf} delivery={delivery} />
      </div>
      {mayContest && delivery.isDeliverer && (
        <p className="mt-4 max-w-measure">
          You may contest this, free of charge: answer the letter that brought you these reasons and say what
          is wrong with them. Somebody who had no part in the finding reads your answer.
        </p>
      )}
    </Section>
  );
}
