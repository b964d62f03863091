import type { Metadata } from "next";
import { redirect } from "next/navigation";
import { CheckForm } from "@/components/licensing/check-form";
import { DropRecord } from "@/components/licensing/drop-record";
import { VerifierPart } from "@/components/licensing/verifier-part";
import { Page } from "@/components/ui/page";
import { HeadSentence, Section, Sentence } from "@/components/ui/sentence";
import { parseProofCode } from "@/lib/kernel/proof-code";

export const metadata: Metadata = { title: "Check a licence" };

type Props = { searchParams: Promise<{ code?: string }> };

/** Without scripts the form comes back here with its code. */
export default async function CheckPage({ searchParams }: Props) {
  const { code } = await searchParams;
  const parsed = code === undefined ? null : parseProofCode(code);
  if (parsed?.ok) redirect(`/check/${parsed.code}`);
  if (code !== undefined) redirect(`/check/${encodeURIComponent(code.slice(0, 60))}`);
  return (
    <Page aside={<VerifierPart />} asideLabel="Check it without us">
      <HeadSentence size="huge">
        Anybody can check a licence: is it genuine, and was it in force on a given day?
      </HeadSentence>
      <div className="mt-7 grid gap-8 @wide:grid-cols-2">
        <Section head="By its proof code">
          <CheckForm />
        </Section>
        <Section head="By the file itself">
          <DropRecord />
        </Section>
      </div>
      <Section className="mt-8" head="What you learn, and what stays private">
        <Sentence>
          The answer says first whether the record is genuine, then whether it was in force on the day you ask
          about, then for what production, cue, use, territory and term, and what has happened to it since.
          The fee is never shown, and a licensee may keep a client or a title back until a release. You need
          no account, and nothing about you is kept.
        </Sentence>
      </Section>
    </Page>
  );
}
