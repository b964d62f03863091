import { Resend } from "resend";
import type { Environment } from "@/lib/kernel/env";
import { env } from "@/lib/kernel/env";

export type MailConfig = Pick<
  Environment,
  "SITE_URL" | "SEDGEWREN_MODE" | "RESEND_API_KEY" | "RESEND_BASE_URL" | "MAIL_FROM"
>;

/** An open door to the mail service; what is behind it stays in this room. */
export interface MailClient {
  readonly resend: Resend;
  readonly config: MailConfig;
}

export function openMail(config: MailConfig): MailClient {
  const options = config.RESEND_BASE_URL ? { baseUrl: config.RESEND_BASE_URL } : {};
  return { resend: new Resend(config.RESEND_API_KEY, options), config };
}

let opened: MailClient | undefined;

/** The door that the environment names. */
export function mailClient(): MailClient {
  opened ??= openMail(env);
  return opened;
}
