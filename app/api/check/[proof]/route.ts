import { z } from "zod";
import { verifyByProof } from "@/lib/licensing";
import { clientAddress, route } from "@/lib/web";

/** A licence by its proof code, for programs: the page's answer without its words around it. */
export const GET = route({
  params: z.object({ proof: z.string().max(80) }),
  search: z.object({ on: z.string().max(10).optional() }),
  handle: async ({ actor, params, search }) => {
    const answer = await verifyByProof(actor, {
      proof: params.proof,
      ...(search.on ? { on: search.on } : {}),
      address: await clientAddress(),
    });
    if (!("licence" in answer)) return answer;
    const { heard: _heard, ...licence } = answer.licence;
    return { ...answer, licence };
  },
});
