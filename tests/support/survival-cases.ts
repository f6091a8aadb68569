import { reference, referencesNamed, referencesWith, type Reference } from './survival-reference'

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

/** Every Kaplan-Meier result of every file, pooled, by group, conditional, odd, and as silent units bound it. */
export function kaplanMeierCases(): KaplanMeierCase[] {
  const published = referencesWith('kaplan_meier').flatMap((name): KaplanMeierCase[] => {
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
  return [...published, ...referencesNamed('followup').flatMap(silentCases)]
}

/** As observed; with every silent unit failed on the day of its last word, and running to the closing day. */
function silentCases(name: string): KaplanMeierCase[] {
  const { data, results } = reference(name)
  const units = data.start.map((start: number, i: number) => ({
    time: data.last_contact[i] - start,
    event: data.event[i],
    toClose: data.closing_day - start
  }))
  const rowsWith = (change: (unit: { time: number; event: 0 | 1; toClose: number }) => { time: number; event: 0 | 1 }) =>
    units.map((unit: { time: number; event: 0 | 1; toClose: number }) => ({ entry: 0, ...change(unit) }))
  return [
    { name: `${name} as observed`, rows: rowsWith(({ time, event }) => ({ time, event })), expected: results.as_observed },
    {
      name: `${name} worst`,
      rows: rowsWith(({ time, event, toClose }) => ({ time, event: event === 1 || time < toClose ? 1 : 0 })),
      expected: results.worst_tied
    },
    {
      name: `${name} best`,
      rows: rowsWith(({ time, event, toClose }) => ({ time: event === 1 ? time : toClose, event })),
      expected: results.best
    }
  ]
}
