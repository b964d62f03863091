import { z } from "zod";
import { renderRecordPdf } from "@/components/licensing/pdf/record-pdf";
import { getLicence } from "@/lib/licensing";
import { route } from "@/lib/web";

/** The record on paper. */
export const GET = route({
  params: z.object({ number: z.string().max(40) }),
  handle: async ({ actor, params }) => {
    const page = await getLicence(actor, { number: params.number });
    const pdf = await renderRecordPdf(page);
    return new Response(new Uint8Array(pdf), {
      headers: {
        "content-type": "application/pdf",
        "content-disposition": `attachment; filename="${page.record.number}.pdf"`,
        "cache-control": "no-store",
      },
    });
  },
});
