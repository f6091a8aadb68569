import type { SelectGroup } from './field'
import { SentenceForm } from './sentence-form'

export type OfferedConsole = { slug: string; name: string; revisions: string[] }

export type ConsoleQuestionProps = { consoles: OfferedConsole[]; console?: string | null; revision?: string | null }

/** "I have a Talvi 16 TM-3": console and revision in one choice, so that they always go together, also without scripts. */
export function ConsoleQuestion({ consoles, console, revision }: ConsoleQuestionProps) {
  return (
    <SentenceForm
      action="/fit"
      label="What fits my console"
      span="wide"
      submit="See what fits"
      parts={[
        'I have a',
        {
          name: 'machine',
          label: 'Console and mainboard revision',
          options: consoles.map(revisionsOf),
          value: console ? (revision ? `${console}/${revision}` : console) : undefined
        }
      ]}
    />
  )
}

const revisionsOf = ({ slug, name, revisions }: OfferedConsole): SelectGroup => ({
  heading: name,
  options: [
    { value: slug, label: `${name}, revision unknown` },
    ...revisions.map((code) => ({ value: `${slug}/${code}`, label: `${name} ${code}` }))
  ]
})
