import { z } from "zod";
import { Forbidden } from "@/lib/kernel/errors";
import { getStatement, statementCsv } from "@/lib/ledger";
import { route } from "@/lib/web";

/** The statement of a month as a table for a spreadsheet; its totals are those of the page. */
export const GET = route({
  params: z.object({ period: z.string().max(10) }),
  handle: async ({ actor, params }) => {
    const isPayee = actor.kind === "composer" || actor.kind === "owner";
    const isReader = actor.kind === "accountant" || actor.kind === "auditor";
    if (!isPayee && !isReader) throw new Forbidden();
    const statements = await getStatement(actor, params);
    return new Response(statementCsv(statements), {
      headers: {
        "content-type": "text/csv; charset=utf-8",
        "content-disposition": `attachment; filename="statement-${params.period}.csv"`,
        "cache-control": "no-store",
        "x-content-type-options": "nosniff",
      },
    });
  },
});
