const maxLength = 500
/* Browsers read a backslash as a slash, and drop tabs and line ends before they read an address. */
const unsafe = /[\u0000-\u0020\\\u007f-\u009f]/

/**
 * Where to go after signing in: a path of this site, or `/`.
 * An address that could lead elsewhere (a scheme, `//`, a backslash, control characters), or back into the signing in, gives `/`.
 */
export function returnPath(asked: string | null | undefined): string {
  if (typeof asked !== 'string' || asked.length > maxLength) return '/'
  if (!asked.startsWith('/') || asked.startsWith('//') || unsafe.test(asked)) return '/'
  const base = 'http://here.invalid'
  const url = URL.canParse(asked, base) ? new URL(asked, base) : null
  if (url === null || url.origin !== base || url.pathname.startsWith('//')) return '/'
  if (/^\/sign-(in|out)(\/|\.data$|$)/.test(url.pathname)) return '/'
  return url.pathname + url.search + url.hash
}
