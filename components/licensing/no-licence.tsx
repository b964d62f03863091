import { Page } from "@/components/ui/page";
import { Problem } from "@/components/ui/problem";
import { HeadSentence, Section } from "@/components/ui/sentence";
import type { CheckAnswer, Checked } from "@/lib/licensing";
import { CheckForm } from "./check-form";
import { DropRecord } from "./drop-record";
import { VerifierPart } from "./verifier-part";

type WithoutLicence = Exclude<CheckAnswer, Checked> | { limit: string };

function headOf(answer: WithoutLicence): string {
  if ("limit" in answer) return "That was a lot of checks at once.";
  return answer.verdict === "mistyped" ? "This code is mistyped." : "This code is unknown.";
}

/** A code that opened nothing: why, and what to try. */
export function NoLicence({ answer, proof }: { answer: WithoutLicence; proof: string }) {
  const words = "limit" in answer ? answer.limit : answer.sentence;
  return (
    <Page aside={<VerifierPart />} asideLabel="Check it without us">
      <HeadSentence place="Check a licence" size="huge">
        {headOf(answer)}
      </HeadSentence>
      <Problem className="mt-5" live>
        {words}
      </Problem>
      <div className="mt-7 grid gap-8 @wide:grid-cols-2">
        <Section head="Try the code again">
          <CheckForm typed={proof} />
        </Section>
        <Section head="Or by the file itself">
          <DropRecord />
        </Section>
      </div>
    </Page>
  );
}
