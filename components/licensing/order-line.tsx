import { TextLink } from "@/components/ui/button";
import { Disclosure } from "@/components/ui/disclosure";
import { fmt } from "@/components/ui/format";
import { Section } from "@/components/ui/sentence";
import { StatusSentence } from "@/components/ui/status-sentence";
import { Title } from "@/components/ui/title";
import type { OrderLinePage } from "@/lib/licensing";
import { FactorTable } from "./factor-table";

const MARKS: Record<string, "tick" | "warn" | "held" | "open"> = {
  "in force": "tick",
  "dispute withdrawn": "tick",
  "payment disputed": "warn",
  "rights question open": "held",
};

const ENDED = ["refunded", "payment reversed", "rescinded", "cancelled", "superseded"];

function MasterList({ line, mayFetch }: { line: OrderLinePage; mayFetch: boolean }) {
  const isIssued = line.status !== null;
  if (!isIssued || ENDED.includes(line.status?.kind ?? ""))
    return (
      <p className="mt-1 text-ink-soft">
        With {fmt.list(line.versions.map(({ role, durationS }) => `${role} (${fmt.time(durationS)})`))}
        {line.licenceNumber !== null && !isIssued ? "; the masters are being prepared." : "."}
      </p>
    );
  return (
    <ul className="mt-1">
      {line.versions.map(({ recordingId, role, durationS, hasMaster }) => (
        <li className="py-0.5" key={recordingId}>
          {role}, {fmt.time(durationS)}:{" "}
          {mayFetch && hasMaster ? (
            <a
              aria-label={`Download the master of ${line.title}, ${role}`}
              className="link target"
              href={`/api/records/${line.licenceNumber}/masters/${recordingId}`}
            >
              download the master
            </a>
          ) : (
            <span className="text-ink-soft">{hasMaster ? "master ready" : "master being prepared"}</span>
          )}
        </li>
      ))}
    </ul>
  );
}

/** One licence of an order: what it is for, what it costs and why, where it stands, its masters. */
export function OrderLine({ line, mayFetch }: { line: OrderLinePage; mayFetch: boolean }) {
  return (
    <Section
      className="mt-7"
      head={
        <>
          <Title>{line.title}</Title>{" "}
          <span className="font-normal text-ink-soft">{line.catalogueNumber}</span>
        </>
      }
      note={line.net}
    >
      <p>{line.useWords}.</p>
      {line.status && line.licenceNumber && (
        <StatusSentence
          below={`${fmt.dateTime(line.status.at)}; ${line.status.words}`}
          className="mt-2"
          mark={MARKS[line.status.kind] ?? "open"}
        >
          <TextLink href={`/records/${line.licenceNumber}`}>{line.licenceNumber}</TextLink>:{" "}
          {line.status.kind}
        </StatusSentence>
      )}
      <MasterList line={line} mayFetch={mayFetch} />
      {line.factors.length > 0 && (
        <Disclosure className="mt-2" words={`Why ${line.net}`}>
          <FactorTable currency="" factors={line.factors} />
          <p className="mt-2">
            {line.priceSentence}, by card {line.cardVersion}.
          </p>
        </Disclosure>
      )}
    </Section>
  );
}
