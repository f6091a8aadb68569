/** A Gerber attribute command: `TF` file, `TA` aperture, `TO` object, `TD` deletes. */
export type Attribute = { kind: 'TF' | 'TA' | 'TO' | 'TD'; name: string; values: string[] }

const utf8 = new TextDecoder('utf-8')

/** The text of bytes of a Gerber or drill file; what is no UTF-8 becomes U+FFFD. */
export const textOf = (bytes: Uint8Array): string => utf8.decode(bytes)

const unescape = (text: string) =>
  text.replace(/\\u([0-9a-fA-F]{4})/g, (_, hex: string) => String.fromCharCode(Number.parseInt(hex, 16)))

/**
 * An attribute from its text without the closing `*`, for instance `TF.FileFunction,Copper,L1,Top`; null for anything else.
 *
 * Source: Gerber Layer Format Specification 2024.05, chapter 5 (fields by comma, `\uXXXX` escapes).
 */
export function parseAttribute(text: string): Attribute | null {
  const kind = text.slice(0, 2)
  if (kind !== 'TF' && kind !== 'TA' && kind !== 'TO' && kind !== 'TD') return null
  const [name = '', ...values] = text.slice(2, 4000).split(',')
  return { kind, name: unescape(name.trim()), values: values.map((value) => unescape(value.trim())) }
}

/** An attribute written as a comment by older tools: `#@! TF.…` after `G04` in Gerber files or `;` in drill files. */
export function parseCommentAttribute(comment: string): Attribute | null {
  const at = comment.indexOf('#@!')
  return at < 0 || at > 8 ? null : parseAttribute(comment.slice(at + 3).trim())
}

/** Whether a text holds what a browser could take for markup. */
export const hasMarkup = (text: string): boolean => /<[a-z!/?]/i.test(text) || /javascript:/i.test(text)

/** The file attributes near the start of a Gerber or drill file, without reading its drawing. Later ones replace earlier ones. */
export function readFileAttributes(bytes: Uint8Array, within = 256 * 1024): Map<string, string[]> {
  const text = textOf(bytes.subarray(0, within))
  const attributes = new Map<string, string[]>()
  for (const match of text.matchAll(/(?:%|#@! ?)(TF\.[^*%\r\n]{1,2000})/g)) {
    const attribute = parseAttribute(match[1]!.trim())
    if (attribute) attributes.set(attribute.name, attribute.values)
  }
  return attributes
}
