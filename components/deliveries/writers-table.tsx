"use client";

import { answerShares, askAgain } from "@/app/(composer)/actions";
import { Refusal } from "@/components/account/refusal";
import { useAct } from "@/components/account/use-act";
import { Button } from "@/components/ui/button";
import { fmt } from "@/components/ui/format";
import type { MarkKind } from "@/components/ui/mark";
import { AsideTitle } from "@/components/ui/page";
import { StatusSentence } from "@/components/ui/status-sentence";
import { WRITER_ROLES, type WriterRole } from "@/lib/catalogue/states";
import type { DeliveryOnWire } from "./wire";

type Writer = DeliveryOnWire["writers"][number];
const MARKS: Record<string, MarkKind> = { accepted: "done", asked: "half", declined: "warn", lapsed: "warn" };
const DAY_MS = 86_400_000;

function belowOf(writer: Writer, zone: string, now: number): string {
  const at = (value: string | null) => (value ? ` ${fmt.dateTime(value, zone)}` : "");
  const answer = {
    accepted: `accepted${at(writer.answeredAt)}`,
    asked: `asked${at(writer.askedAt)}, may answer until ${writer.answerUntil ? fmt.dayMonth(writer.answerUntil, { zone }) : "further notice"}${
      writer.askedAt && now - Date.parse(writer.askedAt) < DAY_MS ? "; a reminder goes tomorrow" : ""
    }`,
    declined: `declined${at(writer.answeredAt)}`,
    lapsed: "did not answer in fourteen days",
  }[writer.state];
  return [
    WRITER_ROLES[writer.role as WriterRole] ?? writer.role,
    writer.ipi ? `IPI ${writer.ipi}` : "no IPI given",
    writer.confirmed ? "name confirmed by the library" : "name and IPI not confirmed by the library",
    answer,
  ].join("; ");
}

function headOf(writers: readonly Writer[]): string {
  const open = writers.filter((writer) => writer.state === "asked");
  if (writers.every((writer) => writer.state === "accepted"))
    return writers.length === 1 ? "The shares are accepted" : "Every writer has accepted";
  if (open.some((writer) => writer.isYou)) return "Your share";
  if (writers.some((writer) => writer.state === "declined" || writer.state === "lapsed"))
    return "The shares are not settled";
  return open.length === 1 ? "Waiting on your co-writer" : "Waiting on your co-writers";
}

interface WritersTableProps {
  delivery: DeliveryOnWire;
  zone: string;
  now: number;
  onDone: () => void;
  isMain: boolean;
}

/** The writers with their shares and answers; who is asked answers here, for themselves only. */
export function WritersTable({ delivery, zone, now, onDone, isMain }: WritersTableProps) {
  const { writers } = delivery;
  const answer = useAct(answerShares);
  const again = useAct(askAgain);
  const own = writers.find((writer) => writer.isYou && writer.state === "asked");
  const sum = writers.reduce((total, writer) => total + writer.shareBps, 0);
  return (
    <section>
      <AsideTitle below={<span className="text-small text-ink-soft">shares make {fmt.shareBps(sum)}</span>}>
        {headOf(writers)}
      </AsideTitle>
      <ul>
        {writers.map((writer) => (
          <StatusSentence
            as="li"
            below={
              <>
                {belowOf(writer, zone, now)}
                {delivery.isDeliverer && (writer.state === "declined" || writer.state === "lapsed") && (
                  <>
                    {". "}
                    <Button
                      aria-label={`Ask again: ${writer.name}`}
                      busy={again.isRunning && "Asking"}
                      kind="quiet"
                      onClick={() => again.run({ deliveryId: delivery.id, writerId: writer.id }, onDone)}
                    >
                      Ask again
                    </Button>
                  </>
                )}
              </>
            }
            className="border-t-[1.5px] border-buff-2 py-2.5"
            end={<b className="figures font-strong">{fmt.shareBps(writer.shareBps)}</b>}
            key={writer.id}
            mark={MARKS[writer.state] ?? "open"}
          >
            {writer.isYou ? `You, ${writer.name}` : writer.name}
          </StatusSentence>
        ))}
      </ul>
      <Refusal failure={again.failure} />
      {own && (
        <div className="mt-4 space-y-3">
          <p>
            You are named with {fmt.shareBps(own.shareBps)} %. Nothing is listed before every writer has
            accepted.
          </p>
          <Button
            busy={answer.isRunning && "Answering"}
            kind={isMain ? "main" : "plain"}
            onClick={() => answer.run({ deliveryId: delivery.id, accept: true }, onDone)}
            wide
          >
            Accept these shares
          </Button>
          <Button
            busy={answer.isRunning && "Answering"}
            onClick={() => answer.run({ deliveryId: delivery.id, accept: false }, onDone)}
            wide
          >
            Decline
          </Button>
          <p className="text-small text-ink-soft">
            If a share is wrong, decline and tell the deliverer what it should be.
          </p>
          <Refusal failure={answer.failure} />
        </div>
      )}
    </section>
  );
}
