import { emptyBox, growBox, type Box } from './geometry'

export type Macro = { name: string; statements: string[] }

/** A macro or aperture that makes no sense; the message is for people. */
export class GerberNonsense extends Error {}

/** The budget of work for one file is used up. */
export class TooComplex extends Error {}

/**
 * Value of a macro expression: numbers, `$n`, + - x / and parentheses; x and / bind stronger, equals from left to right.
 *
 * @throws GerberNonsense where it cannot be read
 */
export function evaluate(expression: string, variables: readonly (number | undefined)[]): number {
  const text = expression.replace(/\s+/g, '')
  if (text.length > 2000) throw new GerberNonsense('an aperture macro has an expression of absurd length')
  let at = 0
  let depth = 0
  const fail = (): never => {
    throw new GerberNonsense(`an aperture macro has an expression that cannot be read: ${text.slice(0, 40)}`)
  }
  const factor = (): number => {
    const c = text[at]
    if (c === '-' || c === '+') {
      at++
      if (++depth > 64) fail()
      const value = factor()
      return c === '-' ? -value : value
    }
    if (c === '(') {
      at++
      if (++depth > 64) fail()
      const value = sum()
      if (text[at++] !== ')') fail()
      return value
    }
    const match = /^\$(\d{1,5})|^\d*\.?\d+|^\d+\./.exec(text.slice(at, at + 40))
    if (!match) return fail()
    at += match[0].length
    return match[1] === undefined ? Number(match[0]) : (variables[Number(match[1])] ?? 0)
  }
  const product = (): number => {
    let value = factor()
    for (let c = text[at]; c === 'x' || c === 'X' || c === '/'; c = text[at]) {
      at++
      value = c === '/' ? value / factor() : value * factor()
    }
    return value
  }
  function sum(): number {
    let value = product()
    for (let c = text[at]; c === '+' || c === '-'; c = text[at]) {
      at++
      value = c === '+' ? value + product() : value - product()
    }
    return value
  }
  const value = sum()
  if (at !== text.length || !Number.isFinite(value)) fail()
  return value
}

const required: Record<number, number> = { 1: 4, 2: 7, 20: 7, 21: 6, 22: 6, 4: 5, 5: 6, 6: 9, 7: 6 }

/**
 * The extents of a macro aperture with its parameters, in the file's unit, how many primitives it draws, and its dots: x, y and radius of
 * the corners and rounds of everything it exposes, whose hull is the shape as far as it bulges outwards.
 *
 * @param onPrimitive told each primitive's code and values
 * Source: Gerber Layer Format Specification 2024.05, section 4.5; codes 2, 6 and 22 are deprecated there and still read.
 */
export function macroExtents(
  macro: Macro,
  parameters: readonly number[],
  onPrimitive: (code: number, values: readonly number[]) => void = () => {}
): { box: Box; primitives: number; dots: number[] } {
  const variables: (number | undefined)[] = [undefined, ...parameters]
  const box = emptyBox()
  const dots: number[] = []
  let primitives = 0
  for (const statement of macro.statements) {
    if (/^\s*0(\D|$)/.test(statement)) continue
    const assignment = /^\s*\$(\d{1,5})\s*=(.*)$/s.exec(statement)
    if (assignment) {
      variables[Number(assignment[1])] = evaluate(assignment[2]!, variables)
      continue
    }
    const fields = statement.split(',')
    if (fields.length > 10_100) throw new GerberNonsense('an aperture macro has an outline of absurd length')
    const [code, ...values] = fields.map((field) => evaluate(field, variables)) as [number, ...number[]]
    const least = required[code]
    if (least === undefined)
      throw new GerberNonsense(`aperture macro ${macro.name.slice(0, 40)} uses the unknown primitive ${code}`)
    if (values.length < least - 1) throw new GerberNonsense(`aperture macro ${macro.name.slice(0, 40)} lacks values`)
    primitives++
    const isErasing = code !== 6 && code !== 7 && values[0] === 0
    grow(box, code, values, isErasing ? null : dots)
    onPrimitive(code, values)
  }
  return { box, primitives, dots }
}

/** Grows the box by one primitive, and adds its corners (x, y, 0) and rounds (x, y, radius) to the dots. */
function grow(box: Box, code: number, v: number[], dots: number[] | null): void {
  const at = (x: number, y: number, half: number, rotation: number) => {
    const angle = (rotation * Math.PI) / 180
    const turnedX = x * Math.cos(angle) - y * Math.sin(angle)
    const turnedY = x * Math.sin(angle) + y * Math.cos(angle)
    growBox(box, turnedX, turnedY, half)
    dots?.push(turnedX, turnedY, half)
  }
  const corners = (x0: number, y0: number, x1: number, y1: number, rotation: number) => {
    for (const [x, y] of [
      [x0, y0],
      [x1, y0],
      [x1, y1],
      [x0, y1]
    ] as const)
      at(x, y, 0, rotation)
  }
  if (code === 1) at(v[2]!, v[3]!, Math.abs(v[1]!) / 2, v[4] ?? 0)
  else if (code === 2 || code === 20) {
    const [, width, x0, y0, x1, y1] = v as [number, number, number, number, number, number]
    const length = Math.hypot(x1 - x0, y1 - y0) || 1
    const nx = ((y1 - y0) / length) * (width / 2)
    const ny = ((x1 - x0) / length) * (width / 2)
    for (const [x, y] of [
      [x0, y0],
      [x1, y1]
    ] as const) {
      at(x + nx, y - ny, 0, v[6] ?? 0)
      at(x - nx, y + ny, 0, v[6] ?? 0)
    }
  } else if (code === 21) corners(v[3]! - v[1]! / 2, v[4]! - v[2]! / 2, v[3]! + v[1]! / 2, v[4]! + v[2]! / 2, v[5] ?? 0)
  else if (code === 22) corners(v[3]!, v[4]!, v[3]! + v[1]!, v[4]! + v[2]!, v[5] ?? 0)
  else if (code === 4) {
    const count = v[1]!
    if (!Number.isInteger(count) || count < 1 || v.length < 2 + 2 * (count + 1))
      throw new GerberNonsense('an outline in an aperture macro is incomplete')
    const rotation = v[2 + 2 * (count + 1)] ?? 0
    for (let i = 0; i <= count; i++) at(v[2 + 2 * i]!, v[3 + 2 * i]!, 0, rotation)
  } else if (code === 5) {
    if (v[1]! < 3 || v[1]! > 12) throw new GerberNonsense(`a polygon in an aperture macro has ${v[1]} corners`)
    at(v[2]!, v[3]!, Math.abs(v[4]!) / 2, v[5] ?? 0)
  } else if (code === 6) at(v[0]!, v[1]!, Math.max(Math.abs(v[2]!), Math.abs(v[7]!)) / 2, v[8] ?? 0)
  else at(v[0]!, v[1]!, Math.abs(v[2]!) / 2, v[5] ?? 0)
}
