import { z } from "zod";
import { openCheckout } from "@/lib/licensing";
import { route } from "@/lib/web";

/** The payment service's page for an approved order; the browser goes there itself. */
export const POST = route({
  params: z.object({ id: z.string().max(40) }),
  handle: ({ actor, params }) => openCheckout(actor, { orderId: params.id }),
});
