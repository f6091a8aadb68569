import { redirect } from 'react-router'
import { z } from 'zod'
import type { Route } from './+types/page'
import { Actions, Button } from '~/components/button'
import { Definitions } from '~/components/definition'
import { DoneLine } from '~/components/done-line'
import { ErrorSummary } from '~/components/error-summary'
import { TextField } from '~/components/field'
import { MarginNote, Section } from '~/components/section'
import { SiteSheet } from '~/components/site-sheet'
import { Table } from '~/components/table'
import { Title } from '~/components/title'
import { displayNameField } from '~/domain/accounts/account.schema'
import { endOneSession, endOtherSessions, loadAccount, rename } from '~/domain/accounts/account.server'
import { DomainError } from '~/lib/domain-error'
import { formValues, parseForm } from '~/lib/parse-form'
import { answerForm, answerPage, formAnswer } from '~/server/answer.server'
import { actorContext, sessionContext } from '~/server/context'
import { readForm } from '~/server/read-form.server'
import { services } from '~/server/services.server'

export const meta: Route.MetaFunction = () => [{ title: 'Your account · Fettle' }]

const done = { renamed: 'Your name is changed.', ended: 'The session is ended.', 'ended-others': 'All other sessions are ended.' }

export function loader({ url, context }: Route.LoaderArgs) {
  return answerPage(url, async () => {
    const account = await loadAccount(services(), context.get(actorContext).userId, context.get(sessionContext)?.idHash ?? null)
    const asked = url.searchParams.get('done')
    return { ...account, done: asked !== null && Object.hasOwn(done, asked) ? done[asked as keyof typeof done] : null }
  })
}

const intents = z.discriminatedUnion(
  'intent',
  [
    z.object({ intent: z.literal('rename'), displayName: displayNameField }),
    z.object({ intent: z.literal('end-session'), session: z.string('Say which session to end.') }),
    z.object({ intent: z.literal('end-others') })
  ],
  'This form is not complete. Load the page again.'
)

export async function action({ request, url, context }: Route.ActionArgs) {
  const form = await readForm(request)
  const values = formValues(form)
  return answerForm(url, values, async () => {
    const { userId } = context.get(actorContext)
    if (userId === null) throw new DomainError('unauthenticated', 'Sign in to change your account.')
    const parsed = parseForm(intents, form)
    if (!parsed.ok) return formAnswer(parsed.errors, parsed.values)
    const input = parsed.value
    if (input.intent === 'rename') await rename(services(), userId, input.displayName)
    else if (input.intent === 'end-session') await endOneSession(services(), userId, input.session)
    else await endOtherSessions(services(), userId, context.get(sessionContext)?.idHash ?? null)
    throw redirect(`/account?done=${{ rename: 'renamed', 'end-session': 'ended', 'end-others': 'ended-others' }[input.intent]}`)
  })
}

export default function Account({ loaderData: account, actionData }: Route.ComponentProps) {
  const errors = actionData?.errors ?? []
  const values = actionData?.values ?? {}
  return (
    <SiteSheet trail={[{ label: 'Boards', href: '/' }, { label: 'Your account' }]} isForm>
      <Title
        heading="Your account"
        lead={`Signed in as ${account.displayName}.`}
        margin={<p>Member since {account.createdAt.slice(0, 10)}.</p>}
      >
        {account.done && <DoneLine what={account.done} />}
        <form method="post" action="/sign-out" className="mt-6">
          <Actions>
            <Button kind="outline">Sign out</Button>
          </Actions>
        </form>
      </Title>
      <Section number={1} heading="Your name" margin={<p>Everybody can see it. A workshop’s name is as good as a person’s.</p>}>
        <form method="post" action="/account" noValidate className="space-y-6">
          <ErrorSummary errors={errors} before="the name can be changed" />
          <TextField
            name="displayName"
            label="Display name"
            hint="Stands beside your reports and releases."
            autoComplete="nickname"
            maxLength={60}
            defaultValue={values.displayName ?? account.displayName}
            error={errors.find((e) => e.path === 'displayName')?.message}
            required
          />
          <input type="hidden" name="intent" value="rename" />
          <Actions>
            <Button>Change the name</Button>
          </Actions>
        </form>
      </Section>
      <Section number={2} heading="Ways to sign in">
        <Definitions items={waysIn(account)} />
        <MarginNote>
          <p>
            <b>To join GitHub to this account,</b> sign out and sign in by GitHub. When the address is confirmed there too, both
            lead here.
          </p>
        </MarginNote>
      </Section>
      <Sessions sessions={account.sessions} />
    </SiteSheet>
  )
}

type AccountData = Route.ComponentProps['loaderData']

const waysIn = (account: AccountData) => [
  {
    label: 'E-mail',
    value:
      account.email === null
        ? 'No address: links cannot be mailed'
        : `${account.email}${account.isEmailVerified ? ', confirmed' : ', not confirmed'}. Never shown to others.`
  },
  { label: 'GitHub', value: account.githubLogin === null ? 'Not joined' : `${account.githubLogin}` }
]

const minute = (at: string) => `${at.slice(0, 10)} ${at.slice(11, 16)}`

function Sessions({ sessions }: { sessions: AccountData['sessions'] }) {
  return (
    <Section
      number={3}
      heading="Where you are signed in"
      margin={
        <p>
          <b>Do not know one of them?</b> End it. Whoever used it is out at once. Times are UTC.
        </p>
      }
    >
      <Table
        caption="This browser, then each other one that you signed in with, the one used last first."
        columns={[
          { key: 'since', head: 'Signed in', isRowHead: true, cell: (row) => minute(row.createdAt) },
          { key: 'seen', head: 'Last used', cell: (row) => (row.isCurrent ? 'now' : minute(row.lastSeenAt)) },
          {
            key: 'end',
            head: <span className="vh">End it</span>,
            cell: (row) => (row.isCurrent ? 'this browser' : <EndOne id={row.id} />)
          }
        ]}
        rows={sessions}
        rowKey={(row) => row.id}
        isFolded
      />
      {sessions.length > 1 && (
        <form method="post" action="/account">
          <input type="hidden" name="intent" value="end-others" />
          <Actions>
            <Button kind="destructive" note="Every browser but this one has to sign in again.">
              End all others
            </Button>
          </Actions>
        </form>
      )}
    </Section>
  )
}

function EndOne({ id }: { id: string }) {
  return (
    <form method="post" action="/account">
      <input type="hidden" name="intent" value="end-session" />
      <Button kind="destructive" name="session" value={id}>
        End this one
      </Button>
    </form>
  )
}
