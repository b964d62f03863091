"use client";

import { TextLink } from "@/components/ui/button";
import { Disclosure } from "@/components/ui/disclosure";
import { FactList } from "@/components/ui/facts";
import { fmt } from "@/components/ui/format";
import { Page } from "@/components/ui/page";
import { HeadSentence, Section } from "@/components/ui/sentence";
import { StatusSentence } from "@/components/ui/status-sentence";
import { Title } from "@/components/ui/title";
import { AffairsVersion } from "./affairs-version";
import { EditorialPanel, HandInPanel } from "./editorial-panel";
import { deliveryScaleS } from "./files-step";
import { AskedAndAnswered, codeWords, FindingPart } from "./finding-part";
import { QuestionPanel } from "./question-panel";
import { useReadAgain } from "./use-delivery";
import { useUploads } from "./use-uploads";
import { roleHead } from "./version-words";
import type { DeliveryOnWire, DeliveryPage } from "./wire";
import { WritersTable } from "./writers-table";

interface AffairsDeskProps {
  page: DeliveryPage;
  zone: string;
  /** The site's own now, for "tomorrow". */
  now: number;
}

/** A signed delivery: the state of affairs, each version, and what this person may do about it. */
export function AffairsDesk({ page: { delivery, caseOf }, zone, now }: AffairsDeskProps) {
  const readAgain = useReadAgain(delivery.id);
  const done = () => void readAgain();
  const uploads = useUploads(delivery.id, done);
  const ending = typeof delivery.draft.ending === "string" ? delivery.draft.ending : null;
  const isAsked = caseOf?.state === "waiting on composer" && delivery.isDeliverer;
  const isOwnAnswer = delivery.writers.some((writer) => writer.isYou && writer.state === "asked");
  const isReturned = delivery.state === "returned" && delivery.isDeliverer;
  const judges = delivery.mayJudge && delivery.state === "delivered" && !delivery.editorialAcceptedAt;
  const firstBad = delivery.versions.find((row) => ["returned", "unreadable"].includes(row.state));
  const deskIsMain = isAsked || isReturned || isOwnAnswer;
  const scaleS = deliveryScaleS(delivery);
  return (
    <Page
      aside={
        <>
          {isAsked && caseOf && (
            <QuestionPanel caseOf={caseOf} delivery={delivery} onDone={done} zone={zone} />
          )}
          {isReturned && <HandInPanel delivery={delivery} onDone={done} />}
          {judges && <EditorialPanel delivery={delivery} isMain={!deskIsMain} onDone={done} />}
          <WritersTable
            delivery={delivery}
            isMain={isOwnAnswer && !isAsked && !isReturned}
            now={now}
            onDone={done}
            zone={zone}
          />
        </>
      }
      asideLabel="What waits for an answer"
    >
      <HeadSentence
        links={
          delivery.familyState === "listed" && delivery.catalogueNumber ? (
            <TextLink href={`/cues/${delivery.catalogueNumber}`}>{delivery.catalogueNumber}</TextLink>
          ) : undefined
        }
        place={`Delivered to ${delivery.libraryName}${
          delivery.deliveredAt ? ` on ${fmt.dateTime(delivery.deliveredAt, { zone, weekday: true })}` : ""
        }`}
      >
        <Title className="mb-1 block text-big leading-tight sm:text-huge">{delivery.title}</Title>
        {isAsked ? (
          <>
            A moderator <TextLink href="#question">asks you something</TextLink>. Nothing is decided yet.
          </>
        ) : (
          delivery.words
        )}
      </HeadSentence>
      <p aria-live="polite" className="sr-only">
        {isAsked ? "A moderator asks you something." : delivery.words}
      </p>
      {caseOf?.state === "closed" && <FindingPart caseOf={caseOf} delivery={delivery} zone={zone} />}
      <ul aria-label="Versions" className="mt-5 border-t border-ink">
        {delivery.versions.map((version) => (
          <AffairsVersion
            delivery={delivery}
            ending={ending}
            isMain={version === firstBad && !deskIsMain && !judges}
            key={version.id}
            scaleS={scaleS}
            uploads={uploads}
            version={version}
            zone={zone}
          />
        ))}
        <ThenWhat delivery={delivery} />
      </ul>
      {caseOf && !isAsked && <AskedAndAnswered caseOf={caseOf} zone={zone} />}
      <Receipt delivery={delivery} zone={zone} />
      <WhatHappened delivery={delivery} zone={zone} />
    </Page>
  );
}

function ThenWhat({ delivery }: { delivery: DeliveryOnWire }) {
  if (delivery.state !== "delivered") return null;
  return delivery.editorialAcceptedAt ? (
    <StatusSentence as="li" className="py-3.5" mark="done">
      <b className="font-strong">{delivery.libraryName}</b> has listened and accepted it.
    </StatusSentence>
  ) : (
    <StatusSentence as="li" className="py-3.5" mark="open">
      <b className="font-strong">Then</b> {delivery.libraryName} listens.
    </StatusSentence>
  );
}

/** What was received, byte for byte, and what was signed. */
function Receipt({ delivery, zone }: { delivery: DeliveryOnWire; zone: string }) {
  const declaration = delivery.declarations.at(-1);
  return (
    <Section className="mt-8" head="Receipt">
      <FactList
        nameWidth="10rem"
        rows={[
          ...delivery.versions.map((version) => ({
            name: roleHead(version.versionRole),
            value: (
              <span className="wrap-anywhere">
                {version.fileName}, {fmt.bytes(version.sizeBytes)}
              </span>
            ),
            below: <span className="wrap-anywhere">SHA-256 {version.sha256 ?? "not measured yet"}</span>,
          })),
          ...(declaration
            ? [
                {
                  name: "Declaration",
                  value: `Version ${declaration.version}, signed by ${declaration.signedName}, ${fmt.dateTime(declaration.signedAt, zone)}`,
                  below: (
                    <span className="wrap-anywhere">
                      Wording of {declaration.textVersion}. SHA-256 {declaration.sha256}
                    </span>
                  ),
                },
              ]
            : []),
          ...delivery.papers.map((paper) => ({
            name: "Paper",
            value: (
              <a
                className="link target wrap-anywhere"
                download
                href={`/api/deliveries/${delivery.id}/papers/${encodeURIComponent(paper.key)}`}
              >
                {paper.name}
              </a>
            ),
            below: fmt.bytes(paper.sizeBytes),
          })),
        ]}
      />
    </Section>
  );
}

function WhatHappened({ delivery, zone }: { delivery: DeliveryOnWire; zone: string }) {
  const events = delivery.events.toReversed();
  return (
    <Disclosure
      className="mt-6"
      words={`Show what happened, ${fmt.count(events.length, "entry", "entries")}`}
    >
      <ol>
        {events.map((event, index) => (
          // biome-ignore lint/suspicious/noArrayIndexKey: an append-only list, newest first
          <li className="border-b border-line py-2" key={events.length - index}>
            <p className="max-w-measure">{event.words}</p>
            <p className="text-small text-ink-soft">
              {[fmt.dateTime(event.at, zone), ...event.codes.map(codeWords)].join("; ")}
            </p>
          </li>
        ))}
      </ol>
    </Disclosure>
  );
}
