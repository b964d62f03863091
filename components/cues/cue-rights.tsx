import { FactList } from "@/components/ui/facts";
import { fmt } from "@/components/ui/format";
import { Section, Sentence } from "@/components/ui/sentence";
import { Table } from "@/components/ui/table";

interface ShareLine {
  name: string;
  ipi: string | null;
  role: string;
  shareBps: number;
  accepted: boolean;
}

export interface CueRightsProps {
  libraryName: string;
  oneStop: boolean;
  writers: readonly ShareLine[];
  publishers: readonly ShareLine[];
  /** Names of countries where it is not licensed. */
  restricted: readonly string[];
  refusedUses: readonly string[];
}

/** Who wrote it, who publishes it and who can grant what. */
export function CueRights(props: CueRightsProps) {
  const { libraryName, oneStop, writers, publishers, restricted, refusedUses } = props;
  return (
    <Section className="mt-8" head="Rights">
      <Sentence className="mb-4">
        {oneStop
          ? `One-stop: ${libraryName} licenses the work and the recording, both for 100 %${restricted.length > 0 ? `, except in ${fmt.list(restricted)}` : ", in every country"}.`
          : `Not one-stop: ${libraryName} does not hold every share, so each use is answered by quote.`}{" "}
        Performance in public is licensed by the societies, not here.
        {refusedUses.length > 0 && ` Its writers refuse ${fmt.list(refusedUses)}.`}
      </Sentence>
      <Shares caption="Writers" rows={writers} />
      {publishers.length > 0 && (
        <div className="mt-4">
          <Shares caption="Publishers" rows={publishers} />
        </div>
      )}
    </Section>
  );
}

function Shares({ caption, rows }: { caption: string; rows: readonly ShareLine[] }) {
  return (
    <Table
      caption={caption}
      columns={[
        { key: "name", head: "Name", cell: (row: ShareLine) => row.name },
        { key: "role", head: "Role", cell: (row) => row.role },
        { key: "ipi", head: "IPI", cell: (row) => row.ipi ?? "not given", figures: true },
        { key: "share", head: "Share, %", cell: (row) => fmt.shareBps(row.shareBps), figures: true },
      ]}
      rowKey={(row) => `${row.name} ${row.role}`}
      rows={rows}
      sentence={(row) =>
        `${row.name}, ${row.role}, ${fmt.shareBps(row.shareBps)}\u00a0%${row.ipi ? `, IPI ${row.ipi}` : ""}`
      }
    />
  );
}

export interface CueFactsProps {
  iswc: string | null;
  isrcs: readonly { label: string; isrc: string | null }[];
  otherTitles: readonly string[];
  number: string;
  deal: string;
  yearRecorded: number | null;
  loudness: { lufs: number | null; rangeLu: number | null; truePeakDbtp: number | null };
  described: readonly { name: string; value: string }[];
}

/** Numbers and words by which it is known, and what was measured. */
export function CueFactList(props: CueFactsProps) {
  const { lufs, rangeLu, truePeakDbtp } = props.loudness;
  const measured = [
    lufs === null ? null : fmt.lufs(lufs),
    rangeLu === null ? null : `range ${rangeLu.toFixed(1)}\u00a0LU`,
    truePeakDbtp === null ? null : `true peak ${fmt.dbtp(truePeakDbtp)}`,
  ].filter((entry) => entry !== null);
  const named = props.isrcs.filter(({ isrc }) => isrc !== null);
  return (
    <Section className="mt-8" head="Known as">
      <FactList
        nameWidth="10rem"
        rows={[
          { name: "Catalogue number", value: props.number },
          ...(props.otherTitles.length > 0
            ? [{ name: "Other titles", value: props.otherTitles.join("; ") }]
            : []),
          ...(props.iswc ? [{ name: "ISWC, the work", value: props.iswc }] : []),
          ...(named.length > 0
            ? [
                {
                  name: "ISRC, each recording",
                  value: named.map(({ label, isrc }) => `${isrc} ${label}`).join("; "),
                },
              ]
            : []),
          ...props.described,
          ...(measured.length > 0 ? [{ name: "Measured", value: measured.join(", ") }] : []),
          ...(props.yearRecorded ? [{ name: "Recorded", value: String(props.yearRecorded) }] : []),
        ]}
      />
    </Section>
  );
}
