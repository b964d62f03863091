import { expect, test } from "vitest";
import { mailTemplates } from "@/emails/registry";
import { money } from "@/lib/kernel/money";
import { isMailName, type MailName, mailAmount, renderMail } from "@/lib/mail";
import { examples } from "./examples";

const CAUTION =
  "Similarity evidence is technical. It is not a finding of infringement or of originality, and absence of a match is not clearance.";
const live = { isDemonstration: false, siteUrl: "https://sedgewren.example" };
const demo = { isDemonstration: true, siteUrl: "http://127.0.0.1:3400" };
const every = Object.entries(examples).flatMap(([name, propsOf]) =>
  propsOf.map((props, index) => ({ name: name as MailName, props, index })),
);

/** Text as a person reads it: line breaks and no-break spaces are spaces. */
const flat = (text: string) => text.replace(/\s+/g, " ");

test("every letter of the registry has an example here", () => {
  expect(Object.keys(examples).sort()).toEqual(Object.keys(mailTemplates).sort());
  expect(isMailName("delivery-receipt")).toBe(true);
  expect(isMailName("toString")).toBe(false);
});

test.each(every)(
  "MAIL-3: $name ($index) has both parts, and says Demonstration in demo mode only",
  async ({ name, props }) => {
    const [inDemo, inLive] = [await renderMail(name, props, demo), await renderMail(name, props, live)];
    for (const part of [inDemo.subject, inDemo.html, inDemo.text]) expect(part).toContain("Demonstration");
    for (const part of [inLive.subject, inLive.html, inLive.text])
      expect(part).not.toContain("Demonstration");
    expect(inLive.html).toContain('lang="en-GB"');
    expect(inLive.text).toContain("http://127.0.0.1:3400/deliveries/del_1");
    expect(inLive.text).not.toMatch(/<[a-z]/i);
    for (const part of [inLive.subject, inLive.text]) expect(part).not.toMatch(/undefined|null|\[object|!/);
  },
);

test.each(["question-from-moderator", "answer-received", "finding-statement", "report-status"] as const)(
  "MAIL-5: every %s carries the standing caution",
  async (name) => {
    for (const props of examples[name]) {
      const { html, text } = await renderMail(name, props, live);
      expect(html).toContain(CAUTION);
      expect(flat(text)).toContain(CAUTION);
    }
  },
);

test.each(every.filter(({ props }) => "title" in props || "workTitle" in props))(
  "a title is in italic serif in the HTML of $name ($index), and in quotation marks in its text",
  async ({ name, props }) => {
    const { html, text } = await renderMail(name, props, live);
    expect(html).toMatch(/<em style="font-family:Georgia[^"]*font-style:italic">Lantern Steps<\/em>/);
    expect(flat(text)).toContain("\u201cLantern Steps\u201d");
  },
);

test("MAIL-4: what people wrote is escaped, and keeps its line breaks", async () => {
  const [props] = examples["question-from-moderator"];
  const { html, text } = await renderMail(
    "question-from-moderator",
    { ...props, title: '<img src="x">', question: "One & <two>\nthree\n\nfour" },
    live,
  );
  expect(html).not.toContain('<img src="x">');
  expect(html).toContain("&lt;img src=&quot;x&quot;&gt;");
  expect(html).toMatch(/One &amp; &lt;two&gt;<br\/?>.*three/s);
  expect(text).toContain("One & <two>\nthree\n\nfour");
});

test("times are written in the reader's zone with its name, amounts in the form for people", async () => {
  const [receipt] = examples["delivery-receipt"];
  expect(flat((await renderMail("delivery-receipt", receipt, live)).text)).toContain(
    "on 18 May 2026 at 10:14 BST",
  );
  expect(flat((await renderMail("delivery-receipt", { ...receipt!, zone: "UTC" }, live)).text)).toContain(
    "on 18 May 2026 at 09:14 UTC",
  );
  const [payout] = examples["payout-sent"];
  const amount = mailAmount(money(124_000n, "EUR"));
  expect((await renderMail("payout-sent", { ...payout, amount }, live)).subject).toBe(
    "€1,240.00 is on its way, for May 2026",
  );
});

test("a receipt lists each file with its exact SHA-256, unbroken", async () => {
  const [receipt] = examples["delivery-receipt"];
  const { text } = await renderMail("delivery-receipt", receipt, live);
  expect(text).toContain("ab".repeat(32));
  expect(flat(text)).toContain("lantern-steps_full.wav, 48.0 MB");
});

test("a statement of reasons says what, where, since and until when, on what, by whom, what it means and how to contest it", async () => {
  for (const props of examples["finding-statement"].filter(
    ({ outcome }) => outcome === "hold" || outcome === "refused",
  )) {
    const text = flat((await renderMail("finding-statement", props, live)).text);
    const wanted = [
      "What we did",
      "Where: everywhere",
      "Since: 18 May 2026",
      "Until:",
      "notice RW-06",
      "a person decided",
      "The rule: Terms",
      "Earnings: held",
      "Licences already issued: unchanged",
      "appeal free of charge until 18 November 2026",
      "out-of-court",
      "court",
    ];
    for (const words of wanted) expect(text).toContain(words);
  }
});
