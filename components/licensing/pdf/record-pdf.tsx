import { Document, Page, renderToBuffer, Text, View } from "@react-pdf/renderer";
import { STANDING_CAUTION } from "@/components/ui/caution";
import { fmt } from "@/components/ui/format";
import { formatIsrc, formatIswc } from "@/lib/kernel/identifiers";
import type { LicencePage } from "@/lib/licensing";
import { registerFonts } from "./fonts";
import { Fact, look, Part, Square, Work } from "./parts";

type Props = { page: LicencePage };

function Head({ page }: Props) {
  const { record, licensee, production } = page;
  const address = `${record.verify.address}/${page.proofCode.replaceAll("-", "")}`;
  return (
    <View style={{ flexDirection: "row", gap: 18 }}>
      <View style={{ flex: 1 }}>
        <Text style={look.soft}>
          Licence record {record.number}
          {record.origin === "brought in" ? ", brought in" : ""}
          {record.demonstration ? ". Demonstration: every name, work and price is invented" : ""}
        </Text>
        <Text style={look.head}>
          {record.licensor.legalName} lets {licensee.name} use <Work>{record.cue.title}</Work> in{" "}
          {production.title}.
        </Text>
        <Text style={{ marginTop: 6 }}>
          {page.today.sentence} The state on {fmt.date(`${page.today.date}T12:00:00Z`)}; the public page has
          today’s.
        </Text>
      </View>
      <View style={{ width: 112 }}>
        <Square sizePt={86} text={address} />
        <Text style={look.soft}>{page.proofCode}</Text>
        <Text style={[look.soft, { fontSize: 7 }]}>{record.verify.address}</Text>
      </View>
    </View>
  );
}

function Parties({ page }: Props) {
  const { record, licensee, production, fee, acceptedBy } = page;
  const sum = (amount: string) => `${fee.currency} ${amount}`;
  return (
    <>
      <Part head="Who licenses what to whom">
        <Fact below={record.licensor.chainReference} name="Licensor">
          {record.licensor.legalName}, {record.licensor.capacity}
        </Fact>
        <Fact below={licensee.address} name="Licensee">
          {licensee.name}
        </Fact>
        <Fact name="Its client">{licensee.endClient ?? "None is named"}</Fact>
        <Fact below={`${record.production.type}; ${production.parts}`} name="Production">
          {production.title}
        </Fact>
      </Part>
      <Part head="Fee and acceptance">
        <Fact
          below={
            record.origin === "brought in"
              ? "Agreed and paid outside this service."
              : `${fee.basis}, by card ${fee.cardVersion}`
          }
          name="Fee"
        >
          {sum(fee.net)} net
        </Fact>
        <Fact below={fee.taxWords} name="Tax, and in all">
          {sum(fee.tax)}, {sum(fee.gross)}
        </Fact>
        {fee.invoiceNumber ? (
          <Fact below={`Payment ${fee.paymentReference ?? "not named"}`} name="Invoice">
            {fee.invoiceNumber}
          </Fact>
        ) : null}
        <Fact
          below={`${record.acceptance.method}. ${record.acceptance.authorityStatement}`}
          name="Accepted by"
        >
          {acceptedBy.name}, {acceptedBy.role}, {fmt.dateTime(record.acceptance.acceptedAt)}
        </Fact>
      </Part>
    </>
  );
}

function Scope({ page }: Props) {
  const { scope, notIncluded } = page.record;
  return (
    <>
      <Part head="What it allows">
        {scope.words.map(({ row, says }) => (
          <Fact key={row} name={row}>
            {says}
          </Fact>
        ))}
      </Part>
      <Part head="What it does not include">
        {notIncluded.map((words) => (
          <Text key={words} style={look.row}>
            {words}
          </Text>
        ))}
      </Part>
    </>
  );
}

function Cue({ page }: Props) {
  const { cue, shares, recording, cueSheetLines } = page.record;
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
  return (
    <>
      <Part head="The work and the recording">
        <Fact
          below={`${cue.library} ${cue.catalogueNumber}${cue.iswc ? `, ISWC ${formatIswc(cue.iswc)}` : ""}${cue.otherTitles.length > 0 ? `; also ${cue.otherTitles.join(", ")}` : ""}`}
          name="Cue"
        >
          <Work>{cue.title}</Work>
        </Fact>
        {cue.versions.map((version) => (
          <Fact
            below={`SHA-256 of the master, and of the file as delivered:\n${version.masterSha256 ?? "not rendered when this was signed"}\n${version.deliveredSha256}`}
            key={version.versionId}
            name={version.role}
          >
            {fmt.time(version.durationMs / 1000)}
            {version.isrc ? `, ISRC ${formatIsrc(version.isrc)}` : ""}
          </Fact>
        ))}
        <Fact name="Writers">{shares.writers.map(person).join("; ")}</Fact>
        <Fact below={shares.convention} name="Publishers">
          {shares.publishers.length > 0 ? shares.publishers.map(person).join("; ") : "Unpublished"}
        </Fact>
        <Fact
          below={recording.performers.map(({ name, role }) => `${name}, ${role}`).join("; ")}
          name="Recording"
        >
          {recording.owner}; {recording.phonogramLine}
        </Fact>
      </Part>
      <Part head="Cue-sheet lines">
        {cueSheetLines.map((line) => (
          <Text key={line} style={look.row}>
            {line}
          </Text>
        ))}
      </Part>
    </>
  );
}

function Standing({ page }: Props) {
  const { record, history } = page;
  const { screening } = record;
  return (
    <>
      <Part head="What has happened to it">
        {history.map((event) => (
          <Fact below={event.words} key={event.sequence} name={fmt.date(event.at, record.scope.term.zone)}>
            {event.kind}
          </Fact>
        ))}
      </Part>
      <Part head="Screening on file">
        <Text>
          Compared on {fmt.date(screening.screenedAt)} with{" "}
          {fmt.count(screening.recordingsCompared, "recording")} (index place {screening.indexSequence},
          engine {screening.engineVersion}, certificate {screening.certificate}): {screening.result} Melody,
          harmony and lyrics were not compared. {STANDING_CAUTION}
        </Text>
      </Part>
    </>
  );
}

function Terms({ page }: Props) {
  const { record } = page;
  const { terms, warranties, amendments, claimsContact, signing } = record;
  return (
    <>
      <Part head="Warranties and their limits">
        {warranties.map((words) => (
          <Text key={words}>{words}</Text>
        ))}
      </Part>
      <Part head={`The terms in full, version ${terms.version}`}>
        {terms.text.split("\n\n").map((clause) => (
          <Text key={clause} style={{ marginTop: 4 }}>
            {clause}
          </Text>
        ))}
        <Text style={look.soft}>SHA-256 {terms.sha256}</Text>
      </Part>
      <Part head="Amendments and claims">
        <Text>
          {amendments.length === 0
            ? "There are no amendments."
            : amendments.map(({ kind, number, words }) => `${kind} ${number}: ${words}`).join(" ")}{" "}
          Claims go to {claimsContact.name}, {claimsContact.email}.
        </Text>
      </Part>
      <Part head="Signature">
        <Fact below={`${record.format}, signed ${fmt.dateTime(record.issuedAt)}`} name="Record">
          {record.number}
        </Fact>
        <Fact name="Key">
          {signing.keyId}, {signing.algorithm}
        </Fact>
        <Fact name="SHA-256">{page.sha256}</Fact>
        <Fact name="Public log">
          {signing.log.day}, place {signing.log.position}
        </Fact>
        <Text style={[look.soft, { marginTop: 4 }]}>
          This page is a rendering. What is signed is the JSON file of the same licence, which the verifier
          checks without this service; both say the same.
        </Text>
      </Part>
    </>
  );
}

function RecordPdf({ page }: Props) {
  const { number, issuedAt } = page.record;
  return (
    <Document
      author="Sedgewren"
      creationDate={new Date(issuedAt)}
      language="en-GB"
      subject={page.record.cue.title}
      title={`Licence record ${number}`}
    >
      <Page size="A4" style={look.page}>
        <View fixed style={look.foot}>
          <Text>
            {number}, proof code {page.proofCode}
          </Text>
          <Text render={({ pageNumber, totalPages }) => `Page ${pageNumber} of ${totalPages}`} />
        </View>
        <View style={look.body}>
          <Head page={page} />
          <Parties page={page} />
          <Scope page={page} />
          <Cue page={page} />
          <Standing page={page} />
          <Terms page={page} />
        </View>
      </Page>
    </Document>
  );
}

/** The licence record on paper, with everything that the page and the signed file say. */
export async function renderRecordPdf(page: LicencePage): Promise<Buffer> {
  registerFonts();
  return renderToBuffer(<RecordPdf page={page} />);
}
