import type { DeclaredDetails } from './bundle-check.types'

/** A number out of text; null where the text is not one that can be. `expected` says what can. */
export type DetailReader = { expected: string; read(text: string): number | null }

const decimal = (text: string, isPossible: (n: number) => boolean) => {
  const value = /^\d{1,6}(\.\d{1,6})?$/.test(text.trim()) ? Number(text) : NaN
  return isPossible(value) ? value : null
}

/** How the details of a board that are declared beside its zip are written, by the command line and by addresses alike. */
export const layersReader: DetailReader = {
  expected: 'a whole number from 1 to 64',
  read: (text) => decimal(text, (n) => Number.isInteger(n) && n >= 1 && n <= 64)
}

/** The board's thickness in mm. */
export const thicknessReader: DetailReader = {
  expected: 'a thickness in mm, above 0 and up to 10',
  read: (text) => decimal(text, (n) => n > 0 && n <= 10)
}

const readers = { layers: layersReader, thickness: thicknessReader }
type Name = keyof typeof readers

/**
 * Reads `layers` and `thickness` of an address; a parameter that is unknown, repeated or impossible is an error at its name.
 * @returns the details, or what is wrong
 */
export function readDeclaredDetails(
  params: URLSearchParams
): { ok: true; value: DeclaredDetails } | { ok: false; errors: { path: string; message: string }[] } {
  const errors: { path: string; message: string }[] = []
  const found: Partial<Record<Name, number>> = {}
  for (const name of new Set(params.keys())) {
    const reader = Object.hasOwn(readers, name) ? readers[name as Name] : null
    const value = reader?.read(params.get(name)!) ?? null
    if (!reader) errors.push({ path: name.slice(0, 60), message: 'is not known here; known are layers, thickness' })
    else if (params.getAll(name).length > 1) errors.push({ path: name, message: 'is given more than once' })
    else if (value === null) errors.push({ path: name, message: `must be ${reader.expected}` })
    else found[name as Name] = value
  }
  if (errors.length > 0) return { ok: false, errors: errors.slice(0, 20) }
  return { ok: true, value: { declaredLayers: found.layers, thicknessMm: found.thickness } }
}
