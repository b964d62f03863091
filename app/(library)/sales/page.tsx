import type { Metadata } from "next";
import { notFound, redirect } from "next/navigation";
import { DayForm } from "@/components/ledger/day-form";
import { PayoutAside } from "@/components/ledger/payout-aside";
import { chosenOf, SalesHead } from "@/components/ledger/sales-head";
import { SalesOfOneCurrency } from "@/components/ledger/sales-of-one-currency";
import { ButtonLink } from "@/components/ui/button";
import { Empty } from "@/components/ui/empty";
import { Page } from "@/components/ui/page";
import { HeadSentence } from "@/components/ui/sentence";
import { isSignedIn } from "@/lib/kernel/actor";
import { getPayouts, getSales } from "@/lib/ledger";
import { viewer } from "@/lib/web";
import { instantOf, type SearchParams, wordOf } from "../read-params";

export const metadata: Metadata = { title: "Sales" };

export default async function SalesPage({ searchParams }: { searchParams: SearchParams }) {
  const { actor, roles } = await viewer();
  if (!isSignedIn(actor)) redirect("/sign-in?to=/sales");
  const isOfLibrary = actor.kind === "owner" || actor.kind === "accountant" || actor.kind === "auditor";
  if (!isOfLibrary || actor.libraryId === null) notFound();
  const given = await searchParams;
  const at = instantOf(given.at);
  const sales = await getSales(actor, at ? { at } : {});
  const { runs, due } = await getPayouts(actor, {});
  const place = `Money, as ${roles.find((role) => role.current)?.label}`;
  if (sales.currencies.length === 0)
    return (
      <Page aside={<DayForm at={sales.at} />} asideLabel="Another day">
        <HeadSentence place={place}>Nothing had been sold through this service by that day.</HeadSentence>
        <Empty action={<ButtonLink href="/sales">As it stands now</ButtonLink>}>
          Sales stand here from the moment a buyer has paid, each with every part of what was paid.
        </Empty>
      </Page>
    );
  return (
    <Page
      aside={
        <>
          <PayoutAside due={at ? [] : due} runs={runs.filter(({ preparedAt }) => preparedAt <= sales.at)} />
          <DayForm at={sales.at} />
        </>
      }
      asideLabel="Payout"
    >
      <SalesHead isPast={at !== null} place={place} sales={sales} />
      {sales.currencies.map((one) => (
        <SalesOfOneCurrency
          day={at && wordOf(given.at)}
          chosen={chosenOf(given)}
          key={one.currency}
          sales={one}
        />
      ))}
    </Page>
  );
}
