// The headers every answer carries.

interface HeaderFacts {
  readonly nonce: string;
  /** Reached over https. */
  readonly secure: boolean;
  readonly development: boolean;
}

function contentSecurityPolicy({ nonce, development }: HeaderFacts): string {
  return [
    "default-src 'self'",
    `script-src 'self' 'nonce-${nonce}' 'strict-dynamic'`,
    // Vite injects style elements while developing; plots position with style attributes.
    development ? "style-src 'self' 'unsafe-inline'" : `style-src 'self' 'nonce-${nonce}'`,
    "style-src-attr 'unsafe-inline'",
    "img-src 'self' data: blob:",
    "font-src 'self'",
    development ? "connect-src 'self' ws:" : "connect-src 'self'",
    "worker-src 'self'",
    "object-src 'none'",
    "base-uri 'none'",
    "frame-src 'self'",
    "frame-ancestors 'none'",
    "form-action 'self'",
  ].join("; ");
}

export function securityHeaders(facts: HeaderFacts): Record<string, string> {
  return {
    "Content-Security-Policy": contentSecurityPolicy(facts),
    "X-Content-Type-Options": "nosniff",
    "Referrer-Policy": "same-origin",
    "Permissions-Policy": "camera=(), geolocation=(), microphone=(), payment=(), usb=()",
    "Cross-Origin-Opener-Policy": "same-origin",
    "Cross-Origin-Resource-Policy": "same-origin",
    "X-Frame-Options": "DENY",
    ...(facts.secure ? { "Strict-Transport-Security": "max-age=31536000; includeSubDomains" } : {}),
  };
}
