import { render } from "@react-email/render";
import type { z } from "zod";
import { mailTemplates } from "@/emails/registry";
import type { Frame, MailTemplate } from "@/emails/template";
import type { Money } from "@/lib/kernel/money";

export type MailName = keyof typeof mailTemplates;
/** What a caller gives; times are ISO 8601, amounts come from `mailAmount`. */
export type MailProps<N extends MailName> = z.input<(typeof mailTemplates)[N]["props"]>;

export interface RenderedMail {
  subject: string;
  html: string;
  text: string;
}

/** An amount in the form that waits in the outbox. */
export function mailAmount({ minor, currency }: Money): { minor: string; currency: string } {
  return { minor: minor.toString(), currency };
}

export function isMailName(name: string): name is MailName {
  return Object.hasOwn(mailTemplates, name);
}

const PLAIN = ["h1", "h2"].map((selector) => ({ selector, options: { uppercase: false } }));
/** Italics are lost in plain text, so titles of works stand in quotation marks there. */
const WORKS = { selector: "em", format: "inlineSurround", options: { prefix: "\u201c", suffix: "\u201d" } };

/** Renders one mail. Throws a ZodError that names what is wrong with the props. */
export async function renderMail(name: MailName, props: unknown, frame: Frame): Promise<RenderedMail> {
  const template = mailTemplates[name] as unknown as MailTemplate<z.ZodType>;
  const parsed = template.props.parse(props);
  const element = template.body(parsed, frame);
  const prefix = frame.isDemonstration ? "[Demonstration] " : "";
  const html = await render(element);
  const text = await render(element, {
    plainText: true,
    htmlToTextOptions: { wordwrap: 78, selectors: [...PLAIN, WORKS] },
  });
  // A title may hold a line break; a header may not.
  const subject = template.subject(parsed).replace(/\s+/g, " ");
  return { subject: prefix + subject, html, text };
}
