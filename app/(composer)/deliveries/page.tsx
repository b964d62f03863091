import type { Metadata } from "next";
import { notFound, redirect } from "next/navigation";
import { DeliveryRows } from "@/components/deliveries/delivery-rows";
import { ButtonLink, TextLink } from "@/components/ui/button";
import { Empty } from "@/components/ui/empty";
import { fmt } from "@/components/ui/format";
import { Page } from "@/components/ui/page";
import { HeadSentence, Section } from "@/components/ui/sentence";
import { StatusSentence } from "@/components/ui/status-sentence";
import { Title } from "@/components/ui/title";
import { getAccount } from "@/lib/accounts";
import { type DeliverySummary, listDeliveries, listSplitRequests, STANDINGS } from "@/lib/deliveries";
import { listOpenQuestions } from "@/lib/review";
import { viewer } from "@/lib/web";

export const metadata: Metadata = { title: "Deliveries" };

const DRAFT_RANK = STANDINGS.indexOf("waiting for others") - 0.5;

/** Worst standing first; a draft waits for its own composer, so it comes before what waits for others. */
function worstFirst(rows: readonly DeliverySummary[]): DeliverySummary[] {
  const rank = ({ standing, state }: DeliverySummary) =>
    state === "listed" && standing === "clear"
      ? STANDINGS.length
      : standing
        ? STANDINGS.indexOf(standing)
        : DRAFT_RANK;
  return [...rows].sort((a, b) => rank(a) - rank(b) || b.updatedAt.getTime() - a.updatedAt.getTime());
}

function headFor(rows: readonly DeliverySummary[], asked: number): string {
  const needs = rows.filter((row) => row.standing === "needs you").length;
  const working = rows.filter((row) => row.standing === "working").length;
  if (asked > 0) return `${fmt.countWord(asked, "share waits", "shares wait")} for your answer.`;
  if (rows.length === 0) return "Nothing is delivered yet.";
  if (needs > 0) return `${fmt.countWord(needs, "delivery needs", "deliveries need")} something from you.`;
  if (working > 0) return `${fmt.countWord(working, "delivery is", "deliveries are")} being worked on.`;
  if (rows.length === 1) return "One delivery, and it does not wait for you.";
  return `${fmt.countWord(rows.length, "delivery", "deliveries")}; none of them waits for you.`;
}

const capital = (words: string) => words.charAt(0).toUpperCase() + words.slice(1);

export default async function DeliveriesPage() {
  const { actor, person, roles } = await viewer();
  if (!person) redirect("/sign-in?to=%2Fdeliveries");
  if (actor.kind !== "composer" && actor.kind !== "owner" && actor.kind !== "staff") notFound();
  const { timeZone } = await getAccount(actor, {});
  const questions = await listOpenQuestions(actor, {});
  const rows = worstFirst(
    (await listDeliveries(actor, {})).map((row): DeliverySummary => {
      const question = questions.find(({ deliveryId }) => deliveryId === row.id);
      if (!question) return row;
      const by = question.answerUntil
        ? ` Please answer by ${fmt.dateTime(question.answerUntil, timeZone)}.`
        : "";
      return { ...row, standing: "needs you", words: `A moderator asks you something.${by}` };
    }),
  );
  const asked = await listSplitRequests(actor, {});
  return (
    <Page>
      <HeadSentence place={`Deliveries, as ${roles.find((role) => role.current)?.label ?? actor.kind}`}>
        {capital(headFor(rows, asked.length))}
      </HeadSentence>
      {asked.length > 0 && (
        <Section className="mt-7" head="Your answer is asked for">
          <ul>
            {asked.map((request) => (
              <StatusSentence
                as="li"
                below={
                  request.answerUntil ? `until ${fmt.dateTime(request.answerUntil, timeZone)}` : undefined
                }
                className="border-b border-line py-3"
                key={request.deliveryId}
                mark="warn"
              >
                {request.delivererName} names you with {fmt.shareBps(request.shareBps)} % of{" "}
                <TextLink href={`/deliveries/${request.deliveryId}`}>
                  <Title>{request.title}</Title>
                </TextLink>
                .
              </StatusSentence>
            ))}
          </ul>
        </Section>
      )}
      <div className="mt-6">
        <ButtonLink href="/deliver" kind="main">
          Deliver a family
        </ButtonLink>
      </div>
      <Section className="mt-8" head="Deliveries" note={fmt.count(rows.length, "delivery", "deliveries")}>
        {rows.length > 0 ? (
          <DeliveryRows deliveries={rows} withDeliverer={actor.kind !== "composer"} zone={timeZone} />
        ) : (
          <Empty action={<TextLink href="/deliver">Deliver a family</TextLink>}>
            Each family that is handed in stands here with how it fares.
          </Empty>
        )}
      </Section>
    </Page>
  );
}
