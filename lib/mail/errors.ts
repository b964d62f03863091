/** The mail service refused, or could not be asked. A retryable one is sent again by the job, with the same key. */
export class MailError extends Error {
  override name = "MailError";

  constructor(
    readonly reason: "limited" | "unreachable" | "key_reused" | "refused",
    message: string,
    /** How long the service asks to wait, where it says so. */
    readonly retryAfterS: number | null = null,
  ) {
    super(message);
  }

  get isRetryable(): boolean {
    return this.reason === "limited" || this.reason === "unreachable";
  }
}
