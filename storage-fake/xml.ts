import { S3Error } from './errors'

/** An element of a document to write: text, or children; undefined values are left out, arrays repeat the element. */
export type XmlValue = string | number | boolean | { [name: string]: XmlValue | XmlValue[] | undefined }

export type XmlElement = { name: string; text: string; children: XmlElement[] }

const namespace = 'http://s3.amazonaws.com/doc/2006-03-01/'

/** Escapes text for XML; control characters become references, so that a key with them survives. */
export function escapeXml(text: string): string {
  return text.replace(/[&<>"'\u0000-\u001f\u007f]/g, (c) => {
    if (c === '&') return '&amp;'
    if (c === '<') return '&lt;'
    if (c === '>') return '&gt;'
    return `&#${c.charCodeAt(0)};`
  })
}

/** A whole document with its declaration. */
export function xmlDocument(root: string, value: XmlValue, withNamespace = true): string {
  const attributes = withNamespace ? ` xmlns="${namespace}"` : ''
  return `<?xml version="1.0" encoding="UTF-8"?>\n<${root}${attributes}>${content(value)}</${root}>`
}

function content(value: XmlValue): string {
  if (typeof value !== 'object') return escapeXml(String(value))
  let text = ''
  for (const [name, inner] of Object.entries(value)) {
    if (inner === undefined) continue
    for (const one of Array.isArray(inner) ? inner : [inner]) text += `<${name}>${content(one)}</${name}>`
  }
  return text
}

const malformed = () =>
  new S3Error('MalformedXML', 'The XML you provided was not well-formed or did not validate against our published schema')
const entities: Record<string, string> = { amp: '&', lt: '<', gt: '>', quot: '"', apos: "'" }
const depthLimit = 8

function unescape(text: string): string {
  return text.replace(/&([^;&]*);?/g, (whole, name: string) => {
    if (!whole.endsWith(';')) throw malformed()
    const plain = entities[name]
    if (plain !== undefined) return plain
    const code = /^#(?:(\d{1,7})|x([0-9a-fA-F]{1,6}))$/.exec(name)
    const point = code ? (code[1] !== undefined ? Number(code[1]) : parseInt(code[2]!, 16)) : NaN
    if (!(point > 0 && point <= 0x10ffff) || (point >= 0xd800 && point <= 0xdfff)) throw malformed()
    return String.fromCodePoint(point)
  })
}

/**
 * Reads the small XML documents of the S3 API: elements, attributes (ignored) and text. Document types, CDATA, comments inside and
 * processing instructions are refused, so nothing can expand. Throws MalformedXML.
 */
export function parseXml(source: string): XmlElement {
  const root: XmlElement = { name: '', text: '', children: [] }
  const open = [root]
  const rest = source.replace(/^\uFEFF?\s*<\?xml[^?]*\?>/, '')
  const token = /<(\/?)([A-Za-z_][\w.:-]*)((?:\s+[\w.:-]+\s*=\s*(?:"[^"<]*"|'[^'<]*'))*)\s*(\/?)>|([^<]+)/gy
  let at = 0
  for (let found = token.exec(rest); found; found = token.exec(rest)) {
    at = token.lastIndex
    const [, isEnd, name, , isEmpty, text] = found
    const top = open.at(-1)!
    if (text !== undefined) {
      if (top === root && text.trim() !== '') throw malformed()
      top.text += unescape(text)
    } else if (isEnd) {
      if (top === root || top.name !== name || isEmpty) throw malformed()
      open.pop()
    } else {
      const element: XmlElement = { name: name!, text: '', children: [] }
      top.children.push(element)
      if (!isEmpty) open.push(element)
      if (open.length > depthLimit) throw malformed()
    }
  }
  if (at !== rest.length || open.length !== 1 || root.children.length !== 1) throw malformed()
  return root.children[0]!
}

/** The children of an element by name; throws MalformedXML when the root is another. */
export function childrenOf(element: XmlElement, root: string, child: string): XmlElement[] {
  if (element.name !== root) throw malformed()
  return element.children.filter((one) => one.name === child)
}

/** Text of a child, undefined when it is absent. */
export const textOf = (element: XmlElement, child: string): string | undefined =>
  element.children.find((one) => one.name === child)?.text
