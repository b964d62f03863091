export type UploadErrorReason = "missing" | "forbidden" | "unsatisfiable" | "refused" | "unreachable";

/** The file store refused, or could not be asked. Only `unreachable` is worth trying again. */
export class UploadError extends Error {
  override name = "UploadError";

  constructor(
    readonly reason: UploadErrorReason,
    message: string,
    options?: ErrorOptions,
  ) {
    super(message, options);
  }

  get isRetryable(): boolean {
    return this.reason === "unreachable";
  }
}
