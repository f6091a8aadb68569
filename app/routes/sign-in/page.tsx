import { data, redirect } from 'react-router'
import type { Route } from './+types/page'
import { Actions, Button, ButtonLink, GoLink } from '~/components/button'
import { DoneLine } from '~/components/done-line'
import { ErrorSummary } from '~/components/error-summary'
import { TextField } from '~/components/field'
import { MarginNote, Section } from '~/components/section'
import { SiteSheet } from '~/components/site-sheet'
import { Title } from '~/components/title'
import { askLinkSchema } from '~/domain/accounts/account.schema'
import { returnPath } from '~/domain/accounts/return-path'
import { askForLink } from '~/domain/accounts/sign-in-by-mail.server'
import { formValues, parseForm } from '~/lib/parse-form'
import { answerForm, formAnswer } from '~/server/answer.server'
import { actorContext, requestInfoContext } from '~/server/context'
import { readForm } from '~/server/read-form.server'
import { services } from '~/server/services.server'

export const meta: Route.MetaFunction = () => [{ title: 'Sign in · Fettle' }]

export function loader({ url, context }: Route.LoaderArgs) {
  const returnTo = returnPath(url.searchParams.get('return'))
  if (context.get(actorContext).userId !== null) throw redirect(returnTo)
  return { returnTo }
}

export async function action({ request, url, context }: Route.ActionArgs) {
  const form = await readForm(request)
  const parsed = parseForm(askLinkSchema, form)
  if (!parsed.ok) return formAnswer(parsed.errors, parsed.values)
  const { email } = parsed.value
  return answerForm(url, formValues(form), async () => {
    const given = services()
    await askForLink(given, { email, returnTo: formValues(form).return ?? null, ip: context.get(requestInfoContext).ip })
    return data({ sentTo: email, mailFakeUrl: given.config.mode === 'demo' ? given.config.mail.fakeUrl : null })
  })
}

export default function SignIn({ loaderData, actionData }: Route.ComponentProps) {
  const errors = actionData && 'errors' in actionData ? actionData.errors : []
  const values = actionData && 'values' in actionData ? actionData.values : {}
  const sent = actionData && 'sentTo' in actionData ? actionData : null
  const returnTo = values.return ?? loaderData.returnTo
  return (
    <SiteSheet trail={[{ label: 'Boards', href: '/' }, { label: 'Sign in' }]} isForm>
      <Title
        heading="Sign in"
        lead="Two ways to the same account. There is no password to remember, here or anywhere on this site."
        margin={
          <p>
            <b>What for?</b> To open a board, cut a release, or file a report and come back to it. Reading and downloading need no
            account.
          </p>
        }
      />
      <Section
        number={1}
        heading="By GitHub"
        margin={
          <p>
            We ask GitHub for your numeric id, your login name and your confirmed addresses, and keep nothing that could act for
            you there.
          </p>
        }
      >
        <form method="post" action="/sign-in/github">
          <input type="hidden" name="return" value={returnTo} />
          <Actions>
            <Button kind={sent ? 'outline' : 'solid'}>Go on with GitHub</Button>
          </Actions>
        </form>
      </Section>
      <Section number={2} heading="By a link in a mail" id="mail">
        {sent ? (
          <Sent address={sent.sentTo} mailFakeUrl={sent.mailFakeUrl} />
        ) : (
          <form method="post" action="/sign-in#mail" noValidate className="space-y-6">
            <ErrorSummary errors={errors} before="the mail can go out" />
            <TextField
              name="email"
              type="email"
              label="E-mail address"
              hint="A link that signs you in goes there. An address that is new here gets an account."
              autoComplete="email"
              inputMode="email"
              maxLength={254}
              defaultValue={values.email ?? ''}
              error={errors.find((e) => e.path === 'email')?.message}
              required
            />
            <input type="hidden" name="return" value={returnTo} />
            <Actions>
              <Button>Mail me a link</Button>
            </Actions>
          </form>
        )}
        <MarginNote>
          <p>
            <b>The link is a key.</b> It works once, for 15 minutes. Whoever opens it can sign in as you: do not pass it on, and
            check that its address begins with this site’s.
          </p>
          <p>We never mail you asking for a password, a code or money.</p>
        </MarginNote>
      </Section>
    </SiteSheet>
  )
}

function Sent({ address, mailFakeUrl }: { address: string; mailFakeUrl: string | null }) {
  return (
    <>
      <DoneLine what="Look into your mail.">
        If <b>{address}</b> can be reached, a link is on its way.
      </DoneLine>
      <p>
        Nothing after a few minutes? Look among the unwanted mail, and at the spelling of the address above. You can leave this
        page.
      </p>
      <Actions>
        {mailFakeUrl && (
          <ButtonLink href={mailFakeUrl} target="_blank" rel="noreferrer">
            Open the demo’s mailbox
          </ButtonLink>
        )}
        <GoLink href="/sign-in">Use another address</GoLink>
      </Actions>
    </>
  )
}
