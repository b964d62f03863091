import type { Metadata } from "next";
import { notFound } from "next/navigation";
import { EntryRow, HowItExplains, LoopRow } from "@/components/registers/register-rows";
import { Caution } from "@/components/ui/caution";
import { Empty } from "@/components/ui/empty";
import { fmt } from "@/components/ui/format";
import { Page } from "@/components/ui/page";
import { HeadSentence, Section } from "@/components/ui/sentence";
import { listRegisters } from "@/lib/screening";
import { viewer } from "@/lib/web";

export const metadata: Metadata = { title: "Registers" };

export default async function RegistersPage() {
  const { actor } = await viewer();
  if (actor.kind !== "moderator") notFound();
  const { loops, entries } = await listRegisters(actor, {});
  const titles = entries.filter((entry) => entry.kind === "other title");
  const tunes = entries.filter((entry) => entry.kind === "public domain");
  const counts = [
    fmt.countWord(loops.length, "shared loop"),
    fmt.countWord(titles.length, "other title"),
    fmt.countWord(tunes.length, "old tune"),
  ];
  return (
    <Page>
      <HeadSentence place="Registers">
        The same false alarm rings once: {fmt.list(counts)} are registered.
      </HeadSentence>
      <HowItExplains />
      <Section className="mt-8" head="Shared loops" note="sold or given to many">
        {loops.length === 0 ? (
          <Empty>
            Material that many may use stands here with its condition, so that it explains itself.
          </Empty>
        ) : (
          <ol>
            {loops.map((loop) => (
              <LoopRow key={loop.id} loop={loop} />
            ))}
          </ol>
        )}
      </Section>
      <Section className="mt-10" head="Other titles" note="one recording under two names, by contract">
        {titles.length === 0 ? (
          <Empty>A recording that is held under a second title by contract stands here.</Empty>
        ) : (
          <ol>
            {titles.map((entry) => (
              <EntryRow entry={entry} key={entry.id} />
            ))}
          </ol>
        )}
      </Section>
      <Section className="mt-10" head="Old tunes" note="free of rights">
        {tunes.length === 0 ? (
          <Empty>A tune that nobody owns any more stands here, with what it was found in.</Empty>
        ) : (
          <ol>
            {tunes.map((entry) => (
              <EntryRow entry={entry} key={entry.id} />
            ))}
          </ol>
        )}
      </Section>
      <Caution className="mt-10" />
    </Page>
  );
}
