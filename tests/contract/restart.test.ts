import { createHash, randomBytes } from "node:crypto";
import { appendFileSync } from "node:fs";
import { request as httpRequest } from "node:http";
import { join } from "node:path";
import { afterEach, beforeEach, expect, test } from "vitest";
import { signText } from "@/fixtures/services/files/signing";
import { money } from "@/lib/kernel/money";
import { openMail, send } from "@/lib/mail";
import {
  constructEvent,
  createCheckout,
  openPayments,
  paymentKeys,
  readCheckout,
  refund,
} from "@/lib/payments";
import {
  API_KEY,
  type ChildStandIn,
  control,
  freePort,
  RESEND_API_KEY,
  Receiver,
  STRIPE_SECRET_KEY,
  STRIPE_WEBHOOK_SECRET,
  spawnStandIn,
  temporaryDir,
} from "./support";

/** Every test ends one process without warning and starts the next on what it left. */
let dir: ReturnType<typeof temporaryDir>;
let site: Receiver;
let running: ChildStandIn | undefined;

beforeEach(async () => {
  dir = temporaryDir();
  site = new Receiver();
  await site.start();
});

afterEach(async () => {
  await running?.kill();
  await site.stop();
  dir.remove();
});

test("payments: a killed far end keeps payments, keys and the events it still owes", async () => {
  const port = await freePort();
  const start = () =>
    spawnStandIn("payments", dir.path, port, { STRIPE_WEBHOOK_URL: `${site.url}/api/webhooks/payments` });
  running = await start();
  const client = openPayments({ STRIPE_SECRET_KEY, STRIPE_WEBHOOK_SECRET, STRIPE_API_BASE: running.url });
  const request = {
    orderId: "ord_1",
    lines: [{ name: "Licence", amount: money(28_800n, "GBP") }],
    customerEmail: "noor@thistlemoth.example",
    successUrl: site.url,
    cancelUrl: site.url,
    idempotencyKey: paymentKeys.checkout("ord_1", 1),
  };
  const opened = await createCheckout(request, client);
  site.answerWith = () => 503;
  await control(running.url, { pay: opened.checkoutId });
  await site.until((all) => (all.length > 0 ? true : undefined));
  await running.kill();
  // A process killed in the middle of a write leaves half a line.
  appendFileSync(join(dir.path, "payments.jsonl"), '[["charge","ch_half",{"id":"ch_ha');
  site.answerWith = () => 200;
  running = await start();
  const completed = await site.until((all) =>
    all.find(
      ({ body, headers }) =>
        body.includes("checkout.session.completed") && headers["stripe-signature"] !== undefined,
    ),
  );
  expect(
    constructEvent(completed.body, String(completed.headers["stripe-signature"]), client).subject,
  ).toMatchObject({ checkoutId: opened.checkoutId });
  expect(await createCheckout(request, client)).toEqual(opened);
  const { state, payment } = await readCheckout(opened.checkoutId, client);
  expect(state).toBe("paid");
  const refunding = {
    paymentId: payment?.paymentId ?? "",
    orderId: "ord_1",
    reason: "duplicate",
    idempotencyKey: paymentKeys.refund("ord_1", "ord_1"),
  } as const;
  const refunded = await refund(refunding, client);
  await running.kill();
  running = await start();
  expect(await refund(refunding, client)).toEqual(refunded);
});

test("files: a killed far end keeps the bytes it holds, and calls the site that was away", async () => {
  const port = await freePort();
  const start = () => spawnStandIn("files", dir.path, port);
  running = await start();
  const bytes = randomBytes(2_000_000);
  const key = "contractkey0001";
  const signed = (url: string) => `${url}&signature=${encodeURIComponent(signText(url, API_KEY))}`;
  const url = signed(
    `${running.url}/${key}?expires=${Date.now() + 3_600_000}&x-ut-file-name=a.wav&x-ut-file-size=${bytes.length}&x-ut-file-type=audio%252Fwav&x-ut-slug=master`,
  );
  const registered = await fetch(`${running.url}/route-metadata`, {
    method: "POST",
    headers: { "x-uploadthing-api-key": API_KEY, "content-type": "application/json" },
    body: JSON.stringify({
      fileKeys: [key],
      metadata: { context: {} },
      isDev: false,
      callbackUrl: `${site.url}/api/uploadthing`,
      callbackSlug: "master",
      awaitServerData: false,
    }),
  });
  expect(registered.status).toBe(200);

  const head = Buffer.from('--edge\r\nContent-Disposition: form-data; name="file"; filename="a.wav"\r\n\r\n');
  const sending = httpRequest(url, {
    method: "PUT",
    headers: {
      "content-type": "multipart/form-data; boundary=edge",
      "content-length": head.length + bytes.length + 12,
    },
  });
  sending.on("error", () => undefined);
  sending.write(Buffer.concat([head, bytes.subarray(0, 1_200_000)]));
  const heldBytes = async () =>
    Number((await fetch(url, { method: "HEAD" })).headers.get("x-ut-range-start"));
  let held = 0;
  while (held < 1_000_000) held = await heldBytes();
  await running.kill();
  running = await start();
  held = await heldBytes();
  expect(held).toBeGreaterThanOrEqual(1_000_000);

  site.answerWith = () => 503;
  const rest = await fetch(url, {
    method: "PUT",
    headers: { "content-type": "multipart/form-data; boundary=edge", range: `bytes=${held}-` },
    body: Buffer.concat([head, bytes.subarray(held), Buffer.from("\r\n--edge--\r\n")]),
  });
  expect(((await rest.json()) as { fileHash: string }).fileHash).toBe(
    createHash("md5").update(bytes).digest("hex"),
  );
  await site.until((all) => (all.length > 0 ? true : undefined));
  await running.kill();
  site.answerWith = () => 200;
  const before = site.received.length;
  running = await start();
  const callback = await site.until((all) => all[before]);
  expect(callback.path).toBe("/api/uploadthing?slug=master");
  expect(callback.headers["x-uploadthing-signature"]).toBe(signText(callback.body, API_KEY));
  expect(JSON.parse(callback.body)).toMatchObject({
    file: { key, size: bytes.length, name: "a.wav", type: "audio/wav" },
  });
});

test("mail: a killed far end keeps its inboxes and its keys", async () => {
  const port = await freePort();
  running = await spawnStandIn("mail", dir.path, port);
  const config = {
    SITE_URL: "http://127.0.0.1:3400",
    SEDGEWREN_MODE: "demo",
    RESEND_API_KEY,
    RESEND_BASE_URL: running.url,
    MAIL_FROM: "Sedgewren <post@sedgewren.example>",
  } as const;
  const mail = {
    template: "sign-in-link",
    props: { url: "http://127.0.0.1:3400/sign-in/a", expiresAt: "2026-05-18T09:30:00Z" },
    to: "ailsa@saltmarrow.example",
    idempotencyKey: "mai_1",
  } as const;
  const sent = await send(mail, openMail(config));
  await running.kill();
  running = await spawnStandIn("mail", dir.path, port);
  expect(await send(mail, openMail(config))).toEqual(sent);
  const { mails } = (await (await fetch(`${running.url}/inbox?to=ailsa@saltmarrow.example`)).json()) as {
    mails: { id: string }[];
  };
  expect(mails.map(({ id }) => id)).toEqual([sent.providerId]);
});
