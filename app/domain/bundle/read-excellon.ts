import { formatFromComment, listedTools } from './drill-comments'
import type { DrillFile, DrillFormat, Hole, Plating } from './drill-file.types'
import { parseCommentAttribute, textOf } from './gerber-attributes'
import { GerberNonsense, TooComplex } from './gerber-macro'
import type { CheckLimits } from './limits'
import type { ReadProblem } from './read-gerber'

type Tool = { diameter: number; plating: Plating }

/**
 * Reads an Excellon or XNC drill file within the limits; nothing is thrown for what the file holds.
 *
 * Source: XNC Format Specification 2021.11 for the modern form; for the older commands (repeats, patterns, routes, INCH/METRIC with
 * LZ/TZ) the published Excellon format description. Where digits are undeclared, 2.4 for inches and 3.3 for millimetres are customary
 * (common practice, no source).
 *
 * @param assume overrides the parts of the format that the file does not declare
 */
export function readExcellon(bytes: Uint8Array, limits: CheckLimits, assume: Partial<DrillFormat> = {}): DrillFile {
  const reader = new ExcellonReader(limits, assume)
  let problem: ReadProblem | null = null
  try {
    problem = reader.run(bytes)
  } catch (error) {
    if (error instanceof GerberNonsense)
      problem = reader.isCut ? cutOff(error.message) : { kind: 'unreadable', message: error.message, found: null }
    else if (error instanceof TooComplex) problem = { kind: 'too-complex', message: error.message, found: null }
    else throw error
  }
  let smallestTool: number | null = null
  for (const { diameter } of reader.holes) if (smallestTool === null || diameter < smallestTool) smallestTool = diameter
  return {
    attributes: reader.attributes,
    holes: reader.holes,
    problem,
    format: reader.format(),
    declared: reader.declared,
    doubts: reader.doubts,
    smallestTool,
    resolution: reader.resolution
  }
}

const cutOff = (why: string) => ({ kind: 'truncated' as const, message: `Its last line breaks off (${why}).`, found: null })

class ExcellonReader {
  readonly attributes = new Map<string, string[]>()
  readonly holes: Hole[] = []
  readonly declared: DrillFile['declared'] = { unit: null, digits: false, keeps: null }
  readonly doubts: DrillFile['doubts'] = new Set()

  private digits: { integer: number; decimals: number } | null = null
  private readonly tools = new Map<number, Tool>()
  private tool: Tool | null = null
  private toolPlating: Plating = null
  private isInHeader = false
  private isIncremental = false
  private isRouting = false
  private route: { x: number; y: number } | null = null
  private x = 0
  private y = 0
  private originX = 0
  private originY = 0
  private pattern: { from: number; to: number | null; x: number; y: number } | null = null
  private mostDecimals = 0
  private hasEnded = false
  private bytes: Uint8Array = new Uint8Array()
  private listed: Map<number, number> | null = null

  constructor(
    private readonly limits: CheckLimits,
    private readonly assume: Partial<DrillFormat>
  ) {}

  format(): DrillFormat {
    const unit = this.declared.unit ?? this.assume.unit ?? 'inch'
    const customary = unit === 'inch' ? { integer: 2, decimals: 4 } : { integer: 3, decimals: 3 }
    const assumed =
      this.assume.integer !== undefined && this.assume.decimals !== undefined
        ? { integer: this.assume.integer, decimals: this.assume.decimals }
        : customary
    return { unit, ...(this.digits ?? assumed), keeps: this.declared.keeps ?? this.assume.keeps ?? 'trailing' }
  }

  get resolution(): number {
    const { unit, decimals } = this.format()
    // Zeros at the end are left out with decimal points: fewer digits than are customary tell nothing.
    const written = this.mostDecimals === 0 ? decimals : Math.max(this.mostDecimals, unit === 'inch' ? 4 : 3)
    return (unit === 'inch' ? 25.4 : 1) / 10 ** written
  }

  /** Whether the line at hand is the last and has no line end: what cannot be read of it was cut off. */
  isCut = false
  run(bytes: Uint8Array): ReadProblem | null {
    this.bytes = bytes
    let at = 0
    while (at < bytes.length && !this.hasEnded) {
      let end = at
      while (end < bytes.length && bytes[end] !== 10 && bytes[end] !== 13) end++
      if (end - at > this.limits.statementBytes) throw new TooComplex(`a line of ${end - at} bytes`)
      const line = textOf(bytes.subarray(at, end)).trim()
      this.isCut = end === bytes.length
      if (line !== '') this.line(line)
      at = end + 1
    }
    return this.hasEnded ? null : { kind: 'truncated', message: 'The drill file has no end-of-file command.', found: null }
  }

  private line(line: string): void {
    if (line[0] === ';') return this.comment(line.slice(1))
    const text = line.split(';', 1)[0]!.trim().toUpperCase()
    if (text === 'M48') this.isInHeader = true
    else if (text === '%' || text === 'M95') this.isInHeader = false
    else if (/^(METRIC|INCH)/.test(text)) this.units(text)
    else if (/^T\d/.test(text)) this.toolLine(text)
    else if (/^M\d/.test(text) && !/^M0?2X/.test(text)) this.miscellaneous(text)
    else if (this.isInHeader) this.headerLine(text)
    else this.bodyLine(text.replaceAll(' ', ''))
  }

  private comment(comment: string): void {
    const attribute = parseCommentAttribute(comment)
    if (attribute?.kind === 'TF' && this.attributes.size < 200) this.attributes.set(attribute.name, attribute.values)
    else if (attribute?.kind === 'TA' && attribute.name === '.AperFunction') {
      this.toolPlating = attribute.values[0] === 'Plated' ? 'plated' : attribute.values[0] === 'NonPlated' ? 'non-plated' : null
    } else if (attribute?.kind === 'TD') this.toolPlating = null
    const told = formatFromComment(comment)
    if (told.plating) this.toolPlating = told.plating
    if (told.digits) this.setDigits(...told.digits)
    this.declared.unit ??= told.unit
    this.declared.keeps ??= told.keeps
  }

  private units(text: string): void {
    this.declared.unit = text.startsWith('INCH') ? 'inch' : 'mm'
    if (/\bTZ\b/.test(text)) this.declared.keeps = 'trailing'
    else if (/\bLZ\b/.test(text)) this.declared.keeps = 'leading'
    const digits = /(0+)\.(0+)/.exec(text)
    if (digits) this.setDigits(digits[1]!.length, digits[2]!.length)
  }

  private setDigits(integer: number, decimals: number): void {
    if (integer + decimals < 1 || integer + decimals > 12) return
    this.digits = { integer, decimals }
    this.declared.digits = true
  }

  private toolLine(text: string): void {
    const code = Number(/^T(\d{1,9})/.exec(text)![1])
    const size = /C([+-]?[\d.]+)/.exec(text)
    if (size) {
      const diameter = Number(size[1])
      if (!(diameter >= 0) || diameter > 1000) throw new GerberNonsense(`tool T${code} has an impossible size`)
      if (this.tools.size > 10_000) throw new TooComplex('more than 10000 tools')
      this.tools.set(code, { diameter, plating: this.toolPlating })
    } else if (this.isInHeader) {
      if (/^T\d+$/.test(text) && code > 0 && !this.toolElsewhere(code))
        throw new GerberNonsense(`tool T${code} is listed without its size`)
      return
    }
    if (this.isInHeader) return
    // T0 puts the tool away, unless the file has a tool of that number.
    const isPutAway = code === 0 && !this.tools.has(0)
    if (isPutAway) return void (this.tool = null)
    const tool = this.tools.get(code) ?? this.toolElsewhere(code)
    if (!tool) throw new GerberNonsense(`tool T${code} is used but never defined`)
    this.tool = tool
    const rest = text.replace(/^T\d+([CFSBHZ][+-]?[\d.]+)*/, '')
    if (rest !== '') this.bodyLine(rest)
  }

  /** A tool that is not defined before it is used, from a list of tools in comments or further down. */
  private toolElsewhere(code: number): Tool | undefined {
    const diameter = (this.listed ??= listedTools(this.bytes, this.format().unit === 'inch' ? 25.4 : 1)).get(code)
    return diameter === undefined ? undefined : { diameter, plating: null }
  }

  private miscellaneous(text: string): void {
    const code = Number(/^M(\d{1,3})/.exec(text)![1])
    if (code === 30 || code === 0) this.hasEnded = true
    else if (code === 71) this.declared.unit = 'mm'
    else if (code === 72) this.declared.unit = 'inch'
    else if (code === 15) {
      this.isRouting = true
      this.route = { x: this.x, y: this.y }
    } else if (code === 16 || code === 17) this.endRoute()
    else if (code === 25) this.pattern = { from: this.holes.length, to: null, x: 0, y: 0 }
    else if (code === 1 && this.pattern) this.pattern.to ??= this.holes.length
    else if (code === 8) this.pattern = null
    else if (code === 2 && !this.pattern) this.hasEnded = true
    else if (![1, 2, 6, 9, 14, 18, 45, 47, 50, 60, 80, 90, 97, 98].includes(code))
      throw new GerberNonsense(`an unknown command M${code}`)
  }

  private headerLine(text: string): void {
    if (/^ICI/.test(text)) this.isIncremental = /ON/.test(text)
    else if (/^[XY]/.test(text)) throw new GerberNonsense('coordinates stand in the header')
    // Machine settings (speeds, tool changer) do not change the holes.
    else if (!/^[/A-Z][A-Z0-9,.+\-/ =;]*$/.test(text))
      throw new GerberNonsense(`a header line that cannot be read: ${text.slice(0, 40)}`)
  }

  private bodyLine(text: string): void {
    const g = /^G0*(\d{1,3})/.exec(text)
    if (g && !/^G85/.test(text)) {
      const code = Number(g[1])
      if (code === 90 || code === 91) this.isIncremental = code === 91
      else if (code === 70 || code === 71) this.declared.unit = code === 70 ? 'inch' : 'mm'
      else if (code === 5 || code === 81) this.endRoute()
      else if (![0, 1, 2, 3, 4, 7, 40, 41, 42, 82, 83, 84, 92, 93].includes(code))
        throw new GerberNonsense(`an unknown command G${code}`)
      const rest = text.slice(g[0].length)
      if (code === 4 || rest === '') return
      if (code === 92 || code === 93) {
        const to = this.coordinates(rest, false)
        this.originX = to.x
        this.originY = to.y
        return
      }
      if (code <= 3) return this.move(code, rest)
      return this.bodyLine(rest)
    }
    const repeat = /^R(\d{1,12})(?:M0?2)?(.*)$/.exec(text)
    if (repeat) return this.repeat(Number(repeat[1]), repeat[2]!)
    const patternStep = /^M0?2(X.*)$/.exec(text)
    if (patternStep) return this.repeatPattern(patternStep[1]!)
    const slot = /^((?:[XY][+-]?[\d.]+)*)G85((?:[XY][+-]?[\d.]+)+)$/.exec(text)
    if (slot) {
      if (slot[1] !== '') this.moveTo(this.coordinates(slot[1]!))
      const from = { x: this.x, y: this.y }
      this.moveTo(this.coordinates(slot[2]!))
      return this.drill(from.x, from.y, this.x, this.y)
    }
    if (!/^[XY]/.test(text)) throw new GerberNonsense(`a line that cannot be read: ${text.slice(0, 40)}`)
    this.moveTo(this.coordinates(text))
    if (!this.isRouting) this.drill(this.x, this.y, null, null)
  }

  private move(code: number, rest: string): void {
    const place = rest.replace(/[AIJ][+-]?[\d.]+/g, '').replace(/G85.*/, '')
    if (code === 0) {
      this.endRoute()
      if (place !== '') this.moveTo(this.coordinates(place))
      return
    }
    if (place !== '') this.moveTo(this.coordinates(place))
  }

  private endRoute(): void {
    if (this.route) this.drill(this.route.x, this.route.y, this.x, this.y)
    this.route = null
    this.isRouting = false
  }

  private repeat(count: number, rest: string): void {
    const last = this.holes.at(-1)
    if (!last) throw new GerberNonsense('a repeat before the first hole')
    if (count + this.holes.length > this.limits.drillHoles) throw new TooComplex(`a repeat of ${count} holes`)
    const step = rest === '' ? { x: 0, y: 0 } : this.coordinates(rest, false)
    for (let i = 1; i <= count; i++) {
      this.x = last.x + i * step.x
      this.y = last.y + i * step.y
      this.drill(this.x, this.y, null, null)
    }
  }

  private repeatPattern(rest: string): void {
    if (!this.pattern) throw new GerberNonsense('a pattern is repeated that was never begun')
    this.pattern.to ??= this.holes.length
    const step = this.coordinates(rest, false)
    this.pattern.x += step.x
    this.pattern.y += step.y
    const { from, to, x, y } = this.pattern
    for (const hole of this.holes.slice(from, to)) {
      this.push({
        ...hole,
        x: hole.x + x,
        y: hole.y + y,
        toX: hole.toX === null ? null : hole.toX + x,
        toY: hole.toY === null ? null : hole.toY + y
      })
    }
  }

  private moveTo(to: { x: number; y: number }): void {
    this.x = to.x
    this.y = to.y
  }

  /** A place in mm; coordinates that are left out stay where they were (0 for steps). */
  private coordinates(text: string, isPlace = true): { x: number; y: number } {
    const match = /^(?:X([+-]?[\d.]+))?(?:Y([+-]?[\d.]+))?(?:X([+-]?[\d.]+))?$/.exec(text)
    if (!match || text === '') throw new GerberNonsense(`coordinates that cannot be read: ${text.slice(0, 40)}`)
    const value = (digits: string | undefined, previous: number, origin: number) => {
      if (digits === undefined) return isPlace ? previous : 0
      const read = this.number(digits)
      return !isPlace ? read : this.isIncremental ? previous + read : read + origin
    }
    return { x: value(match[1] ?? match[3], this.x, this.originX), y: value(match[2], this.y, this.originY) }
  }

  private number(text: string): number {
    const format = this.format()
    const unit = format.unit === 'inch' ? 25.4 : 1
    if (this.declared.unit === null) this.doubts.add('unit')
    const digits = text.replace(/[+-]/g, '')
    let value: number
    if (digits.includes('.')) {
      value = Number(digits)
      this.mostDecimals = Math.max(this.mostDecimals, digits.length - digits.indexOf('.') - 1)
    } else if (format.keeps === 'leading') value = Number(digits) / 10 ** (digits.length - format.integer)
    else value = Number(digits) / 10 ** format.decimals
    if (!digits.includes('.')) {
      if (!this.declared.digits) this.doubts.add('digits')
      if (this.declared.keeps === null && digits.length !== format.integer + format.decimals) this.doubts.add('zeros')
    }
    if (!Number.isFinite(value) || Math.abs(value) > 1e5)
      throw new GerberNonsense(`a coordinate beyond all reason: ${text.slice(0, 30)}`)
    return (text.startsWith('-') ? -value : value) * unit
  }

  private drill(x: number, y: number, toX: number | null, toY: number | null): void {
    if (!this.tool) throw new GerberNonsense('a hole is drilled before a tool is chosen')
    const isSlot = toX !== null && toY !== null && Math.hypot(toX - x, toY - y) > 1e-6
    const unit = this.format().unit === 'inch' ? 25.4 : 1
    const { diameter, plating } = this.tool
    this.push({ x, y, toX: isSlot ? toX : null, toY: isSlot ? toY : null, diameter: diameter * unit, plating })
  }

  private push(hole: Hole): void {
    if (this.holes.length >= this.limits.drillHoles) throw new TooComplex(`more than ${this.limits.drillHoles} holes`)
    this.holes.push(hole)
  }
}
