import { listRoots } from "@/lib/licensing";
import { route } from "@/lib/web";

/** The signed roots of every day, each naming the day before, with the hashes of its leaves. */
export const GET = route({
  handle: async ({ actor }) => ({
    format: "sedgewren-roots/1",
    days: await listRoots(actor, {}),
  }),
});
