/**
 * Headers that every answer carries. Scripts run only from our own files or with the request's nonce. Style
 * attributes are allowed because server-rendered diagrams carry them; style elements need the nonce.
 */
export function securityHeaders(options: {
  nonce: string;
  https: boolean;
  dev: boolean;
}): Record<string, string> {
  const { nonce, https, dev } = options;
  const policy = [
    "default-src 'self'",
    `script-src 'self' 'nonce-${nonce}'`,
    // Vite puts style elements without a nonce into the page while developing.
    dev ? "style-src 'self' 'unsafe-inline'" : `style-src 'self' 'nonce-${nonce}'`,
    "style-src-attr 'unsafe-inline'",
    "img-src 'self' data: blob:",
    dev ? "connect-src 'self' ws:" : "connect-src 'self'",
    "object-src 'none'",
    "base-uri 'self'",
    "form-action 'self'",
    "frame-ancestors 'none'",
  ];
  return {
    "Content-Security-Policy": policy.join("; "),
    "X-Content-Type-Options": "nosniff",
    "X-Frame-Options": "DENY",
    "Referrer-Policy": "same-origin",
    "Permissions-Policy": "camera=(self), geolocation=(), microphone=()",
    "Cross-Origin-Opener-Policy": "same-origin",
    "Cross-Origin-Resource-Policy": "same-origin",
    ...(https ? { "Strict-Transport-Security": "max-age=31536000" } : {}),
  };
}
