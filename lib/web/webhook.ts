import "server-only";
import type { NextRequest } from "next/server";
import { withRequestId } from "@/lib/kernel/log";
import { failureOf } from "./failure";

/**
 * A signed message from a hosted far end. `verify` gets the raw body and throws where the signature is wrong (answered
 * 400, not repeated usefully); `accept` stores the event and answers at once: the work is a job.
 */
export function webhook<E>(spec: {
  verify: (rawBody: string, headers: Headers) => E;
  accept: (event: E) => Promise<void>;
}) {
  return async (request: NextRequest): Promise<Response> =>
    withRequestId(request.headers.get("x-request-id") ?? "webhook", async () => {
      const rawBody = await request.text();
      let event: E;
      try {
        event = spec.verify(rawBody, request.headers);
      } catch {
        return Response.json({ error: "The signature does not verify." }, { status: 400 });
      }
      try {
        await spec.accept(event);
        return Response.json({ received: true });
      } catch (error) {
        failureOf(error, `webhook ${request.nextUrl.pathname}`);
        return Response.json({ error: "Not stored; please send it again." }, { status: 503 });
      }
    });
}
