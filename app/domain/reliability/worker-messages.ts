import type { ErrorKind, FieldError } from '~/lib/domain-error'
import type { CalculatorFigures, CalculatorOptions } from '../survival/calculator-figures'
import type { ReliabilityFigures } from './figures.types'
import type { ReliabilityTable } from './reliability-export'
import type { ReliabilityFilters } from './reliability-filters'

/** What the worker is asked: the figures of a board, or a computation on somebody's own data (the body as it came, UTF-8 JSON). */
export type WorkerTask =
  | { kind: 'reliability'; databaseFile: string; board: string; filters: ReliabilityFilters }
  /** All figures of a board as text: the JSON of the API, or a table as CSV. */
  | { kind: 'reliability-text'; databaseFile: string; board: string; filters: ReliabilityFilters; as: 'json' | ReliabilityTable }
  | { kind: 'survival'; body: ArrayBuffer }
  /** A table as it came, for the calculator's page. */
  | { kind: 'calculator'; body: ArrayBuffer; options: CalculatorOptions }

/** What each task gives: figures for a page, or text that the server only passes on. */
export type WorkerResults = {
  reliability: ReliabilityFigures
  'reliability-text': string
  survival: string
  calculator: CalculatorFigures
}

export type WorkerRequest = { id: number; task: WorkerTask }
export type WorkerAnswer =
  /** What the task gives, by `packRows`. */
  | { id: number; ok: true; value: unknown }
  /** An expected failure, meant for the person who asked. */
  | { id: number; ok: false; kind: ErrorKind; message: string; errors: FieldError[] }
  | { id: number; ok: false; kind: null; message: string }
