import { z } from "zod";
import { readDelivery } from "@/app/(composer)/deliveries/[id]/read-delivery";
import { route } from "@/lib/web";

export const GET = route({
  params: z.object({ id: z.string().max(40) }),
  search: z.object({ have: z.string().max(3000).default("") }),
  handle: ({ actor, params, search }) => readDelivery(actor, params.id, search.have.split(",")),
});
