import { data } from 'react-router'
import type { Route } from './+types/page'
import { SiteSheet } from '~/components/site-sheet'
import { TextLink } from '~/components/text-link'
import { Title } from '~/components/title'
import { callerOf, countUse } from '~/domain/accounts/rate-limit.server'
import { computeWorker } from '~/domain/reliability/worker-client.server'
import { calculatorSchema } from '~/domain/survival/calculator.schema'
import { calculatorExamples } from '~/domain/survival/calculator-examples'
import type { CalculatorFigures, CalculatorOptions } from '~/domain/survival/calculator-figures'
import { maxBytes } from '~/domain/survival/compute-survival.schema'
import { DomainError, statusOf, type FieldError } from '~/lib/domain-error'
import { fieldErrors, joinErrors, type FormValues } from '~/lib/parse-form'
import { answerPage } from '~/server/answer.server'
import { requestInfoContext } from '~/server/context'
import { readTextForm, type TextForm } from '~/server/read-text-form.server'
import { services } from '~/server/services.server'
import { CalculatorForm } from './calculator-form'
import { Results, sectionCount } from './results'

const perMinute = { kind: 'compute', limit: 60, windowMs: 60_000 }
const pasteBytes = 1024 * 1024
/** A file this short comes back as text, so that another confidence or time can be tried without choosing it again. */
const echoBytes = 64 * 1024

/** What a form or an example was answered; `errors` and `figures` exclude each other. */
type Answer = {
  values: FormValues
  errors: FieldError[]
  figures: CalculatorFigures | null
  example: string | null
  fileIsGone: boolean
}

export const meta: Route.MetaFunction = () => [
  { title: 'Survival calculator · Fettle' },
  {
    name: 'description',
    content: 'Paste or choose a table of lives and see the survival curve, its limits and tests. Nothing is stored.'
  }
]

export const headers: Route.HeadersFunction = () => ({ 'Cache-Control': 'private, no-store' })

export function loader({ url, context }: Route.LoaderArgs) {
  return answerPage(url, async (): Promise<Answer | null> => {
    const name = url.searchParams.get('example')
    if (name === null) return null
    const example = calculatorExamples.find((one) => one.name === name)
    if (example === undefined)
      throw new DomainError('not-found', 'There is no such example. The calculator’s page names those there are.')
    await countUse(services(), perMinute, callerOf(context.get(requestInfoContext).ip))
    const { text, timeUnit, tau } = example
    const values = { data: text, timeUnit, tau }
    const options = calculatorSchema.parse({ timeUnit, tau: tau === '' ? undefined : tau })
    return { values, errors: [], figures: await compute(bytesOf(text), options), example: name, fileIsGone: false }
  })
}

export async function action({ request, context }: Route.ActionArgs) {
  const values: FormValues = {}
  let form: TextForm | null = null
  try {
    await countUse(services(), perMinute, callerOf(context.get(requestInfoContext).ip))
    form = await readTextForm(request, 'file', { fileBytes: maxBytes, fieldBytes: pasteBytes }, values)
    const body = tableOf(form)
    const filled = Object.fromEntries(Object.entries(values).filter(([, value]) => value.trim() !== ''))
    const options = calculatorSchema.safeParse(filled)
    const errors = joinErrors(options.success ? [] : fieldErrors(options.error), body instanceof Uint8Array ? [] : [body])
    if (!options.success || !(body instanceof Uint8Array)) return answerWith(errors, values, form, 400)
    const echo = form.file !== null && body.byteLength <= echoBytes && !isWide(body) ? new TextDecoder().decode(body) : null
    const figures = await compute(body, options.data)
    const shown = echo === null ? values : { ...values, data: echo }
    return data<Answer>({ values: shown, errors: [], figures, example: null, fileIsGone: form.file !== null && echo === null })
  } catch (error) {
    if (!(error instanceof DomainError)) throw error
    const errors = error.errors.length > 0 ? error.errors : [{ path: '', message: error.message }]
    const isInFile = form !== null && form.file !== null
    return answerWith(isInFile ? errors.map(atFile) : errors, values, form, statusOf[error.kind])
  }
}

/** What is wrong with the table stands at the field that it came from. */
const atFile = ({ path, message }: FieldError) => ({ path: path.replace(/^data(?=$|\.)/, 'file'), message })

const answerWith = (errors: FieldError[], values: FormValues, form: TextForm | null, status: number) =>
  data<Answer>({ values, errors, figures: null, example: null, fileIsGone: form !== null && form.file !== null }, { status })

/** The one table that was given, or what is wrong with that. */
function tableOf({ values, file }: TextForm): Uint8Array<ArrayBuffer> | FieldError {
  const text = values.data ?? ''
  if (file !== null && text.trim() !== '')
    return { path: 'file', message: 'There is a pasted table and a file: empty the one that is not meant. Nothing was computed.' }
  if (file !== null) return file
  return text.trim() === '' ? { path: 'data', message: 'Paste a table, or choose a file.' } : bytesOf(text)
}

const bytesOf = (text: string) => new Uint8Array(new TextEncoder().encode(text))

/** UTF-16, by its mark: it cannot come back as the bytes that it was. */
const isWide = ([first, second]: Uint8Array) => (first === 0xff && second === 0xfe) || (first === 0xfe && second === 0xff)

const compute = (body: Uint8Array<ArrayBuffer>, options: CalculatorOptions) =>
  computeWorker().run({ kind: 'calculator', body: body.buffer, options }, 60_000)

export default function SurvivalCalculator({ loaderData, actionData }: Route.ComponentProps) {
  const answer = actionData ?? loaderData ?? null
  const figures = answer?.figures ?? null
  const example = calculatorExamples.find(({ name }) => name === answer?.example)
  return (
    <SiteSheet
      current="Guides"
      trail={[{ label: 'Guides', href: '/guides' }, { label: 'Survival calculator' }]}
      foot="Nothing that you send here is stored"
    >
      <Title
        heading="Survival calculator"
        lead={figures?.sentence ?? 'From a table of lives, one row a unit, to its survival curve with limits and tests.'}
        margin={
          <>
            <p>
              <b>Nothing is stored.</b> The table is read, computed and forgotten.
            </p>
            <p>
              The <TextLink href="/guides/api#compute-survival">endpoint</TextLink> and the command line compute the same.
            </p>
          </>
        }
      >
        {figures !== null && (
          <p className="small soft mt-3 max-w-[66ch]">
            {example !== undefined && <>An example: {example.says}. </>}
            Read: {figures.reading}. <a href="#table">Change the table or the settings</a>
          </p>
        )}
      </Title>
      {figures !== null && <Results figures={figures} />}
      <CalculatorForm
        number={figures === null ? 1 : sectionCount(figures) + 1}
        values={answer?.values ?? {}}
        errors={answer?.errors ?? []}
        fileIsGone={answer?.fileIsGone ?? false}
        hasFigures={figures !== null}
      />
    </SiteSheet>
  )
}
