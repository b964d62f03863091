import { MailError } from "./errors";
import { type MailClient, mailClient } from "./resend";
import { type MailName, type MailProps, renderMail } from "./templates";

export interface MailToSend<N extends MailName> {
  template: N;
  props: MailProps<N>;
  to: string;
  /** The id of the row in the outbox: the same mail is never sent twice. */
  idempotencyKey: string;
}

const SEND_TIMEOUT_MS = 20_000;

/** Renders and sends one mail; returns the service's id of it. Throws MailError, or ZodError for wrong props. */
export async function send<N extends MailName>(
  mail: MailToSend<N>,
  client: MailClient = mailClient(),
): Promise<{ providerId: string }> {
  const { resend, config } = client;
  const frame = { isDemonstration: config.SEDGEWREN_MODE === "demo", siteUrl: config.SITE_URL };
  const { subject, html, text } = await renderMail(mail.template, mail.props, frame);
  const answer = await resend.emails
    .send(
      {
        from: config.MAIL_FROM,
        to: mail.to,
        subject,
        html,
        text,
        tags: [{ name: "template", value: mail.template }],
      },
      { idempotencyKey: mail.idempotencyKey, signal: AbortSignal.timeout(SEND_TIMEOUT_MS) },
    )
    .catch((error: unknown) => {
      throw new MailError(
        "unreachable",
        `sending ${mail.template}: ${error instanceof Error ? error.message : "no answer"}`,
      );
    });
  if (answer.error) throw mailErrorOf(mail.template, answer.error, answer.headers);
  return { providerId: answer.data.id };
}

function mailErrorOf(
  template: string,
  error: { name: string; message: string; statusCode: number | null },
  headers: Record<string, string> | null,
): MailError {
  const wait = Number(headers?.["retry-after"]);
  const retryAfterS = Number.isFinite(wait) && headers?.["retry-after"] ? wait : null;
  const message = `sending ${template}: ${error.message}`;
  if (error.name === "rate_limit_exceeded" || error.statusCode === 429)
    return new MailError("limited", message, retryAfterS);
  if (error.name === "invalid_idempotent_request") return new MailError("key_reused", message);
  const isTheirs =
    error.name === "application_error" ||
    error.name === "internal_server_error" ||
    error.name === "concurrent_idempotent_requests";
  return new MailError(
    isTheirs || (error.statusCode ?? 0) >= 500 ? "unreachable" : "refused",
    message,
    retryAfterS,
  );
}
