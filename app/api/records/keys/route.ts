import { listKeys } from "@/lib/licensing";
import { route } from "@/lib/web";

/** The published list of public keys, in the form the offline verifier reads. */
export const GET = route({
  handle: async ({ actor }) =>
    new Response(JSON.stringify(await listKeys(actor, {}), null, 2), {
      headers: {
        "content-type": "application/json; charset=utf-8",
        "content-disposition": 'inline; filename="sedgewren-keys.json"',
        "cache-control": "no-store",
      },
    }),
});
