import type { Metadata } from "next";
import { notFound } from "next/navigation";
import { cache } from "react";
import { LibraryCues } from "@/components/search/library-cues";
import { TextLink } from "@/components/ui/button";
import { Page } from "@/components/ui/page";
import { HeadSentence } from "@/components/ui/sentence";
import { listLibraries } from "@/lib/catalogue";
import { Brief } from "@/lib/catalogue/schemas";
import { viewer } from "@/lib/web";
import { foundPage } from "../../find/found";

type Props = { params: Promise<{ code: string }> };

const CURRENCY_WORDS: Record<string, string> = { GBP: "pounds", EUR: "euro", USD: "US dollars" };

const readLibrary = cache(async (code: string) => {
  const { actor } = await viewer();
  const libraries = await listLibraries(actor, {});
  const library = libraries.find((entry) => entry.code === code.toUpperCase());
  if (!library) notFound();
  return { actor, library, libraries };
});

export async function generateMetadata({ params }: Props): Promise<Metadata> {
  const { library } = await readLibrary((await params).code);
  return { title: library.name };
}

export default async function LibraryScreen({ params }: Props) {
  const { actor, library } = await readLibrary((await params).code);
  const brief = Brief.parse({ library: library.code });
  const first = await foundPage(actor, brief, { page: 0, productionId: null });
  return (
    <Page>
      <HeadSentence
        links={<TextLink href={`/find?library=${library.code}`}>Search within it</TextLink>}
        place="A library on this service"
      >
        {library.name}, of {library.place}
        {library.character ? `: ${library.character}` : ""}. It sells in{" "}
        {CURRENCY_WORDS[library.currency] ?? library.currency}.
      </HeadSentence>
      <div className="mt-6">
        <LibraryCues brief={brief} first={first} name={library.name} />
      </div>
    </Page>
  );
}
