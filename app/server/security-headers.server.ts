import type { Config } from './config.server'

/**
 * The response headers of every page. Scripts run only with the request's nonce; nothing may be framed; forms go to this site and to
 * the sign-in provider, whose redirect counts as part of the form.
 */
export function securityHeaders(config: Config, nonce: string): Record<string, string> {
  const policy = [
    "default-src 'none'",
    `script-src 'nonce-${nonce}'`,
    "style-src 'self'",
    "img-src 'self' data: blob:",
    "font-src 'self'",
    "connect-src 'self'",
    "manifest-src 'self'",
    `form-action 'self' ${new URL(config.github.webUrl).origin}`,
    "frame-ancestors 'none'",
    "base-uri 'none'",
    "object-src 'none'"
  ]
  return {
    'Content-Security-Policy': policy.join('; '),
    'X-Content-Type-Options': 'nosniff',
    'Referrer-Policy': 'strict-origin-when-cross-origin',
    'Cross-Origin-Opener-Policy': 'same-origin',
    'Permissions-Policy': 'camera=(self), geolocation=(), microphone=()',
    ...(config.isSecure ? { 'Strict-Transport-Security': 'max-age=31536000' } : {})
  }
}
