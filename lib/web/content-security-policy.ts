/**
 * Scripts and styles are the site's own, under a nonce; the only other origin is the file store's, for the upload's PUT.
 * Attribute styles stay allowed: React writes them into server-rendered markup.
 */
export function contentSecurityPolicy(
  nonce: string,
  options: { uploadOrigin: string | null; dev: boolean },
): string {
  const connect = ["'self'", ...(options.uploadOrigin ? [options.uploadOrigin] : [])];
  return [
    "default-src 'none'",
    `script-src 'self' 'nonce-${nonce}' 'strict-dynamic'${options.dev ? " 'unsafe-eval'" : ""}`,
    `style-src 'self' 'nonce-${nonce}'`,
    options.dev ? "style-src-elem 'self' 'unsafe-inline'" : `style-src-elem 'self' 'nonce-${nonce}'`,
    "style-src-attr 'unsafe-inline'",
    "img-src 'self' data: blob:",
    "font-src 'self'",
    "media-src 'self' blob:",
    "worker-src 'self'",
    `connect-src ${connect.join(" ")}`,
    "form-action 'self'",
    "frame-ancestors 'none'",
    "base-uri 'none'",
    "manifest-src 'self'",
  ].join("; ");
}
