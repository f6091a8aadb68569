import type { Config } from './config.server'

/**
 * The response headers of every page. Scripts run only with the request's nonce; nothing may be framed; forms go to this site and to
 * the sign-in provider, whose redirect counts as part of the form. The development server injects scripts, styles and a web socket of its
 * own, so the development mode alone is laxer.
 */
export function securityHeaders(config: Config, nonce: string): Record<string, string> {
  const isDevelopment = config.mode === 'development'
  const policy = [
    "default-src 'none'",
    isDevelopment ? "script-src 'self' 'unsafe-inline'" : `script-src 'nonce-${nonce}'`,
    isDevelopment ? "style-src 'self' 'unsafe-inline'" : "style-src 'self'",
    "img-src 'self' data: blob:",
    "font-src 'self'",
    isDevelopment ? "connect-src 'self' ws:" : "connect-src 'self'",
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
