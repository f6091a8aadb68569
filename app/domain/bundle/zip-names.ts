/** The upper half of code page 437, in which names of old zips are written (the zip specification, appendix D). */
const upper437 =
  'ÇüéâäàåçêëèïîìÄÅÉæÆôöòûùÿÖÜ¢£¥₧ƒáíóúñÑªº¿⌐¬½¼¡«»░▒▓│┤╡╢╖╕╣║╗╝╜╛┐└┴┬├─┼╞╟╚╔╩╦╠═╬╧╨╤╥╙╘╒╓╫╪┘┌█▄▌▐▀αßΓπΣσµτΦΘΩδ∞φε∩≡±≥≤⌠⌡÷≈°∙·√ⁿ²■\u00a0'

const strictUtf8 = new TextDecoder('utf-8', { fatal: true })

/** A zip entry's name: UTF-8 where the bytes are valid UTF-8 (flagged or not, as many tools forget the flag), else code page 437. */
export function decodeZipName(bytes: Uint8Array): string {
  try {
    return strictUtf8.decode(bytes)
  } catch {
    let text = ''
    for (const byte of bytes) text += byte < 128 ? String.fromCharCode(byte) : upper437[byte - 128]
    return text
  }
}

/**
 * Whether unpacking the name could write outside its folder: absolute, parent or drive paths, with either slash, or a NUL. Some systems drop
 * dots and blanks at the end of a part, so that `.. ` is the parent as well.
 */
export function isUnsafePath(name: string): boolean {
  if (name.includes('\0') || /^[\\/]/.test(name) || /^[A-Za-z]:/.test(name)) return true
  return name.split(/[\\/]/).some((part) => /^\.\.[. ]*$/.test(part))
}

/** The path with forward slashes and without empty and `.` parts. */
export const normalPath = (name: string): string =>
  name
    .split(/[\\/]/)
    .filter((part) => part !== '' && part !== '.')
    .join('/')

/** Two names with equal keys would be one file on some system: equal but for case, Unicode form, or dots and blanks at the end of a part. */
export const clashKey = (path: string): string =>
  path
    .normalize('NFC')
    .toLowerCase()
    .normalize('NFC')
    .replace(/[. ]+(?=\/|$)/g, '')

// Control characters, direction and zero-width marks, and what markup and shells are made of.
const oddCharacters = /[\u0000-\u001f\u007f-\u009f\u200b-\u200f\u2028-\u202e\u2060-\u2069\ufeff<>"|?*&:]/

/** Names that some systems keep for devices, whatever extension stands behind them. */
const deviceName = /^(con|prn|aux|nul|com\d|lpt\d)(\.|$)/i

/** What is odd about a path, in words; null when nothing is. */
export function oddName(path: string, limits: { pathLength: number; pathDepth: number }): string | null {
  if (oddCharacters.test(path)) return 'control, direction or markup characters in the name'
  const parts = path.split('/')
  if (parts.some((part) => deviceName.test(part))) return 'a name that some systems keep for a device'
  if (parts.some((part) => /[. ]$/.test(part))) return 'a dot or blank at the end of a name'
  if (path.length > limits.pathLength) return `a path of ${path.length} characters`
  const depth = parts.length - 1
  return depth > limits.pathDepth ? `a file ${depth} folders deep` : null
}

/** A name that can be shown: characters that steer a terminal or the reading direction are replaced, and it is cut to a bearable length. */
export function shownName(path: string): string {
  const plain = path.replace(/[\u0000-\u001f\u007f-\u009f\u200b-\u200f\u2028-\u202e\u2060-\u2069\ufeff]/g, '\ufffd')
  return plain.length <= 260 ? plain : `${plain.slice(0, 120)}…${plain.slice(-120)}`
}
