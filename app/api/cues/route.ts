import { createLoader } from "nuqs/server";
import { foundPage } from "@/app/(shop)/find/found";
import { briefOf, findParams } from "@/components/search/brief-params";
import { route } from "@/lib/web";

const load = createLoader(findParams);

/** One page of results for a brief, with prices; the list polls it. */
export const GET = route({
  handle: async ({ actor, request }) => {
    const values = load(request.nextUrl.searchParams);
    return foundPage(actor, briefOf(values), {
      page: Math.min(200, Math.max(0, values.page)),
      productionId: values.production,
    });
  },
});
