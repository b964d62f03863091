import type { Metadata } from "next";
import { redirect } from "next/navigation";
import { ProductionForm } from "@/components/productions/production-form";
import { TextLink } from "@/components/ui/button";
import { Empty } from "@/components/ui/empty";
import { fmt } from "@/components/ui/format";
import { AsideTitle, Page } from "@/components/ui/page";
import { HeadSentence } from "@/components/ui/sentence";
import { Table } from "@/components/ui/table";
import { listProductions, type ProductionEntry } from "@/lib/productions";
import { viewer } from "@/lib/web";
import { createProduction } from "../actions";
import { productionWords } from "./shortlist-lines";

export const metadata: Metadata = { title: "Productions" };

const cueWords = (entry: ProductionEntry) =>
  entry.cues === 0 ? "nothing shortlisted yet" : `${fmt.countWord(entry.cues, "cue")} shortlisted`;

export default async function ProductionsPage() {
  const { actor, person } = await viewer();
  if (actor.kind === "anonymous" || !person) redirect("/sign-in?next=/productions");
  const productions = await listProductions(actor, {});
  return (
    <Page
      aside={
        <>
          <AsideTitle below="It belongs to your company: colleagues see it and its shortlist.">
            Begin a production
          </AsideTitle>
          <ProductionForm create={createProduction} />
        </>
      }
      asideLabel="Begin a production"
    >
      <HeadSentence>
        {productions.length === 0
          ? "Your company has no production here yet."
          : `Your company has ${fmt.countWord(productions.length, "production")} here.`}
      </HeadSentence>
      <div className="mt-6">
        {productions.length === 0 ? (
          <Empty>
            Productions would be here, each with its shortlist, its prices and its licences. Begin one at the
            side.
          </Empty>
        ) : (
          <Table
            caption="Productions of your company"
            columns={[
              {
                key: "title",
                head: "Production",
                cell: (entry: ProductionEntry) => (
                  <TextLink href={`/productions/${entry.id}`}>{productionWords(entry)}</TextLink>
                ),
              },
              { key: "kind", head: "What it is", cell: (entry) => entry.kind },
              { key: "client", head: "For", cell: (entry) => entry.client ?? "" },
              { key: "cues", head: "Shortlist", cell: cueWords },
            ]}
            rowKey={(entry) => entry.id}
            rows={productions}
            sentence={(entry) => (
              <>
                <TextLink href={`/productions/${entry.id}`}>{productionWords(entry)}</TextLink>, {entry.kind}
                {entry.client ? ` for ${entry.client}` : ""}; {cueWords(entry)}.
              </>
            )}
          />
        )}
      </div>
    </Page>
  );
}
