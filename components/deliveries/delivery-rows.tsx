import { TextLink } from "@/components/ui/button";
import { fmt } from "@/components/ui/format";
import { StatusSentence } from "@/components/ui/status-sentence";
import { Title } from "@/components/ui/title";
import type { DeliverySummary } from "@/lib/deliveries";
import { markOfStanding } from "./version-words";

interface DeliveryRowsProps {
  deliveries: readonly DeliverySummary[];
  zone: string;
  /** For a library's own people: who handed it in. */
  withDeliverer: boolean;
}

/** Deliveries as sentences, each with its shape. */
export function DeliveryRows({ deliveries, zone, withDeliverer }: DeliveryRowsProps) {
  return (
    <ul>
      {deliveries.map((delivery) => (
        <StatusSentence
          as="li"
          below={[
            withDeliverer ? `by ${delivery.delivererName}` : null,
            fmt.count(delivery.versions, "file"),
            delivery.deliveredAt
              ? `delivered ${fmt.dateTime(delivery.deliveredAt, zone)}`
              : `last changed ${fmt.dateTime(delivery.updatedAt, zone)}`,
          ]
            .filter((part) => part !== null)
            .join("; ")}
          className="border-b border-line py-3"
          key={delivery.id}
          mark={markOfStanding(delivery.standing, delivery.state)}
        >
          <TextLink className="text-lead" href={`/deliveries/${delivery.id}`}>
            <Title>{delivery.title}</Title>
          </TextLink>
          : {delivery.words}
        </StatusSentence>
      ))}
    </ul>
  );
}
