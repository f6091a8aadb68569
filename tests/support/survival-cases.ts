import { reference, referencesWith, type Reference } from './survival-reference'

/** One Kaplan-Meier reference: its input as rows and R's results. */
export type KaplanMeierCase = { name: string; rows: { entry?: number; time: number; event: 0 | 1 }[]; expected: Reference }

type Data = { time: number[]; event: number[]; entry?: number[]; group?: string[] }

/** The usable rows of a data block, by group or all. Rows whose entry is their exit are left out, as R does. */
function rowsOf(data: Data, group: string | null, from = 0): KaplanMeierCase['rows'] {
  return data.time.flatMap((time, i) => {
    const entry = Math.max(data.entry?.[i] ?? 0, from)
    if (group !== null && data.group?.[i] !== group) return []
    if ((data.entry !== undefined && data.entry[i]! >= time) || (from > 0 && time < from)) return []
    return [{ entry, time, event: data.event[i] === 1 ? (1 as const) : (0 as const) }]
  })
}

/** Every Kaplan-Meier result of every file, pooled, by group, conditional and odd. */
export function kaplanMeierCases(): KaplanMeierCase[] {
  return referencesWith('kaplan_meier').flatMap((name): KaplanMeierCase[] => {
    const { data, results } = reference(name)
    if (name.startsWith('odd-cases'))
      return Object.entries<Reference>(results.kaplan_meier).map(([odd, expected]) => ({
        name: `${name} ${odd}`,
        rows: rowsOf(expected.input, null),
        expected
      }))
    const cases: KaplanMeierCase[] = []
    const add = (label: string, expected: Reference, source: Data, from = 0) =>
      cases.push({
        name: `${name} ${label} ${expected.group ?? ''}`,
        rows: rowsOf(source, expected.group ?? null, from),
        expected
      })
    const km = results.kaplan_meier
    if (km.pooled) add('pooled', km.pooled, data)
    for (const one of km.by_group ?? []) add('group', one, data)
    for (const one of km.by_group_conditional_on_816 ?? []) add('from 816', one, data, 816)
    for (const one of results.ignoring_entry_for_contrast ?? []) {
      const { entry, ...rest } = data
      const isUsable = (_: unknown, i: number) => entry[i] < rest.time[i]
      const kept = Object.fromEntries(
        Object.entries<unknown[]>(rest).map(([key, values]) => [key, values.filter(isUsable)])
      ) as Data
      add('without entry', one, kept)
    }
    return cases
  })
}
