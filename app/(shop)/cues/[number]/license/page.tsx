import type { Metadata } from "next";
import { notFound } from "next/navigation";
import { countryOptions } from "@/app/(account)/company/countries";
import { LicenceDesk } from "@/components/licensing/licence-desk";
import { wantedUse, wishOf } from "@/components/licensing/wish";
import { TextLink } from "@/components/ui/button";
import { Page } from "@/components/ui/page";
import { Problem } from "@/components/ui/problem";
import { HeadSentence } from "@/components/ui/sentence";
import { Title } from "@/components/ui/title";
import { getCue } from "@/lib/catalogue";
import type { Actor } from "@/lib/kernel/actor";
import { NotFound } from "@/lib/kernel/errors";
import { getCardForCue, priceUse } from "@/lib/licensing";
import { Use } from "@/lib/licensing/rate-card";
import { getProduction, listProductions } from "@/lib/productions";
import { viewer } from "@/lib/web";
import { proposeOrder } from "../../../orders/actions";

type Props = {
  params: Promise<{ number: string }>;
  searchParams: Promise<{ production?: string }>;
};

async function cueOf(actor: Actor, number: string) {
  try {
    return await getCue(actor, { number });
  } catch (error) {
    if (error instanceof NotFound) notFound();
    throw error;
  }
}

async function productionsOf(actor: Actor, wanted: string | undefined) {
  if (actor.kind !== "buyer") return { productions: [], chosen: null, use: null };
  const rows = await listProductions(actor, {});
  const productions = rows.map(({ id, title, episode }) => ({
    id,
    words: episode ? `${title}, ${episode}` : title,
  }));
  const chosen = productions.find(({ id }) => id === wanted)?.id ?? productions[0]?.id ?? null;
  const parsed = chosen
    ? Use.safeParse((await getProduction(actor, { productionId: chosen })).use)
    : { success: false as const };
  return { productions, chosen, use: parsed.success ? parsed.data : null };
}

export async function generateMetadata({ params }: Props): Promise<Metadata> {
  const { actor } = await viewer();
  const cue = await cueOf(actor, (await params).number);
  return { title: `License ${cue.title}` };
}

export default async function LicencePage({ params, searchParams }: Props) {
  const { actor, person } = await viewer();
  const cue = await cueOf(actor, (await params).number);
  const card =
    cue.availability.kind === "on sale" ? await getCardForCue(actor, { familyId: cue.familyId }) : null;
  if (!card) {
    return (
      <Page>
        <HeadSentence place={<TextLink href={`/cues/${cue.number}`}>{cue.number}</TextLink>}>
          <Title>{cue.title}</Title> cannot be licensed at present.
        </HeadSentence>
        <Problem
          className="mt-5"
          remedy="Other cues near it can be; its page names what it is, and search finds its like."
        >
          {cue.availability.kind === "on sale"
            ? `${cue.library.name} has not published a rate card yet.`
            : "It is held, licensed exclusively or off sale for now."}
        </Problem>
      </Page>
    );
  }
  const { productions, chosen, use } = await productionsOf(actor, (await searchParams).production);
  const first = wantedUse(wishOf(use, card), card);
  const firstPrice = first
    ? await priceUse(actor, {
        familyId: cue.familyId,
        use: first,
        ...(chosen ? { productionId: chosen } : {}),
      })
    : null;
  return (
    <LicenceDesk
      card={card}
      countries={countryOptions().map(({ value, label }) => ({ code: value, name: label }))}
      cue={{
        familyId: cue.familyId,
        number: cue.number,
        title: cue.title,
        libraryName: cue.library.name,
        currency: cue.library.currency,
      }}
      firstPrice={firstPrice}
      productionId={chosen}
      productions={productions}
      propose={proposeOrder}
      standing={actor.kind === "buyer" ? "buyer" : person ? "signed in" : "stranger"}
      use={use}
    />
  );
}
