/** What is uploaded through a browser, by the slug that the wire carries. */
export const uploadSlugs = ["master", "paper", "confidential"] as const;

export type UploadSlug = (typeof uploadSlugs)[number];

/**
 * Limits of what a browser may hand in at once. The declared size and type are the client's claim: whoever takes the
 * stored bytes measures them again.
 */
export const uploadLimits = {
  master: { maxFileSize: "8GB", maxFileCount: 40, accept: "audio" },
  paper: { maxFileSize: "64MB", maxFileCount: 20, accept: "paper" },
  confidential: { maxFileSize: "1GB", maxFileCount: 5, accept: "audio" },
} as const satisfies Record<
  UploadSlug,
  { maxFileSize: string; maxFileCount: number; accept: "audio" | "paper" }
>;

/** How long a started upload may be resumed under the same signed address. */
export const UPLOAD_WINDOW_H = 24;
