import type { Path } from './geometry'
import { defineAperture, upright, type Aperture, type Placing } from './gerber-apertures'
import { gerberArc } from './gerber-arc'
import { AttributeState } from './gerber-attribute-state'
import { parseAttribute, parseCommentAttribute, textOf, type Attribute } from './gerber-attributes'
import { GerberCanvas, type Keeping } from './gerber-canvas'
import { GerberNonsense, TooComplex, type Macro } from './gerber-macro'
import { noMark } from './geometry-sums'
import { excerpt, GerberWord, number, parseFormat } from './gerber-words'
import type { CheckLimits } from './limits'
import type { ReadProblem } from './read-gerber'

const star = 0x2a
const percent = 0x25

/** No panel is as large, and no page of a design tool: coordinates past this, in mm, are nonsense. */
const farthest = 5000

/** Runs one Gerber file on a canvas. State and commands as in the specification's chapter 2.3 and 4. */
export class GerberInterpreter {
  readonly canvas: GerberCanvas
  readonly attributes = new AttributeState()
  readonly deprecated = new Set<string>()

  private readonly word = new GerberWord()
  private readonly apertures = new Map<number, Aperture>()
  /** Definitions that make no sense: they matter only where they are used. */
  private readonly badApertures = new Map<number, GerberNonsense>()
  private readonly macros = new Map<string, Macro>()
  private macroStatements = 0
  private format: { integer: number; decimals: number; isTrailing: boolean } | null = null
  private mostDecimals = 0
  private isIncremental = false
  private unit: number | null = null
  private aperture: Aperture | null = null
  private isDark = true
  private placing: Placing = upright
  private x = 0
  private y = 0
  private motion: 'line' | 'cw' | 'ccw' = 'line'
  private isSingleQuadrant = false
  private lastOperation = 0
  private region: Path | null = null
  private isInRegion = false
  private hasEnded = false
  private readonly blocks: number[] = []
  private step: { nx: number; ny: number; dx: number; dy: number } | null = null
  private image = { offsetX: 0, offsetY: 0, scaleX: 1, scaleY: 1 }

  constructor(
    private readonly limits: CheckLimits,
    keep: Keeping
  ) {
    this.canvas = new GerberCanvas(limits, keep)
  }

  /** Runs the file; answers why it is incomplete, or null. Throws GerberNonsense and TooComplex. */
  run(bytes: Uint8Array): ReadProblem | null {
    let at = 0
    while (at < bytes.length && !this.hasEnded) {
      const c = bytes[at]!
      if (c <= 32 || c === star || c === 0xef || c === 0xbb || c === 0xbf) {
        at++
        continue
      }
      const isExtended = c === percent
      const close = bytes.indexOf(isExtended ? percent : star, at + 1)
      if (close < 0) {
        const found = excerpt(bytes, at, bytes.length)
        return { kind: 'truncated', message: 'The file breaks off in the middle of a command.', found }
      }
      if (isExtended) this.extended(bytes, at + 1, close)
      else this.command(bytes, at, close)
      at = close + 1
    }
    if (this.hasEnded) return null
    return { kind: 'truncated', message: 'The file has no end-of-file command.', found: null }
  }

  private command(bytes: Uint8Array, start: number, end: number): void {
    if (bytes[start] === 0x47 && bytes[start + 1] === 0x30 && bytes[start + 2] === 0x34)
      return this.comment(bytes, start + 3, end)
    if (bytes[start] === 0x47 && bytes[start + 1] === 0x34 && !(bytes[start + 2]! >= 48 && bytes[start + 2]! <= 57)) {
      return this.comment(bytes, start + 2, end)
    }
    const word = this.word
    word.read(bytes, start, end, this.scale)
    for (const g of word.g) this.general(g)
    if (word.m >= 0) {
      if (word.m > 2) throw new GerberNonsense(`an unknown command M${word.m}`)
      if (word.m !== 2) this.deprecated.add(`M0${word.m}`)
      if (word.m !== 1) return this.finish()
    }
    const hasPlace = word.hasX || word.hasY || word.hasI || word.hasJ
    if (word.d >= 10) return this.select(word.d)
    if (word.d >= 0 ? word.d >= 1 && word.d <= 3 : hasPlace) this.operate(word.d > 0 ? word.d : this.modalOperation())
    else if (word.d === 0) throw new GerberNonsense('an unknown command D00')
  }

  private modalOperation(): number {
    this.deprecated.add('coordinates without D01, D02 or D03')
    return this.lastOperation === 0 ? 1 : this.lastOperation
  }

  private comment(bytes: Uint8Array, start: number, end: number): void {
    if (end - start > this.limits.statementBytes) throw new TooComplex(`a comment of ${end - start} bytes`)
    const first = bytes.indexOf(0x23, start)
    if (first < 0 || first > start + 4) return
    const attribute = parseCommentAttribute(textOf(bytes.subarray(start, end)).trim())
    if (attribute) this.attribute(attribute)
  }

  private general(g: number): void {
    if (g === 1) this.motion = 'line'
    else if (g === 2) this.motion = 'cw'
    else if (g === 3) this.motion = 'ccw'
    else if (g === 36) this.beginRegion()
    else if (g === 37) this.endRegion()
    else if (g === 74 || g === 75) this.isSingleQuadrant = g === 74
    else if (g === 70) this.unit = 25.4
    else if (g === 71) this.unit = 1
    else if (g === 90 || g === 91) this.isIncremental = g === 91
    else if (![0, 10, 11, 12, 54, 55].includes(g)) throw new GerberNonsense(`an unknown command G${g}`)
    if (g > 53 && g !== 75) this.deprecated.add(`G${g}`)
  }

  private select(code: number): void {
    const aperture = this.apertures.get(code)
    if (!aperture) throw this.badApertures.get(code) ?? new GerberNonsense(`aperture D${code} is used but never defined`)
    this.aperture = aperture
  }

  private operate(operation: number): void {
    const { word } = this
    if (!this.format) throw new GerberNonsense('there are coordinates but no format statement (FS)')
    const base = this.isIncremental ? { x: this.x, y: this.y } : { x: 0, y: 0 }
    const { image } = this
    const toX = word.hasX ? base.x + word.x * image.scaleX + (this.isIncremental ? 0 : image.offsetX) : this.x
    const toY = word.hasY ? base.y + word.y * image.scaleY + (this.isIncremental ? 0 : image.offsetY) : this.y
    if (!(Math.abs(toX) < farthest && Math.abs(toY) < farthest))
      throw new GerberNonsense(`a coordinate more than ${farthest / 1000} m from the origin`)
    this.lastOperation = operation
    if (operation === 1) this.draw(toX, toY)
    else if (operation === 2 && this.isInRegion) this.closeContour()
    else if (operation === 3) {
      if (!this.aperture) throw new GerberNonsense('something is flashed before an aperture is chosen')
      this.canvas.flash(toX, toY, this.aperture, this.placing, this.isDark)
    }
    this.x = toX
    this.y = toY
  }

  private draw(toX: number, toY: number): void {
    const points: Path = this.motion === 'line' ? [toX, toY] : this.arc(toX, toY)
    if (this.isInRegion) {
      this.canvas.spend(points.length / 2)
      this.region ??= [this.x, this.y]
      for (const value of points) this.region.push(value)
      return
    }
    if (!this.aperture) throw new GerberNonsense('something is drawn before an aperture is chosen')
    points.unshift(this.x, this.y)
    this.canvas.path(points, this.aperture, this.isDark)
  }

  private arc(toX: number, toY: number): Path {
    const { word, image } = this
    const i = (word.hasI ? word.i : 0) * image.scaleX
    const j = (word.hasJ ? word.j : 0) * image.scaleY
    const isClockwise = (this.motion === 'cw') === image.scaleX * image.scaleY > 0
    return gerberArc({ x: this.x, y: this.y, toX, toY, i, j, isClockwise, isSingleQuadrant: this.isSingleQuadrant })
  }

  private beginRegion(): void {
    this.isInRegion = true
    this.region = null
  }

  private closeContour(): void {
    if (this.region) this.canvas.region(this.region, this.isDark)
    this.region = null
  }

  private endRegion(): void {
    this.closeContour()
    this.isInRegion = false
  }

  private finish(): void {
    if (this.isInRegion) this.endRegion()
    if (this.step) this.endStep()
    this.hasEnded = true
  }

  private extended(bytes: Uint8Array, start: number, end: number): void {
    if (end - start > 4 * this.limits.statementBytes) throw new TooComplex(`a command of ${end - start} bytes`)
    const text = textOf(bytes.subarray(start, end))
    const statements = text.split('*')
    if (statements.at(-1)?.trim() === '') statements.pop()
    const first = statements[0]?.trim() ?? ''
    if (first.startsWith('AM')) {
      this.macroStatements += statements.length
      if (this.macroStatements > this.limits.macroPrimitives) throw new TooComplex('too many aperture macro primitives')
      const name = first.slice(2).trim()
      this.macros.set(name, { name, statements: statements.slice(1).filter((s) => s.trim() !== '') })
      return
    }
    for (const statement of statements) this.parameter(statement.replace(/[\r\n]/g, '').trim())
  }

  private parameter(text: string): void {
    const code = text.slice(0, 2)
    const rest = text.slice(2)
    if (code === 'FS') this.formatStatement(rest)
    else if (code === 'MO') this.unit = rest.startsWith('IN') ? 25.4 : 1
    else if (code === 'AD') this.define(rest)
    else if (code === 'LP') this.isDark = !rest.startsWith('C')
    else if (code === 'LM') this.placing = { ...this.placing, mirrorX: rest.includes('X'), mirrorY: rest.includes('Y') }
    else if (code === 'LR') this.placing = { ...this.placing, rotation: number(rest) }
    else if (code === 'LS') this.placing = { ...this.placing, scale: number(rest) }
    else if (code === 'AB') this.blockStatement(rest)
    else if (code === 'SR') this.stepStatement(rest)
    else if (code[0] === 'T') {
      const attribute = parseAttribute(text)
      if (attribute) this.attribute(attribute)
    } else this.deprecatedParameter(code, rest)
  }

  private deprecatedParameter(code: string, rest: string): void {
    const a = /A(-?[\d.]+)/.exec(rest)?.[1]
    const b = /B(-?[\d.]+)/.exec(rest)?.[1]
    if (code === 'OF' || code === 'IO') {
      this.image.offsetX = number(a ?? '0') * (this.unit ?? 25.4)
      this.image.offsetY = number(b ?? '0') * (this.unit ?? 25.4)
    } else if (code === 'MI') {
      if (a === '1') this.image.scaleX = -Math.abs(this.image.scaleX)
      if (b === '1') this.image.scaleY = -Math.abs(this.image.scaleY)
    } else if (code === 'SF') {
      this.image.scaleX *= number(a ?? '1') || 1
      this.image.scaleY *= number(b ?? '1') || 1
    } else if ((code === 'IR' && number(rest || '0') !== 0) || (code === 'AS' && rest.startsWith('AY'))) {
      throw new GerberNonsense(`the whole image is turned by the deprecated command ${code}, which readers treat differently`)
    } else if (!['IP', 'IN', 'LN', 'IR', 'AS', 'IC', 'IF', 'KO', 'PF', 'RO', 'IJ'].includes(code)) {
      if (/^[A-Z]{2}/.test(code)) throw new GerberNonsense(`an unknown command ${code}`)
      throw new GerberNonsense('something that is no Gerber command')
    } else if (code === 'KO' || code === 'IF')
      throw new GerberNonsense(`the deprecated command ${code}, which readers treat differently`)
    this.deprecated.add(code)
  }

  private formatStatement(rest: string): void {
    const { integer, decimals, zeros, mode } = parseFormat(rest)
    this.format = { integer, decimals, isTrailing: zeros === 'T' }
    this.isIncremental = mode === 'I'
    if (zeros !== 'L' || mode !== 'A') this.deprecated.add(`FS${zeros}${mode}`)
  }

  /** A number of a coordinate in mm. */
  private readonly scale = (digits: number, length: number, isNegative: boolean, point: number): number => {
    const { format } = this
    if (!format) throw new GerberNonsense('there are coordinates but no format statement (FS)')
    let value: number
    if (point >= 0) {
      this.deprecated.add('decimal points in coordinates')
      value = digits / 10 ** (length - point)
      this.mostDecimals = Math.max(this.mostDecimals, length - point)
    } else if (format.isTrailing) value = digits / 10 ** (length - format.integer)
    else value = digits / 10 ** format.decimals
    return (isNegative ? -value : value) * (this.unit ?? 25.4)
  }

  /** The step in mm in which the file writes coordinates. */
  get resolution(): number {
    return (this.unit ?? 25.4) / 10 ** Math.max(this.mostDecimals, this.format?.decimals ?? 6)
  }

  private define(rest: string): void {
    if (this.apertures.size + this.badApertures.size >= this.limits.apertures)
      throw new TooComplex(`more than ${this.limits.apertures} apertures`)
    const told = Number(/^D0*(\d{2,9})/.exec(rest)?.[1] ?? Number.NaN)
    const { code, aperture } = this.defined(rest, told)
    if (!aperture) return
    if (aperture.shape === 'macro') this.canvas.spend(Math.ceil(aperture.primitives / 10))
    this.badApertures.delete(code)
    this.apertures.set(code, aperture)
  }

  private defined(rest: string, told: number): { code: number; aperture: Aperture | null } {
    try {
      return defineAperture(rest, this.unit ?? 25.4, this.macros, this.attributes.aperFunction, this.limits)
    } catch (error) {
      if (!(error instanceof GerberNonsense) || !(told >= 10)) throw error
      this.badApertures.set(told, error)
      this.apertures.delete(told)
      return { code: told, aperture: null }
    }
  }

  private blockStatement(rest: string): void {
    const code = /^D0*(\d{1,9})$/.exec(rest)?.[1]
    if (code !== undefined) {
      this.canvas.record()
      this.blocks.push(Number(code))
      return
    }
    const block = this.blocks.pop()
    if (block === undefined) throw new GerberNonsense('a block ends that was never begun')
    const { prims, objects } = this.canvas.takeRecorded()
    const box = { minX: 0, minY: 0, maxX: 0, maxY: 0 }
    const base = { diameter: null, size: null, aperFunction: null, primitives: 1, mark: noMark }
    this.apertures.set(block, { ...base, shape: 'block', box, block: prims, objects: Math.max(1, objects) })
  }

  private stepStatement(rest: string): void {
    if (this.step) this.endStep()
    const match = /^X(\d{1,9})Y(\d{1,9})I(-?[\d.]+)J(-?[\d.]+)$/.exec(rest)
    if (!match) {
      if (rest !== '' && !/^X1Y1/.test(rest))
        throw new GerberNonsense(`a step-and-repeat that cannot be read: ${rest.slice(0, 40)}`)
      return
    }
    const unit = this.unit ?? 25.4
    const [nx, ny] = [Number(match[1]), Number(match[2])]
    if (nx < 1 || ny < 1) throw new GerberNonsense('a step-and-repeat of no steps')
    if (nx === 1 && ny === 1) return
    this.step = { nx, ny, dx: number(match[3]!) * unit, dy: number(match[4]!) * unit }
    this.canvas.record()
  }

  private endStep(): void {
    const { nx, ny, dx, dy } = this.step!
    this.step = null
    const recorded = this.canvas.takeRecorded()
    if (recorded.objects * nx * ny > this.limits.gerberObjects) {
      throw new TooComplex(`a step-and-repeat of ${nx} by ${ny} copies of ${recorded.objects} objects`)
    }
    for (let i = 0; i < nx; i++) {
      for (let j = 0; j < ny; j++) {
        if (recorded.prims.length === 0) return
        this.canvas.replay(recorded, i * dx, j * dy, upright, true)
      }
    }
  }

  private attribute(attribute: Attribute): void {
    const before = this.attributes.component
    this.attributes.take(attribute)
    if (this.attributes.component !== before) this.canvas.component(this.attributes.component)
  }
}
