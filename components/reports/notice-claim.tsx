import { FactList, type FactRow } from "@/components/ui/facts";
import { fmt } from "@/components/ui/format";
import { Title } from "@/components/ui/title";
import type { ReportView } from "@/lib/reports";
import { GROUNDS } from "@/lib/reports/states";

const CONCERNS = { work: "The work", recording: "The recording", both: "Work and recording" };

/** What is claimed, as it was written. */
export function NoticeClaim({ report }: { report: ReportView }) {
  const { claim, target } = report;
  const from = claim.fromS ?? null;
  const to = claim.toS ?? null;
  const span = from === null ? null : to === null ? `from ${fmt.time(from)}` : fmt.span(from, to);
  const rows: (FactRow | null)[] = [
    { name: "Work", value: <Title>{claim.workTitle}</Title> },
    { name: "Concerns", value: CONCERNS[claim.concerns] },
    claim.writers ? { name: "Writers", value: claim.writers } : null,
    { name: "Owner", value: claim.owner },
    claim.isrc || claim.iswc
      ? {
          name: "Numbers",
          value: [claim.isrc && `ISRC ${claim.isrc}`, claim.iswc && `ISWC ${claim.iswc}`]
            .filter(Boolean)
            .join("; "),
        }
      : null,
    claim.release ? { name: "Came out", value: claim.release } : null,
    {
      name: "Where",
      value: target ? (
        <>
          {target.catalogueNumber}, <Title>{target.title}</Title>
          {span && `, ${span}`}
        </>
      ) : (
        <>
          {claim.where}
          {span && `, ${span}`}
        </>
      ),
      below: target ? `Written as “${claim.where}”.` : "No cue of this number or address is held here.",
    },
    { name: "Grounds", value: claim.grounds.map((ground) => GROUNDS[ground]).join(" ") },
    { name: "Why", value: <span className="whitespace-pre-line">{claim.why}</span> },
  ];
  return <FactList rows={rows.filter((row) => row !== null)} />;
}

const CAPACITY = {
  owner: "the owner",
  agent: "an agent of the owner",
  licensee: "a licensee",
  heir: "an heir",
};
const countries = new Intl.DisplayNames("en-GB", { type: "region" });

/** Who sent it: the marketplace's moderators alone. */
export function NoticeContact({ report }: { report: ReportView }) {
  const { contact } = report;
  const rows: (FactRow | null)[] = [
    {
      name: "Name",
      value: contact.name,
      below: `Writes as ${CAPACITY[contact.capacity as keyof typeof CAPACITY] ?? contact.capacity}; signed ${contact.signedName}.`,
    },
    {
      name: "E-mail",
      value: contact.email,
      below: report.addressConfirmed ? "Confirmed." : "Not confirmed yet.",
    },
    { name: "Country", value: countries.of(contact.countryCode) ?? contact.countryCode },
    contact.postal ? { name: "Post", value: contact.postal } : null,
  ];
  return <FactList rows={rows.filter((row) => row !== null)} />;
}
