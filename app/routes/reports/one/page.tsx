import { redirect } from 'react-router'
import { z } from 'zod'
import type { Route } from './+types/page'
import { DoneLine } from '~/components/done-line'
import { Section } from '~/components/section'
import { SiteSheet } from '~/components/site-sheet'
import { TextLink } from '~/components/text-link'
import { Title } from '~/components/title'
import { Warning } from '~/components/warning'
import { can } from '~/domain/accounts/can'
import { checkInSchema, checkInStatementFields, exclusionSchema } from '~/domain/reports/report.schema'
import { exclusionWords, firstPowerWords } from '~/domain/reports/report-words'
import { addCheckIn, excludeReport, reportWithHistory } from '~/domain/reports/reports.server'
import { furtherCheckInErrors } from '~/domain/reports/stored-errors.server'
import { dayOf } from '~/lib/dates'
import { newId } from '~/lib/new-id'
import { formValues, joinErrors, parseForm, readableFields } from '~/lib/parse-form'
import { answerForm, answerPage, formAnswer } from '~/server/answer.server'
import { actorContext } from '~/server/context'
import { readForm } from '~/server/read-form.server'
import { services } from '~/server/services.server'
import { CheckInForm } from './check-in-form'
import { ExclusionForm } from './exclusion-form'
import { ReportFacts } from './report-facts'
import { ReportHistory } from './report-history'

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: loaderData ? `${loaderData.report.what} on ${loaderData.report.revisionCode}: a report · Fettle` : 'Fettle' }
]

export function loader({ params, url, context }: Route.LoaderArgs) {
  return answerPage(url, async () => {
    const { report, checkIns, failure, isOpen } = await reportWithHistory(services(), params.id)
    const actor = context.get(actorContext)
    const subject = { reporterId: report.reporter_id, isExcluded: report.excluded_at !== null }
    return {
      report: {
        id: report.id,
        what: `${report.board_name} ${report.version}`,
        boardName: report.board_name,
        boardSlug: report.board_slug,
        version: report.version,
        isWithdrawn: report.state === 'withdrawn',
        consoleName: report.console_name,
        revisionCode: report.revision_code,
        unitTag: report.unit_tag,
        reporterName: report.reporter_name,
        installedOn: report.installed_on,
        filedOn: report.filed_on,
        evidence: report.evidence,
        method: report.method,
        firstPower: report.first_power,
        notes: report.notes
      },
      exclusion:
        report.excluded_at === null
          ? null
          : {
              on: dayOf(report.excluded_at),
              by: report.excluded_by_name,
              kind: report.exclusion_kind!,
              reason: report.exclusion_reason ?? ''
            },
      history: checkIns.map((c) => ({
        id: c.id,
        statement: c.statement,
        statedOn: c.stated_on,
        filedOn: dayOf(c.filed_at),
        notes: c.notes
      })),
      failure: failure && { lastRunningOn: failure.last_running_on, foundOn: failure.found_on, cause: failure.cause },
      mayCheckIn: isOpen && can(actor, 'report.check-in', subject),
      mayExclude: can(actor, 'report.exclude', subject),
      today: dayOf(services().now()),
      formKey: newId(),
      done: url.searchParams.has('filed') ? ('filed' as const) : url.searchParams.has('added') ? ('added' as const) : null
    }
  })
}

const intentSchema = z.object({ intent: z.enum(['check-in', 'exclude'], 'The form is incomplete. Load it again.') })

export async function action({ request, params, url, context }: Route.ActionArgs) {
  const form = await readForm(request)
  const actor = context.get(actorContext)
  return answerForm(url, formValues(form), async () => {
    const intent = parseForm(intentSchema, form)
    if (!intent.ok) return formAnswer([{ path: '', message: intent.errors[0]!.message }], intent.values)
    if (intent.value.intent === 'exclude') {
      const parsed = parseForm(exclusionSchema, form)
      if (!parsed.ok) return formAnswer(parsed.errors, parsed.values)
      await excludeReport(services(), actor, params.id, parsed.value)
      return redirect(`/reports/${params.id}`)
    }
    const parsed = parseForm(checkInSchema, form)
    if (!parsed.ok) {
      const further = await furtherCheckInErrors(services(), params.id, readableFields(checkInStatementFields, form))
      return formAnswer(joinErrors(parsed.errors, further), parsed.values)
    }
    await addCheckIn(services(), actor, params.id, parsed.value)
    return redirect(`/reports/${params.id}?added`)
  })
}

export default function OneReport({ loaderData, actionData }: Route.ComponentProps) {
  const { report, exclusion, history, failure, mayCheckIn, mayExclude, today, formKey, done } = loaderData
  const answer = actionData ?? null
  const answerTo = (intent: string) => (answer?.values.intent === intent ? answer : null)
  const heading = `${report.what} on ${report.revisionCode}`
  return (
    <SiteSheet
      current="Boards"
      trail={[
        { label: 'Boards', href: '/' },
        { label: report.boardName, href: `/boards/${report.boardSlug}` },
        { label: 'Reliability', href: `/boards/${report.boardSlug}/reliability` },
        { label: 'Report' }
      ]}
      isForm
    >
      <Title
        heading={exclusion ? <s>{heading}</s> : heading}
        lead={`Fitted ${report.installedOn}${report.reporterName ? ` by ${report.reporterName}` : ''}: ${firstPowerWords[report.firstPower].label.toLowerCase()} at first power.`}
        margin={
          <p>
            One report of many.{' '}
            <TextLink href={`/boards/${report.boardSlug}/reliability`}>How long {report.boardName} lasts</TextLink>
          </p>
        }
      >
        {done === 'filed' && (
          <DoneLine what="Filed.">
            It counts from now on. Come back when you know more: a check-in takes one tap from{' '}
            <TextLink href="/reports">your reports</TextLink>.
          </DoneLine>
        )}
        {done === 'added' && <DoneLine what="Added.">The figures hold it now.</DoneLine>}
        {exclusion && (
          <Warning
            severity="note"
            heading="Excluded from every figure"
            because={`Excluded ${exclusion.on}${exclusion.by ? ` by ${exclusion.by}, steward` : ''}. It stays readable and is counted among the excluded.`}
          >
            <p>
              {exclusionWords[exclusion.kind].label}. {exclusion.reason}
            </p>
          </Warning>
        )}
      </Title>
      <ReportFacts report={report} />
      <ReportHistory report={report} history={history} failure={failure} />
      {mayCheckIn && <CheckInForm today={today} formKey={formKey} answer={answerTo('check-in')} />}
      {mayExclude && <ExclusionForm number={mayCheckIn ? 4 : 3} answer={answerTo('exclude')} />}
      {answer && answer.values.intent !== 'check-in' && answer.values.intent !== 'exclude' && (
        <Section number={9} heading="Not done">
          <p role="alert">{answer.errors[0]?.message}</p>
        </Section>
      )}
    </SiteSheet>
  )
}
