export type PaymentErrorReason =
  | "declined"
  | "not_found"
  | "already_refunded"
  | "disputed"
  | "insufficient_balance"
  | "payee_not_ready"
  | "not_open"
  | "key_reused"
  | "bad_signature"
  | "refused"
  | "unreachable";

/** The processor refused, or could not be asked. Only `unreachable` may be tried again, with the same key. */
export class PaymentError extends Error {
  override name = "PaymentError";

  constructor(
    readonly reason: PaymentErrorReason,
    message: string,
    options?: ErrorOptions,
  ) {
    super(message, options);
  }

  get isRetryable(): boolean {
    return this.reason === "unreachable";
  }
}
