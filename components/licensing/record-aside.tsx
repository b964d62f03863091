import type { Act } from "@/components/account/use-act";
import { ButtonLink, TextLink } from "@/components/ui/button";
import { fmt } from "@/components/ui/format";
import { AsideTitle } from "@/components/ui/page";
import { Problem } from "@/components/ui/problem";
import { Section } from "@/components/ui/sentence";
import { StatusSentence } from "@/components/ui/status-sentence";
import type { LicencePage } from "@/lib/licensing";
import type { Withholdable } from "@/lib/licensing/states";
import { WithheldForm } from "./withheld-form";

interface RecordAsideProps {
  page: LicencePage;
  /** A master was asked for that is still being rendered. */
  isPreparing: boolean;
  setWithheld: Act<{ number: string; withheld: Withholdable[] }, unknown>;
}

/** What is kept and sent on: the signed file, the paper, the masters, the public page. */
export function RecordAside({ page, isPreparing, setWithheld }: RecordAsideProps) {
  const { number } = page.record;
  return (
    <div className="grid gap-6">
      <div>
        <AsideTitle below="Give whoever asks the proof code; the number alone opens nothing.">
          Keep it, send it on
        </AsideTitle>
        <div className="grid gap-2.5">
          <ButtonLink download href={`/api/records/${number}/pdf`} kind="main" wide>
            Download the record as PDF
          </ButtonLink>
          <ButtonLink download href={`/api/records/${number}/json`} wide>
            The same, signed, as JSON
          </ButtonLink>
        </div>
        <p className="mt-4">
          Proof code <b className="figures">{page.proofCode}</b>
          <span className="block text-small">
            <TextLink href={`/check/${page.proofCode.replaceAll("-", "")}`}>Open the public page</TextLink>
          </span>
        </p>
      </div>
      {page.isLicensees && <Masters isPreparing={isPreparing} page={page} />}
      {page.isLicensees && page.mayApprove && (
        <WithheldForm change={setWithheld} number={number} withheld={page.withheld} />
      )}
    </div>
  );
}

function Masters({ page, isPreparing }: { page: LicencePage; isPreparing: boolean }) {
  const { record, masters, downloads } = page;
  return (
    <Section head="Masters" note="48 kHz, 24 bit">
      {isPreparing && (
        <StatusSentence
          below="It is rendered once and then kept; ask again in a minute."
          className="mb-2"
          mark="half"
        >
          That master is being prepared.
        </StatusSentence>
      )}
      {page.today.answer === "not in force" && (
        <Problem className="mb-2">Masters go with a licence in force.</Problem>
      )}
      <ul>
        {record.cue.versions.map(({ role, versionId, durationMs }) => {
          const fetched = downloads.filter(({ recordingId }) => recordingId === versionId).at(-1);
          return (
            <li className="border-b border-buff-2 py-2" key={versionId}>
              {page.today.answer === "not in force" ? (
                role
              ) : (
                <a
                  aria-label={`Download the master, ${role}`}
                  className="link target"
                  href={`/api/records/${record.number}/masters/${versionId}`}
                >
                  {role}
                </a>
              )}
              , {fmt.time(durationMs / 1000)}
              <span className="block text-small text-ink-soft">
                {fetched
                  ? `Last fetched by ${fetched.person} on ${fmt.date(fetched.at)}`
                  : masters.includes(versionId)
                    ? "Not fetched yet"
                    : "Being prepared"}
              </span>
            </li>
          );
        })}
      </ul>
    </Section>
  );
}
