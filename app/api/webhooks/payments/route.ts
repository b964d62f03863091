import { system } from "@/lib/kernel/actor";
import { recordPaymentEvent } from "@/lib/ledger";
import { constructEvent } from "@/lib/payments";
import { webhook } from "@/lib/web";

/** The payment service's signed events: verified on the raw body, kept, answered at once. The same event twice is one. */
export const POST = webhook({
  verify: (rawBody, headers) => constructEvent(rawBody, headers.get("stripe-signature") ?? ""),
  accept: async ({ eventId, type, subject }) => {
    await recordPaymentEvent(
      system("payment webhook"),
      { eventId, type, subject: { ...subject } },
      { operationId: `payment event:${eventId}` },
    );
  },
});
