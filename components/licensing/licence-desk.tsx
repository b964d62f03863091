"use client";

import { useQuery } from "@tanstack/react-query";
import { useState, useTransition } from "react";
import { ChoiceMenu } from "@/components/search/choice-menu";
import { Button, ButtonLink, TextLink } from "@/components/ui/button";
import { CheckField } from "@/components/ui/field";
import { AsideTitle, Page } from "@/components/ui/page";
import { Problem } from "@/components/ui/problem";
import { HeadSentence, Section, Sentence } from "@/components/ui/sentence";
import { Title } from "@/components/ui/title";
import type { PriceAnswer } from "@/lib/licensing";
import type { RateCard, Use } from "@/lib/licensing/rate-card";
import { FactorTable } from "./factor-table";
import { UseSentence } from "./use-sentence";
import { type Wish, wantedUse, wishOf } from "./wish";

type Proposed = { ok: true; data: { orderId: string } } | { ok: false; message: string };

interface LicenceDeskProps {
  cue: { familyId: string; number: string; title: string; libraryName: string; currency: string };
  card: RateCard;
  countries: readonly { code: string; name: string }[];
  productions: readonly { id: string; words: string }[];
  productionId: string | null;
  use: Use | null;
  /** The price of what stands in the sentence at first. */
  firstPrice: PriceAnswer | null;
  /** What the person looking may do. */
  standing: "buyer" | "signed in" | "stranger";
  propose: (
    input: { productionId: string; lines: { familyId: string; use: Use }[]; evenIfHeld: boolean },
    operationId?: string,
  ) => Promise<Proposed>;
}

async function readPrice(familyId: string, use: Use, productionId: string | null): Promise<PriceAnswer> {
  const search = new URLSearchParams({ family: familyId, use: JSON.stringify(use) });
  if (productionId) search.set("production", productionId);
  const answer = await fetch(`/api/price?${search}`);
  const body = await answer.json();
  if (!answer.ok) throw new Error(body.error?.message ?? "The price could not be read.");
  return body as PriceAnswer;
}

/** One use of one cue as a sentence with choices, its price with every factor, and the order that follows from it. */
export function LicenceDesk(props: LicenceDeskProps) {
  const { cue, card, countries, productions } = props;
  const [wish, setWish] = useState<Wish>(() => wishOf(props.use, card));
  const [productionId, setProductionId] = useState(props.productionId ?? productions[0]?.id ?? null);
  const use = wantedUse(wish, card);
  const [first] = useState(() => JSON.stringify([productionId, use]));
  const isFirst = first === JSON.stringify([productionId, use]);
  const price = useQuery({
    queryKey: ["price", cue.familyId, productionId, use],
    queryFn: () =>
      use ? readPrice(cue.familyId, use, productionId) : Promise.reject(new Error("Say more.")),
    enabled: use !== null,
    placeholderData: (before) => before,
    ...(isFirst && props.firstPrice ? { initialData: props.firstPrice } : {}),
  });
  const production = productions.find(({ id }) => id === productionId);
  return (
    <Page
      aside={<OrderAside {...props} price={price.data ?? null} productionId={productionId} use={use} />}
      asideLabel="Your order"
    >
      <HeadSentence
        place={
          <>
            <TextLink href={`/cues/${cue.number}`}>{cue.number}</TextLink>, {cue.libraryName}
          </>
        }
      >
        License <Title>{cue.title}</Title>
        {production ? (
          <>
            {" "}
            for{" "}
            <ChoiceMenu
              chosen={[production.id]}
              groups={[{ options: productions.map(({ id, words }) => ({ id, words })) }]}
              isOpen={false}
              name="Production"
              onChange={(ids) => ids[0] && setProductionId(ids[0])}
              required
              words={production.words}
            />
          </>
        ) : null}
        ,{" "}
        <UseSentence
          card={card}
          change={(changes) => setWish({ ...wish, ...changes })}
          countries={countries}
          wish={wish}
        />
      </HeadSentence>
      <Section
        className="mt-8"
        head="Why this price"
        note={price.data?.cardVersion ? `Card ${price.data.cardVersion}` : undefined}
      >
        {price.error && <Problem live>{price.error.message}</Problem>}
        {price.data && !price.data.ok && <Problem>{price.data.sentence}</Problem>}
        {price.data?.ok && (
          <>
            <FactorTable currency={price.data.currency} factors={price.data.factors} />
            <Sentence className="mt-3">
              {price.data.sentence}
              {price.data.minimumApplied
                ? "."
                : ` = ${price.data.text}, before tax. Rounded once, at the end.`}
            </Sentence>
          </>
        )}
      </Section>
      <Section className="mt-8" head="What is never included">
        <Sentence>
          Public performance and communication to the public: the broadcaster, platform or venue pays its
          society. A release of the music as music, theme and title use, a new tune or words, samples, and
          training of AI.
        </Sentence>
      </Section>
    </Page>
  );
}

function OrderAside({
  cue,
  standing,
  price,
  productionId,
  use,
  propose,
}: LicenceDeskProps & { price: PriceAnswer | null }) {
  const [evenIfHeld, setEvenIfHeld] = useState(false);
  const [problem, setProblem] = useState<string | null>(null);
  const [pending, start] = useTransition();
  const held = price?.held ?? [];
  const order = () =>
    start(async () => {
      if (!use || !productionId) return;
      const answer = await propose({ productionId, lines: [{ familyId: cue.familyId, use }], evenIfHeld });
      if (answer.ok) window.location.assign(`/orders/${answer.data.orderId}`);
      else setProblem(answer.message);
    });
  return (
    <>
      <AsideTitle below="Before tax, which depends on where your company is.">
        {price?.ok ? price.text : price ? "No price on the card" : "Reading the price"}
      </AsideTitle>
      <p aria-live="polite" className="sr-only">
        {price?.ok ? `The price is ${price.text}.` : (price?.sentence ?? "")}
      </p>
      <p className="mb-4">
        One licence for all listed versions, from {cue.libraryName}. You get a signed record, an invoice and
        the masters at 48 kHz and 24 bit.
      </p>
      {held.length > 0 && (
        <div className="mb-4">
          <Problem remedy="Another one costs the full price again.">
            You already hold{" "}
            {held.map((number, index) => (
              <span key={number}>
                {index > 0 && " and "}
                <TextLink href={`/records/${number}`}>{number}</TextLink>
              </span>
            ))}{" "}
            for this production and this use.
          </Problem>
          <CheckField
            checked={evenIfHeld}
            className="mt-3"
            onChange={(event) => setEvenIfHeld(event.target.checked)}
          >
            Order it all the same
          </CheckField>
        </div>
      )}
      {problem && (
        <Problem className="mb-4" live>
          {problem}
        </Problem>
      )}
      {standing !== "buyer" ? (
        <>
          <ButtonLink
            href={standing === "stranger" ? `/sign-in?to=/cues/${cue.number}/license` : "/company"}
            kind="main"
            wide
          >
            {standing === "stranger" ? "Sign in to order" : "Order as a company"}
          </ButtonLink>
          <p className="mt-2 text-small text-ink-soft">
            Music is licensed to a company for a named production.
          </p>
        </>
      ) : productionId === null ? (
        <ButtonLink href="/productions" kind="main" wide>
          Begin a production first
        </ButtonLink>
      ) : (
        <>
          <Button
            busy={pending && "Placing the order"}
            disabled={!price?.ok || !use || (held.length > 0 && !evenIfHeld)}
            kind="main"
            onClick={order}
            wide
          >
            {price?.ok ? `Propose this order, ${price.text}` : "Propose this order"}
          </Button>
          <p className="mt-2 text-small text-ink-soft">
            Nothing is paid yet: next come the terms, and somebody of your company who may approve.
          </p>
        </>
      )}
    </>
  );
}
