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
  const input: Record<string, string | string[]> = {}
  for (const name of new Set(form.keys())) {
    const all = form.getAll(name).filter((v): v is string => typeof v === 'string' && v.trim() !== '')
    if (all.length === 1) input[name] = all[0]!.trim()
    else if (all.length > 1) input[name] = all.map((v) => v.trim())
  }
  const result = schema.safeParse(input)
  if (result.success) return { ok: true, value: result.data }
  return { ok: false, errors: fieldErrors(result.error), values: formValues(form) }
}

/** Flattens zod's issues: one message a path, the first that applies. */
export function fieldErrors(error: z.ZodError): FieldError[] {
  const byPath = new Map<string, string>()
  for (const issue of error.issues) {
    const path = issue.path.join('.')
    if (!byPath.has(path)) byPath.set(path, issue.message)
  }
  return [...byPath].map(([path, message]) => ({ path, message }))
}
