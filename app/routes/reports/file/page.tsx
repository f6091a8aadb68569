import { redirect } from 'react-router'
import type { Route } from './+types/page'
import { SiteSheet } from '~/components/site-sheet'
import { Title } from '~/components/title'
import { must } from '~/domain/accounts/must'
import { filingStep, type FilingStep } from '~/domain/reports/filing.server'
import { installReportFields, installReportSchema } from '~/domain/reports/report.schema'
import { fileReport } from '~/domain/reports/reports.server'
import { furtherFilingErrors } from '~/domain/reports/stored-errors.server'
import { dayOf } from '~/lib/dates'
import { newId } from '~/lib/new-id'
import { formValues, joinErrors, parseForm, readableFields } from '~/lib/parse-form'
import { answerForm, answerPage, formAnswer } from '~/server/answer.server'
import { actorContext } from '~/server/context'
import { readForm } from '~/server/read-form.server'
import { services } from '~/server/services.server'
import { BoardStep } from './board-step'
import { ReportForm } from './report-form'
import { WhichStep } from './which-step'

export const meta: Route.MetaFunction = ({ loaderData }) => {
  const step = (loaderData as { step?: FilingStep } | undefined)?.step
  if (step?.kind === 'which') return [{ title: `Which ${step.board.name}? File an install report · Fettle` }]
  if (step?.kind !== 'report') return [{ title: 'File an install report · Fettle' }]
  return [{ title: `${step.board.name} ${step.release.version} on ${step.revision.code}: file an install report · Fettle` }]
}

export function loader({ url, context }: Route.LoaderArgs) {
  return answerPage(url, async () => {
    const step = await filingStep(services(), url.searchParams)
    // Choosing is open to all; from the form on, the report needs an author.
    if (step.kind === 'report') must(context.get(actorContext), 'report.file', null)
    return { step, today: dayOf(services().now()), formKey: newId() }
  })
}

export async function action({ request, url, context }: Route.ActionArgs) {
  const form = await readForm(request)
  const parsed = parseForm(installReportSchema, form)
  return answerForm(url, formValues(form), async () => {
    must(context.get(actorContext), 'report.file', null)
    if (!parsed.ok) {
      const further = await furtherFilingErrors(services(), readableFields(installReportFields, form))
      return formAnswer(joinErrors(parsed.errors, further), parsed.values)
    }
    const { id } = await fileReport(services(), context.get(actorContext), parsed.value)
    return redirect(`/reports/${id}?filed`)
  })
}

export default function FileReport({ loaderData: { step, today, formKey }, actionData }: Route.ComponentProps) {
  return (
    <SiteSheet current="File a report" isForm>
      <Title
        heading="File an install report"
        lead="What you fitted, where, and what happened at first power. About two minutes."
        isTop
        margin={
          <p>A failure is as welcome as a success. Nobody but a steward can take a report out, and only with a public reason.</p>
        }
      />
      {step.kind === 'board' && <BoardStep step={step} />}
      {step.kind === 'which' && <WhichStep step={step} />}
      {step.kind === 'report' && <ReportForm step={step} today={today} formKey={formKey} answer={actionData ?? null} />}
    </SiteSheet>
  )
}
