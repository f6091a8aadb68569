import type { Config } from './config.server'

export type CookieJar = { name: string; read(header: string | null): string | null; set(value: string): string; clear(): string }

/**
 * A cookie that holds one secret. Scripts cannot read it and other sites cannot send it along with a form; over https its `__Host-` name
 * keeps other hosts of the same domain from setting it.
 * @param maxAgeMs how long the browser keeps it
 */
export function secretCookie(config: Pick<Config, 'isSecure'>, baseName: string, maxAgeMs: number): CookieJar {
  const name = config.isSecure ? `__Host-${baseName}` : baseName
  const line = (value: string, maxAge: number) =>
    `${name}=${value}; Max-Age=${maxAge}; Path=/; HttpOnly; SameSite=Lax${config.isSecure ? '; Secure' : ''}`
  return {
    name,
    read: (header) => readCookie(header, name),
    set: (value) => line(value, Math.floor(maxAgeMs / 1000)),
    clear: () => line('', 0)
  }
}

/** The first cookie of that name in a Cookie header (RFC 6265, section 4.2.1). */
export function readCookie(header: string | null, name: string): string | null {
  for (const part of (header ?? '').split(';')) {
    const at = part.indexOf('=')
    if (at > 0 && part.slice(0, at).trim() === name) return part.slice(at + 1).trim()
  }
  return null
}
