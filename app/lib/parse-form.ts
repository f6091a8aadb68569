import type { z } from 'zod'
import type { FieldError } from './domain-error'

export type FormValues = Record<string, string>
export type ParsedForm<T> = { ok: true; value: T } | { ok: false; errors: FieldError[]; values: FormValues }

/** The text fields of a form as entered, to fill the form again; files are left out. A repeated name keeps its last value. */
export function formValues(form: FormData): FormValues {
  const values: FormValues = {}
  for (const [name, value] of form) if (typeof value === 'string') values[name] = value
  return values
}

/**
 * Checks a posted form against a schema. Fields left empty are absent for the schema; a repeated name gives an array.
 * On failure the messages stand at their fields and the entered values come back.
 */
export function parseForm<S extends z.ZodType>(schema: S, form: FormData): ParsedForm<z.output<S>> {
  const result = schema.safeParse(inputOf(form))
  if (result.success) return { ok: true, value: result.data }
  return { ok: false, errors: fieldErrors(result.error), values: formValues(form) }
}

function inputOf(form: FormData): Record<string, string | string[]> {
  const input: Record<string, string | string[]> = {}
  for (const name of new Set(form.keys())) {
    const all = form.getAll(name).filter((v): v is string => typeof v === 'string' && v.trim() !== '')
    if (all.length === 1) input[name] = all[0]!.trim()
    else if (all.length > 1) input[name] = all.map((v) => v.trim())
  }
  return input
}

/**
 * The fields of a posted form that can be read each by itself, whatever is wrong with the others: so that what the database has against them
 * can be said in the same answer.
 */
export function readableFields<S extends z.ZodRawShape>(fields: S, form: FormData): Partial<{ [K in keyof S]: z.output<S[K]> }> {
  const input = inputOf(form)
  const read: Record<string, unknown> = {}
  for (const [name, field] of Object.entries(fields)) {
    const result = (field as z.ZodType).safeParse(input[name])
    if (result.success && result.data !== undefined) read[name] = result.data
  }
  return read as Partial<{ [K in keyof S]: z.output<S[K]> }>
}

/** Both lists of messages, one a field: the first list's where both have one. */
export const joinErrors = (first: FieldError[], second: FieldError[]): FieldError[] => [
  ...first,
  ...second.filter(({ path }) => first.every((e) => e.path !== path))
]

/** Flattens zod's issues: one message a path, the first that applies. */
export function fieldErrors(error: z.ZodError): FieldError[] {
  const byPath = new Map<string, string>()
  for (const issue of error.issues) {
    const path = issue.path.join('.')
    if (!byPath.has(path)) byPath.set(path, issue.message)
  }
  return [...byPath].map(([path, message]) => ({ path, message }))
}
