import { createServer } from "node:http";
import type { AddressInfo } from "node:net";
import { NextRequest } from "next/server";

type Handler = (request: NextRequest) => Promise<Response>;

/** The site's own route handler for the payment service's events, on a port of its own. */
export async function startWebhookSite(
  post: Handler,
): Promise<{ url: string; answers: number[]; close(): Promise<void> }> {
  const answers: number[] = [];
  const server = createServer(async (incoming, outgoing) => {
    const parts: Buffer[] = [];
    for await (const part of incoming as AsyncIterable<Buffer>) parts.push(part);
    const headers = new Headers();
    for (const [name, value] of Object.entries(incoming.headers))
      if (typeof value === "string") headers.set(name, value);
    const url = `http://127.0.0.1${incoming.url ?? "/"}`;
    const answer = await post(new NextRequest(url, { method: "POST", headers, body: Buffer.concat(parts) }));
    answers.push(answer.status);
    outgoing.writeHead(answer.status);
    outgoing.end(await answer.text());
  });
  await new Promise<void>((resolve) => server.listen(0, "127.0.0.1", resolve));
  return {
    url: `http://127.0.0.1:${(server.address() as AddressInfo).port}/api/webhooks/payments`,
    answers,
    close: async () => {
      server.closeAllConnections();
      await new Promise((resolve) => server.close(resolve));
    },
  };
}
