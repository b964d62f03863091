/**
 * Idempotency keys are functions of the thing paid and of nothing else, so a retry after a lost answer, a restart or
 * a second click names the same payment.
 */
export const paymentKeys = {
  /** `attempt` counts checkouts of one order: a new one is started only when the last has expired or was cancelled. */
  checkout: (orderId: string, attempt: number) => `checkout:${orderId}:${attempt}`,
  expiry: (checkoutId: string) => `expiry:${checkoutId}`,
  /** `cause` is the id of what the refund is for: the order itself, a credit note. */
  refund: (orderId: string, cause: string) => `refund:${orderId}:${cause}`,
  payee: (personOrLibraryId: string) => `payee:${personOrLibraryId}`,
  payout: (payoutId: string) => `payout:${payoutId}`,
  evidence: (disputeId: string, version: number) => `evidence:${disputeId}:${version}`,
} as const;
