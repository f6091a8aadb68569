import { GerberNonsense } from './gerber-macro'

/** One word command taken apart; `has…` tells whether the letter stood there. Reused from command to command. */
export class GerberWord {
  g: number[] = []
  d = -1
  m = -1
  hasX = false
  hasY = false
  hasI = false
  hasJ = false
  x = 0
  y = 0
  i = 0
  j = 0

  /**
   * Reads `bytes` from `start` to `end`. Numbers stay as written, scaled by `scale`.
   *
   * @throws GerberNonsense for a letter or number that does not belong there
   */
  read(
    bytes: Uint8Array,
    start: number,
    end: number,
    scale: (digits: number, length: number, isNegative: boolean, point: number) => number
  ): void {
    this.g.length = 0
    this.d = this.m = -1
    this.hasX = this.hasY = this.hasI = this.hasJ = false
    let at = start
    while (at < end) {
      const letter = bytes[at]!
      at++
      if (letter <= 32) continue
      let isNegative = false
      while (at < end && bytes[at]! <= 32) at++
      if (bytes[at] === 0x2d || bytes[at] === 0x2b) {
        isNegative = bytes[at] === 0x2d
        at++
      }
      let value = 0
      let length = 0
      let point = -1
      while (at < end) {
        const c = bytes[at]!
        if (c >= 48 && c <= 57) {
          value = value * 10 + (c - 48)
          length++
        } else if (c === 0x2e && point < 0) point = length
        else if (c > 32) break
        at++
      }
      if (length === 0 || length > 15) throw new GerberNonsense(`a command cannot be read: ${excerpt(bytes, start, end)}`)
      if (letter === 0x58) {
        this.hasX = true
        this.x = scale(value, length, isNegative, point)
      } else if (letter === 0x59) {
        this.hasY = true
        this.y = scale(value, length, isNegative, point)
      } else if (letter === 0x49) {
        this.hasI = true
        this.i = scale(value, length, isNegative, point)
      } else if (letter === 0x4a) {
        this.hasJ = true
        this.j = scale(value, length, isNegative, point)
      } else if (letter === 0x44) this.d = value
      else if (letter === 0x47) this.g.push(value)
      else if (letter === 0x4d) this.m = value
      else if (letter !== 0x4e) throw new GerberNonsense(`a command cannot be read: ${excerpt(bytes, start, end)}`)
    }
  }
}

/** The start of a stretch of bytes as harmless text. */
export function excerpt(bytes: Uint8Array, start: number, end: number): string {
  let text = ''
  for (let i = start; i < Math.min(end, start + 40); i++) {
    const c = bytes[i]!
    text += c >= 32 && c < 127 ? String.fromCharCode(c) : c <= 32 ? ' ' : '\ufffd'
  }
  return text.trim()
}

/**
 * A format statement without `FS`, for instance `LAX46Y46`; the older forms with `D`, `N` and `G` fields are read, too.
 *
 * @throws GerberNonsense where it cannot be read
 */
export function parseFormat(text: string): { integer: number; decimals: number; zeros: string; mode: string } {
  const match = /^([LTD]?)([AI]?)(?:N\d)?(?:G\d)?X(\d)(\d)Y(\d)(\d)/.exec(text)
  if (!match) throw new GerberNonsense(`a format statement that cannot be read: FS${text.slice(0, 20)}`)
  const [, zeros, mode, integer, decimals, integerY, decimalsY] = match
  if (integer !== integerY || decimals !== decimalsY) throw new GerberNonsense('a format statement with two formats')
  return { integer: Number(integer), decimals: Number(decimals), zeros: zeros!, mode: mode! }
}

/** A number of a command's field. @throws GerberNonsense where it is none */
export function number(text: string): number {
  const value = Number(text)
  if (!Number.isFinite(value)) throw new GerberNonsense(`a value that is no number: ${text.slice(0, 20)}`)
  return value
}
