/** Security headers. Each directive with its reason. */

/** For every answer, static files included. */
export function fixedHeaders(secure: boolean): Record<string, string> {
  return {
    "X-Content-Type-Options": "nosniff",
    "Referrer-Policy": "same-origin",
    "X-Frame-Options": "DENY",
    "Cross-Origin-Opener-Policy": "same-origin",
    "Cross-Origin-Resource-Policy": "same-origin",
    "Permissions-Policy": "camera=(), geolocation=(), microphone=(), payment=(), usb=()",
    // Only where the site is reached over TLS; a browser ignores it elsewhere.
    ...(secure ? { "Strict-Transport-Security": "max-age=31536000; includeSubDomains" } : {}),
  };
}

/** For whatever has to do with a share link: its secret was in an address, so no other site may learn that address. */
export const shareHeaders: Record<string, string> = {
  "Referrer-Policy": "no-referrer",
  "X-Robots-Tag": "noindex, nofollow",
};

/** Whether a path belongs to a share link. */
export const isSharePath = (path: string): boolean => /^\/(?:s|shared)\//.test(path);

/** For pages. */
export function contentPolicy(nonce: string): string {
  return [
    "default-src 'self'",
    // Only scripts that this answer names, and what those load.
    `script-src 'nonce-${nonce}' 'strict-dynamic'`,
    `style-src 'self' 'nonce-${nonce}'`,
    // React writes style={{…}} as attributes when it renders on the server (charts).
    "style-src-attr 'unsafe-inline'",
    // blob: for the export of figures as PNG.
    "img-src 'self' data: blob:",
    "font-src 'self'",
    "connect-src 'self'",
    // The solver runs in a worker of our own.
    "worker-src 'self'",
    "object-src 'none'",
    "base-uri 'none'",
    "form-action 'self'",
    "frame-ancestors 'none'",
  ].join("; ");
}

/** For a worker's script: it may run WebAssembly, which pages may not. */
export const workerPolicy = "default-src 'none'; script-src 'self' 'wasm-unsafe-eval'; connect-src 'self'";
