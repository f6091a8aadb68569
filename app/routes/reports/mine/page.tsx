import { Form, redirect } from 'react-router'
import { z } from 'zod'
import type { Route } from './+types/page'
import { Button, ButtonLink } from '~/components/button'
import { DoneLine } from '~/components/done-line'
import { Empty } from '~/components/empty'
import { Pager } from '~/components/pager'
import { Section } from '~/components/section'
import { SiteSheet } from '~/components/site-sheet'
import { Table } from '~/components/table'
import { TextLink } from '~/components/text-link'
import { Title } from '~/components/title'
import { addCheckIn, myReports, myReportsPageSize } from '~/domain/reports/reports.server'
import { firstPowerWords, type FirstPower } from '~/domain/reports/report-words'
import { dayOf } from '~/lib/dates'
import { newId } from '~/lib/new-id'
import { formValues, parseForm } from '~/lib/parse-form'
import { answerForm, answerPage, formAnswer } from '~/server/answer.server'
import { actorContext } from '~/server/context'
import { readForm } from '~/server/read-form.server'
import { services } from '~/server/services.server'

export const meta: Route.MetaFunction = () => [{ title: 'My reports · Fettle' }]

const pageOf = (url: URL) => {
  const page = Number(url.searchParams.get('page') ?? '1')
  return Number.isSafeInteger(page) && page >= 1 && page <= 10_000 ? page : 1
}

export function loader({ url, context }: Route.LoaderArgs) {
  return answerPage(url, async () => {
    const page = pageOf(url)
    const { reports, total } = await myReports(services(), context.get(actorContext), page)
    const done = reports.find((r) => r.id === url.searchParams.get('running'))
    return {
      page,
      pageSize: myReportsPageSize,
      total,
      done: done ? `${done.board_name} ${done.version} on ${done.revision_code}` : null,
      reports: reports.map((r) => ({
        id: r.id,
        what: `${r.board_name} ${r.version} on ${r.revision_code}`,
        unitTag: r.unit_tag,
        installedOn: r.installed_on,
        last: lastWord(r),
        canSay: r.excluded_at === null && r.failed_on === null && r.parted_on === null,
        formKey: newId()
      }))
    }
  })
}

const quickSchema = z.object({
  report: z.string('The form is incomplete. Load it again.').regex(/^[\w-]{1,64}$/, 'The form is incomplete. Load it again.'),
  form_key: z.string('The form is incomplete. Load it again.').regex(/^[0-9a-z]{16}$/, 'The form is incomplete. Load it again.')
})

export async function action({ request, url, context }: Route.ActionArgs) {
  const form = await readForm(request)
  return answerForm(url, formValues(form), async () => {
    const parsed = parseForm(quickSchema, form)
    if (!parsed.ok) return formAnswer([{ path: '', message: parsed.errors[0]!.message }], parsed.values)
    const { report, form_key } = parsed.value
    const today = dayOf(services().now())
    await addCheckIn(services(), context.get(actorContext), report, { statement: 'running', form_key, stated_on: today })
    return redirect(`/reports?page=${pageOf(url)}&running=${report}`)
  })
}

type Told = {
  excluded_at: string | null
  failed_on: string | null
  parted_on: string | null
  last_running_on: string | null
  first_power: FirstPower
  installed_on: string
}

function lastWord(r: Told): string {
  if (r.excluded_at !== null) return 'excluded'
  if (r.first_power !== 'works') return `${firstPowerWords[r.first_power].label.toLowerCase()} at first power`
  if (r.failed_on !== null) return `failed ${r.failed_on}`
  if (r.parted_on !== null) return `parted with ${r.parted_on}`
  return r.last_running_on === null ? 'nothing since' : `ran ${r.last_running_on}`
}

export default function MyReports({ loaderData: { reports, total, page, pageSize, done }, actionData }: Route.ComponentProps) {
  return (
    <SiteSheet current="My bench" trail={[{ label: 'My bench', href: '/bench' }, { label: 'My reports' }]}>
      <Title
        heading="My reports"
        lead="What you fitted, and what was last said of each. One tap says that a unit still runs."
        margin={<p>A figure holds only what was said. A unit that nobody speaks of counts up to its last word, no further.</p>}
      >
        {done && <DoneLine what="Noted.">{done} runs today.</DoneLine>}
        {actionData && (
          <p className="err" role="alert">
            {actionData.errors[0]?.message}
          </p>
        )}
      </Title>
      <Section number={1} heading={total === 1 ? '1 report' : `${total} reports`}>
        {total === 0 ? (
          <Empty
            action={<ButtonLink href="/report">File a report</ButtonLink>}
            harmless={<TextLink href="/">To the boards</TextLink>}
          >
            You have not filed a report yet. Two minutes at the bench tell the next one what to expect.
          </Empty>
        ) : (
          <>
            <Table
              caption="Newest first."
              rows={reports}
              rowKey={(r) => r.id}
              columns={[
                {
                  key: 'what',
                  head: 'Report',
                  isRowHead: true,
                  cell: (r) => <TextLink href={`/reports/${r.id}`}>{r.what}</TextLink>
                },
                { key: 'tag', head: 'Unit', only: 'wide', cell: (r) => r.unitTag ?? <span className="soft">no tag</span> },
                { key: 'on', head: 'Fitted', only: 'wide', cell: (r) => r.installedOn },
                { key: 'last', head: 'Last word', cell: (r) => <Last text={r.last} /> },
                {
                  key: 'say',
                  head: <span className="vh">Say how it is</span>,
                  cell: (r) => (r.canSay ? <StillRuns report={r} /> : null)
                }
              ]}
            />
            <Pager page={page} pageSize={pageSize} total={total} of="reports" hrefOf={(n) => `/reports?page=${n}`} />
          </>
        )}
      </Section>
    </SiteSheet>
  )
}

/** A day is never broken across lines. */
function Last({ text }: { text: string }) {
  const [, words, day] = /^(.*?)(\d{4}-\d{2}-\d{2})?$/.exec(text)!
  return (
    <>
      {words}
      {day && <span className="nw">{day}</span>}
    </>
  )
}

function StillRuns({ report: { id, formKey, what } }: { report: { id: string; formKey: string; what: string } }) {
  return (
    <Form method="post">
      <input type="hidden" name="report" value={id} />
      <input type="hidden" name="form_key" value={formKey} />
      <Button kind="outline" aria-label={`Still runs today: ${what}`}>
        Still runs
      </Button>
    </Form>
  )
}
