import { Caution } from "@/components/ui/caution";
import { FactList, type FactRow } from "@/components/ui/facts";
import { fmt } from "@/components/ui/format";
import { Section } from "@/components/ui/sentence";
import { StatusSentence } from "@/components/ui/status-sentence";
import { Title } from "@/components/ui/title";
import { formatIsrc, formatIswc } from "@/lib/kernel/identifiers";
import type { LicencePage } from "@/lib/licensing";

function Hash({ children }: { children: string }) {
  return <span className="font-figures text-small wrap-anywhere">{children}</span>;
}

function PartiesPart({ page }: { page: LicencePage }) {
  const { record, licensee, production } = page;
  const references = Object.entries(production.references ?? {}).filter(([, value]) => value !== null);
  return (
    <Section className="mt-8" head="Who licenses what to whom">
      <FactList
        nameWidth="10rem"
        rows={[
          {
            name: "Licensor",
            value: record.licensor.legalName,
            below: `${record.licensor.capacity}. ${record.licensor.chainReference}`,
          },
          { name: "Licensee", value: licensee.name, below: licensee.address },
          { name: "Its client", value: licensee.endClient ?? "None is named" },
          {
            name: "Production",
            value: production.title,
            below: `${record.production.type}; ${production.parts}`,
          },
          ...(references.length > 0
            ? [
                {
                  name: "References",
                  value: references.map(([name, value]) => `${name} ${value}`).join(", "),
                },
              ]
            : []),
        ]}
      />
    </Section>
  );
}

function CuePart({ page }: { page: LicencePage }) {
  const { cue, shares, recording } = page.record;
  const person = (row: {
    name: string;
    role: string;
    ipi: string | null;
    society: string | null;
    share: string;
  }) =>
    [row.name, row.role, row.ipi ? `IPI ${row.ipi}` : null, row.society, `${row.share} %`]
      .filter(Boolean)
      .join(", ");
  const rows: FactRow[] = [
    {
      name: "Cue",
      value: <Title>{cue.title}</Title>,
      below: `${cue.library} ${cue.catalogueNumber}${cue.iswc ? `, ISWC ${formatIswc(cue.iswc)}` : ""}${cue.otherTitles.length > 0 ? `; also known as ${cue.otherTitles.join(", ")}` : ""}`,
    },
    ...cue.versions.map((version) => ({
      name: version.role,
      value: `${fmt.time(version.durationMs / 1000)}${version.isrc ? `, ISRC ${formatIsrc(version.isrc)}` : ""}`,
      below: (
        <>
          {version.masterSha256 && (
            <>
              Master SHA-256 <Hash>{version.masterSha256}</Hash>.{" "}
            </>
          )}
          As delivered <Hash>{version.deliveredSha256}</Hash>
        </>
      ),
    })),
    { name: "Writers", value: shares.writers.map(person).join("; ") },
    {
      name: "Publishers",
      value: shares.publishers.length > 0 ? shares.publishers.map(person).join("; ") : "Unpublished",
      below: shares.convention,
    },
    {
      name: "Recording",
      value: recording.owner,
      below: [
        recording.phonogramLine,
        ...recording.performers.map(({ name, role }) => `${name}, ${role}`),
      ].join("; "),
    },
  ];
  return (
    <Section className="mt-8" head="The work and the recording">
      <FactList nameWidth="10rem" rows={rows} />
    </Section>
  );
}

function ScopePart({ page }: { page: LicencePage }) {
  const { scope, notIncluded } = page.record;
  return (
    <>
      <Section className="mt-8" head="What it allows">
        <FactList nameWidth="10rem" rows={scope.words.map(({ row, says }) => ({ name: row, value: says }))} />
      </Section>
      <Section className="mt-8" head="What it does not include">
        <ul>
          {notIncluded.map((words) => (
            <li className="border-b border-line py-2.5" key={words}>
              {words}
            </li>
          ))}
        </ul>
      </Section>
    </>
  );
}

function FeePart({ page }: { page: LicencePage }) {
  const { fee, acceptedBy, record } = page;
  const isBroughtIn = record.origin === "brought in";
  const sum = (amount: string) => `${fee.currency} ${amount}`;
  return (
    <Section className="mt-8" head="Fee and acceptance">
      <FactList
        nameWidth="10rem"
        rows={[
          {
            name: "Fee",
            value: `${sum(fee.net)} net`,
            below: isBroughtIn
              ? "Brought in: agreed and paid outside this service; no money of it is in this service's journal."
              : `${fee.basis}, by card ${fee.cardVersion}`,
          },
          { name: "Tax", value: sum(fee.tax), below: fee.taxWords },
          { name: "Paid", value: sum(fee.gross) },
          ...(fee.invoiceNumber
            ? [
                {
                  name: "Invoice",
                  value: fee.invoiceNumber,
                  below: `Payment ${fee.paymentReference ?? "not named"}`,
                },
              ]
            : []),
          {
            name: "Accepted by",
            value: `${acceptedBy.name}, ${acceptedBy.role}`,
            below: `${fmt.dateTime(record.acceptance.acceptedAt)}; ${record.acceptance.method}. ${record.acceptance.authorityStatement}`,
          },
        ]}
      />
    </Section>
  );
}

function HistoryPart({ page }: { page: LicencePage }) {
  return (
    <Section className="mt-8" head="What has happened to it">
      <ul>
        {page.history.map((event) => (
          <StatusSentence
            as="li"
            below={event.words}
            className="border-b border-line py-2"
            key={event.sequence}
            mark={event.kind === "in force" ? "tick" : "open"}
          >
            {fmt.dateTime(event.at)}: {event.kind}
          </StatusSentence>
        ))}
      </ul>
      <p className="mt-2 text-small text-ink-soft">
        A change is added here with its date; none is ever taken away, and the record’s own text never
        changes.
      </p>
    </Section>
  );
}

function ScreeningPart({ page }: { page: LicencePage }) {
  const { screening } = page.record;
  return (
    <Section className="mt-8" head="Screening on file">
      <p>
        Compared on {fmt.date(screening.screenedAt)} with the{" "}
        {fmt.count(screening.recordingsCompared, "recording")} held then: {screening.result}
      </p>
      <p className="mt-1 text-small text-ink-soft">
        Certificate {screening.certificate}, index place {screening.indexSequence}, engine{" "}
        {screening.engineVersion}.
      </p>
      <Caution className="mt-2" notCompared="Melody, harmony and lyrics were not compared." />
    </Section>
  );
}

function TermsPart({ page }: { page: LicencePage }) {
  const { terms, warranties, amendments, claimsContact, cueSheetLines } = page.record;
  return (
    <>
      <Section className="mt-8" head="Cue-sheet lines" note="ready to paste">
        <pre className="font-sans text-small whitespace-pre-wrap">{cueSheetLines.join("\n")}</pre>
      </Section>
      <Section className="mt-8" head="Warranties and their limits">
        <ul>
          {warranties.map((words) => (
            <li className="py-1" key={words}>
              {words}
            </li>
          ))}
        </ul>
      </Section>
      <Section className="mt-8" head="The terms in full" note={terms.version}>
        <div className="max-w-measure whitespace-pre-line">{terms.text}</div>
        <p className="mt-2 text-small text-ink-soft">
          SHA-256 <Hash>{terms.sha256}</Hash>
        </p>
      </Section>
      <Section className="mt-8" head="Amendments and claims">
        <p>
          {amendments.length === 0
            ? "There are no amendments."
            : amendments.map(({ kind, number, words }) => `${kind} ${number}: ${words}`).join(" ")}
        </p>
        <p className="mt-1">
          Claims about the music go to {claimsContact.name}, {claimsContact.email}.
        </p>
      </Section>
    </>
  );
}

function SignaturePart({ page }: { page: LicencePage }) {
  const { record } = page;
  const { log, keyId, algorithm } = record.signing;
  return (
    <Section className="mt-8" head="Signature">
      <FactList
        nameWidth="10rem"
        rows={[
          {
            name: "Record",
            value: record.number,
            below: `${record.format}, signed ${fmt.dateTime(record.issuedAt)}`,
          },
          { name: "Key", value: `${keyId}, ${algorithm}` },
          { name: "SHA-256", value: <Hash>{page.sha256}</Hash> },
          {
            name: "Public log",
            value: `${log.day}, place ${log.position}`,
            below: page.isInPublishedLog
              ? "The day’s root is published and signed."
              : "The day’s root is published when the day is over.",
          },
          {
            name: "Proof code",
            value: page.proofCode,
            below: `Opens the public page at ${record.verify.address}`,
          },
        ]}
      />
    </Section>
  );
}

/** All that a licence record says, in the order a reader needs it. */
export function RecordPaper({ page }: { page: LicencePage }) {
  return (
    <>
      <div className="grid gap-x-10 @wide:grid-cols-2">
        <div>
          <PartiesPart page={page} />
          <FeePart page={page} />
        </div>
        <div>
          <HistoryPart page={page} />
          <ScreeningPart page={page} />
        </div>
      </div>
      <ScopePart page={page} />
      <CuePart page={page} />
      <TermsPart page={page} />
      <SignaturePart page={page} />
    </>
  );
}
