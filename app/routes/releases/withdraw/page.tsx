import { Form, redirect, useNavigation } from 'react-router'
import type { Route } from './+types/page'
import { Actions, Button, ButtonLink } from '~/components/button'
import { ErrorSummary } from '~/components/error-summary'
import { TextArea } from '~/components/field'
import { Section } from '~/components/section'
import { SiteSheet } from '~/components/site-sheet'
import { Title } from '~/components/title'
import { must } from '~/domain/accounts/must'
import { withdrawRelease } from '~/domain/releases/publish.server'
import { withdrawSchema } from '~/domain/releases/release.schema'
import { releasePath } from '~/domain/releases/release-path'
import { findRelease } from '~/domain/releases/releases.server'
import { DomainError } from '~/lib/domain-error'
import { formValues, parseForm } from '~/lib/parse-form'
import { answerForm, answerPage, formAnswer } from '~/server/answer.server'
import { actorContext } from '~/server/context'
import { readForm } from '~/server/read-form.server'
import { services } from '~/server/services.server'

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `Withdraw ${loaderData ? `${loaderData.name} ${loaderData.version}` : 'a release'} · Fettle` }
]

export function loader({ url, params, context }: Route.LoaderArgs) {
  return answerPage(url, async () => {
    const actor = context.get(actorContext)
    const { board, release } = await findRelease(services().db, actor, params.board, params.version)
    if (release.state === 'withdrawn') throw new DomainError('conflict', `${board.name} ${release.version} is withdrawn already.`)
    must(actor, 'release.withdraw', { boardId: board.id, state: release.state })
    return { slug: board.slug, name: board.name, version: release.version, state: release.state }
  })
}

export async function action({ request, url, params, context }: Route.ActionArgs) {
  const form = await readForm(request)
  const values = formValues(form)
  return answerForm(url, values, async () => {
    const actor = context.get(actorContext)
    const { board, release } = await findRelease(services().db, actor, params.board, params.version)
    must(actor, 'release.withdraw', { boardId: board.id, state: release.state === 'withdrawn' ? 'released' : release.state })
    const parsed = parseForm(withdrawSchema, form)
    if (!parsed.ok) return formAnswer(parsed.errors, parsed.values)
    await withdrawRelease(services(), actor, params.board, params.version, parsed.value.reason)
    throw redirect(`${releasePath(params.board, params.version)}?done=withdrawn`, 303)
  })
}

export default function Withdraw({ loaderData: data, actionData }: Route.ComponentProps) {
  const errors = actionData?.errors ?? []
  const path = releasePath(data.slug, data.version)
  const isBusy = useNavigation().state === 'submitting'
  return (
    <SiteSheet
      current="Boards"
      trail={[
        { label: 'Boards', href: '/' },
        { label: data.name, href: `/boards/${data.slug}` },
        { label: `Release ${data.version}`, href: path },
        { label: 'Withdraw' }
      ]}
      isForm
    >
      <Title
        heading={`Withdraw ${data.name} ${data.version}`}
        lead="For a release that nobody should make any more. It cannot be taken back."
      />
      <Section
        number={1}
        heading="Why"
        margin={
          <p>
            <b>Name what is wrong, on which revisions, and what to take instead.</b> Whoever has this release fitted reads it
            first.
          </p>
        }
      >
        <p>What will happen:</p>
        <ul className="mt-2 list-disc pl-6">
          <li>The page of {data.version} opens with your reason, as a caution.</li>
          <li>It stays listed, and its files can still be downloaded by those who have it.</li>
          <li>It is never offered as the newest again, and its reports stay counted.</li>
        </ul>
        <Form method="post" noValidate>
          <ErrorSummary errors={errors} before="it can be withdrawn" labels={{ reason: 'Reason' }} />
          <TextArea
            name="reason"
            label="Reason"
            hint="One to three plain sentences. They stand on the page for good."
            rows={4}
            maxLength={1000}
            defaultValue={actionData?.values.reason}
            error={errors.find((e) => e.path === 'reason')?.message}
            isLong
            required
          />
          <Actions>
            <Button kind="destructive" busy={isBusy ? 'Withdrawing' : undefined}>
              Withdraw {data.version} for good
            </Button>
            <ButtonLink kind="outline" href={path}>
              Leave it as it is
            </ButtonLink>
          </Actions>
        </Form>
      </Section>
    </SiteSheet>
  )
}
