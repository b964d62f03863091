import { afterAll, beforeAll, expect, test } from "vitest";
import { startMail } from "@/fixtures/services/mail/mail";
import type { StandIn } from "@/fixtures/services/server";
import { type MailClient, MailError, openMail, send } from "@/lib/mail";
import { control, RESEND_API_KEY, temporaryDir } from "./support";

const dir = temporaryDir();
let service: StandIn;
let client: MailClient;

beforeAll(async () => {
  service = await startMail({ port: 0, dataDir: dir.path, apiKey: RESEND_API_KEY });
  client = openMail({
    SITE_URL: "http://127.0.0.1:3400",
    SEDGEWREN_MODE: "demo",
    RESEND_API_KEY,
    RESEND_BASE_URL: service.url,
    MAIL_FROM: "Sedgewren <post@sedgewren.example>",
  });
});

afterAll(async () => {
  await service.close();
  dir.remove();
});

interface InboxMail {
  id: string;
  to: string[];
  subject: string;
  html: string;
  text: string;
  links: string[];
}

async function inbox(to: string): Promise<InboxMail[]> {
  const answer = await fetch(`${service.url}/inbox?to=${encodeURIComponent(to)}`);
  return ((await answer.json()) as { mails: InboxMail[] }).mails;
}

const signIn = (token: string) => ({
  url: `http://127.0.0.1:3400/sign-in/${token}?next=%2Ffind&a=1`,
  expiresAt: "2026-05-18T09:30:00Z",
});

async function sendSignIn(to: string, idempotencyKey: string, token = "abc") {
  return send({ template: "sign-in-link", props: signIn(token), to, idempotencyKey }, client);
}

async function errorOf(work: Promise<unknown>): Promise<MailError> {
  const error = await work.then(
    () => undefined,
    (caught: unknown) => caught,
  );
  if (!(error instanceof MailError)) throw new Error(`expected a MailError, got ${String(error)}`);
  return error;
}

test("a mail reaches its inbox with both parts, its link and the word Demonstration", async () => {
  const { providerId } = await sendSignIn("Ailsa@Saltmarrow.example", "mai_1");
  const [mail] = await inbox("ailsa@saltmarrow.example");
  expect(mail).toMatchObject({ id: providerId, subject: "[Demonstration] Your link to sign in" });
  expect(mail?.links).toContain("http://127.0.0.1:3400/sign-in/abc?next=%2Ffind&a=1");
  expect(mail?.text).toContain("http://127.0.0.1:3400/sign-in/abc?next=%2Ffind&a=1");
  expect(mail?.text).toContain("Demonstration");
  expect(mail?.html).toContain("Demonstration");
});

test("MAIL-2: the same key sends once, and the same key with another mail is refused for good", async () => {
  const first = await sendSignIn("dov@brindlecote.example", "mai_2");
  expect(await sendSignIn("dov@brindlecote.example", "mai_2")).toEqual(first);
  expect(await inbox("dov@brindlecote.example")).toHaveLength(1);
  const error = await errorOf(sendSignIn("dov@brindlecote.example", "mai_2", "other"));
  expect(error).toMatchObject({ reason: "key_reused", isRetryable: false });
});

test("MAIL-2: a mail whose answer was lost is sent once when it is sent again", async () => {
  await control(service.url, { rules: [{ match: "POST /emails", act: "lose" }] });
  expect(await errorOf(sendSignIn("noor@thistlemoth.example", "mai_3"))).toMatchObject({
    reason: "unreachable",
    isRetryable: true,
  });
  const { providerId } = await sendSignIn("noor@thistlemoth.example", "mai_3");
  expect((await inbox("noor@thistlemoth.example")).map(({ id }) => id)).toEqual([providerId]);
});

test("too many at once says how long to wait; a failing far end is worth another try; a wrong key is not", async () => {
  const limited = { statusCode: 429, name: "rate_limit_exceeded", message: "Too many requests." };
  await control(service.url, {
    rules: [
      { match: "POST /emails", act: "fail", status: 429, body: limited, headers: { "retry-after": "7" } },
      { match: "POST /emails", act: "fail", status: 500 },
      { match: "POST /emails", act: "drop" },
    ],
  });
  expect(await errorOf(sendSignIn("a@b.example", "mai_4"))).toMatchObject({
    reason: "limited",
    isRetryable: true,
    retryAfterS: 7,
  });
  expect(await errorOf(sendSignIn("a@b.example", "mai_4"))).toMatchObject({
    reason: "unreachable",
    isRetryable: true,
  });
  expect(await errorOf(sendSignIn("a@b.example", "mai_4"))).toMatchObject({
    reason: "unreachable",
    isRetryable: true,
  });
  const wrong = openMail({ ...client.config, RESEND_API_KEY: "re_other" });
  const error = await errorOf(
    send({ template: "sign-in-link", props: signIn("x"), to: "a@b.example", idempotencyKey: "mai_4" }, wrong),
  );
  expect(error).toMatchObject({ reason: "refused", isRetryable: false });
  expect(await inbox("a@b.example")).toEqual([]);
});

test("MAIL-4: wrong props are named and nothing is sent", async () => {
  const props = { url: "javascript:alert(1)", expiresAt: "tomorrow" };
  await expect(
    send({ template: "sign-in-link", props, to: "c@d.example", idempotencyKey: "mai_5" }, client),
  ).rejects.toThrow(/url[\s\S]*expiresAt/);
  expect(await inbox("c@d.example")).toEqual([]);
});

test("the inbox page shows the HTML part in a sandbox in which nothing runs", async () => {
  const { providerId } = await sendSignIn("morag@saltmarrow.example", "mai_6");
  const page = await (await fetch(`${service.url}/mail/${providerId}`)).text();
  expect(page).toContain('sandbox="allow-popups allow-popups-to-escape-sandbox"');
  const part = await fetch(`${service.url}/mail/${providerId}/html`);
  expect(part.headers.get("content-security-policy")).toContain("default-src 'none'");
  expect(await part.text()).toContain('<base target="_blank">');
  const list = await (
    await fetch(`${service.url}/inbox/${encodeURIComponent("morag@saltmarrow.example")}`)
  ).text();
  expect(list).toContain(`/mail/${providerId}`);
  expect(list).toContain("Stand-in, demonstration");
});
