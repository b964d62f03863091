export { MailError } from "./errors";
export { markMailSent, readMail } from "./mark-sent";
export { enqueueMail, type OutgoingMail } from "./outbox";
export { type MailClient, type MailConfig, openMail } from "./resend";
export { type MailToSend, send } from "./send";
export {
  isMailName,
  type MailName,
  type MailProps,
  mailAmount,
  type RenderedMail,
  renderMail,
} from "./templates";
