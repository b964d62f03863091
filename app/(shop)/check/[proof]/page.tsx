import type { Metadata } from "next";
import { CheckForm } from "@/components/licensing/check-form";
import { AskAboutDay, CheckVerdict } from "@/components/licensing/check-verdict";
import { CheckedLicencePart } from "@/components/licensing/checked-licence";
import { DropRecord } from "@/components/licensing/drop-record";
import { LicenceContour } from "@/components/licensing/licence-contour";
import { NoLicence } from "@/components/licensing/no-licence";
import { stretchesOf, TermStrip } from "@/components/licensing/term-strip";
import { VerifierPart } from "@/components/licensing/verifier-part";
import { Page } from "@/components/ui/page";
import { Section } from "@/components/ui/sentence";
import { isCivilDate } from "@/lib/kernel/calendar";
import { Limit } from "@/lib/kernel/errors";
import { type CheckAnswer, type Checked, verifyByProof } from "@/lib/licensing";
import { clientAddress, viewer } from "@/lib/web";

type Props = { params: Promise<{ proof: string }>; searchParams: Promise<{ on?: string }> };

export const metadata: Metadata = { title: "Check a licence", robots: { index: false } };

async function ask(proof: string, on: string | undefined): Promise<CheckAnswer | { limit: string }> {
  const { actor } = await viewer();
  try {
    return await verifyByProof(actor, {
      proof: proof.slice(0, 80),
      ...(on && isCivilDate(on) ? { on } : {}),
      address: await clientAddress(),
    });
  } catch (error) {
    if (error instanceof Limit) return { limit: error.message };
    throw error;
  }
}

export default async function CheckedPage({ params, searchParams }: Props) {
  const proof = decodeURIComponent((await params).proof);
  const answer = await ask(proof, (await searchParams).on);
  if (!("licence" in answer)) return <NoLicence answer={answer} proof={proof} />;
  const { licence } = answer;
  return (
    <Page
      aside={
        <div className="grid gap-7">
          <VerifierPart proof={licence.proofCode.replaceAll("-", "")} />
          <p className="text-small wrap-anywhere">
            Key {licence.seal.keyId}, Ed25519. SHA-256 {licence.seal.sha256}, place {licence.seal.position} of
            the public log of {licence.seal.day}
            {licence.seal.isInPublishedLog ? "." : ", whose root is published when the day is over."}
          </p>
          <DropRecord />
          <Section head="Check another">
            <CheckForm kind="plain" />
          </Section>
        </div>
      }
      asideLabel="Check it without us"
    >
      <CheckVerdict checked={answer} />
      <TimePart checked={answer} />
      <CheckedLicencePart checked={answer} />
    </Page>
  );
}

function TimePart({ checked }: { checked: Checked }) {
  const { licence, on, today } = checked;
  const { term, heard } = licence;
  return (
    <div className="mt-6 grid gap-x-10 gap-y-5 @wide:grid-cols-[minmax(0,1fr)_20rem]">
      <div>
        <TermStrip
          lastUseAt={term.lastUseAt}
          onDate={on.date}
          startsOn={term.startsOn}
          stretches={stretchesOf(term.startsOn, term.lastUseAt, licence.history)}
          today={today.date}
          zone={term.zone}
        />
        <AskAboutDay date={on.date} zone={term.zone} />
      </div>
      {heard && (
        <div>
          <LicenceContour
            ending={heard.ending}
            packed={heard.contour}
            recordingId={heard.recordingId}
            title={licence.cue.title}
          />
          <p className="mt-1 text-small text-ink-soft">
            The recording, as delivered; press it to hear the preview.
          </p>
        </div>
      )}
    </div>
  );
}
