import { Form, redirect, useNavigation } from 'react-router'
import type { Route } from './+types/page'
import { Actions, Button, ButtonLink } from '~/components/button'
import { DoneLine } from '~/components/done-line'
import { ErrorSummary } from '~/components/error-summary'
import { SelectField, TextField } from '~/components/field'
import { SiteSheet } from '~/components/site-sheet'
import { Section, SubHeading } from '~/components/section'
import { Title } from '~/components/title'
import { fitClaimSchema, type FitClaim } from '~/domain/boards/board.schema'
import { fitClaims } from '~/domain/boards/fit-claim'
import { boardToEdit } from '~/domain/boards/board-page.server'
import { stateFitClaims } from '~/domain/boards/fit-claims.server'
import type { FieldError } from '~/lib/domain-error'
import { fieldErrors, formValues } from '~/lib/parse-form'
import { answerForm, answerPage, formAnswer } from '~/server/answer.server'
import { actorContext } from '~/server/context'
import { readForm } from '~/server/read-form.server'
import { services } from '~/server/services.server'

const words: Record<(typeof fitClaims)[number], string> = {
  fits: 'fits',
  'fits-with-care': 'fits with care',
  'does-not-fit': 'does not fit',
  untested: 'untested'
}

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `What ${loaderData ? loaderData.name : 'a board'} fits · Fettle` }
]

export function loader({ url, params, context }: Route.LoaderArgs) {
  return answerPage(url, async () => {
    const { board, fit } = await boardToEdit(services().db, context.get(actorContext), params.board)
    return {
      slug: board.slug,
      name: board.name,
      consoleName: board.console_name,
      fit,
      isNew: url.searchParams.has('opened')
    }
  })
}

export async function action({ request, url, params, context }: Route.ActionArgs) {
  const form = await readForm(request)
  const values = formValues(form)
  return answerForm(url, values, async () => {
    const actor = context.get(actorContext)
    const { fit } = await boardToEdit(services().db, actor, params.board)
    const claims = new Map<string, FitClaim>()
    const errors: FieldError[] = []
    for (const { revisionId } of fit) {
      const parsed = fitClaimSchema.safeParse({
        claim: values[`claim.${revisionId}`],
        reason: (values[`reason.${revisionId}`] ?? '').trim()
      })
      if (parsed.success) claims.set(revisionId, parsed.data)
      else errors.push(...fieldErrors(parsed.error).map((e) => ({ ...e, path: `${e.path}.${revisionId}` })))
    }
    if (errors.length > 0) return formAnswer(errors, values)
    await stateFitClaims(services(), actor, params.board, claims)
    throw redirect(`/boards/${params.board}?done=fit#fit`, 303)
  })
}

export default function EditFit({ loaderData: data, actionData }: Route.ComponentProps) {
  const errors = actionData?.errors ?? []
  const values = actionData?.values
  const isBusy = useNavigation().state === 'submitting'
  const error = (path: string) => errors.find((e) => e.path === path)?.message
  const labels = Object.fromEntries(
    data.fit.flatMap((f) => [
      [`claim.${f.revisionId}`, f.code],
      [`reason.${f.revisionId}`, `${f.code}, reason`]
    ])
  )
  return (
    <SiteSheet
      current="Boards"
      trail={[{ label: 'Boards', href: '/' }, { label: data.name, href: `/boards/${data.slug}` }, { label: 'What it fits' }]}
      isForm
    >
      <Title
        heading={`What ${data.name} fits`}
        lead={`Your claim for each mainboard revision of the ${data.consoleName}. It stands beside what installers report.`}
      >
        {data.isNew && (
          <DoneLine what={`${data.name} is open.`}>Say which revisions it fits, or leave them untested for now.</DoneLine>
        )}
      </Title>
      <Section
        number={1}
        heading="Revision by revision"
        margin={
          <p>
            <b>With care and does not fit</b> need a sentence that says why: an installer reads it before soldering.
          </p>
        }
      >
        <Form method="post" noValidate>
          <ErrorSummary errors={errors} before="the claims can be saved" labels={labels} />
          {data.fit.map((f) => (
            <div key={f.revisionId} className="mt-8" role="group" aria-labelledby={`rev-${f.revisionId}`}>
              <SubHeading id={`rev-${f.revisionId}`}>{f.code}</SubHeading>
              <p className="small soft">{f.recognise}</p>
              <SelectField
                name={`claim.${f.revisionId}`}
                label={`On ${f.code} it`}
                options={fitClaims.map((value) => ({ value, label: words[value] }))}
                defaultValue={values?.[`claim.${f.revisionId}`] ?? f.claim}
                error={error(`claim.${f.revisionId}`)}
              />
              <TextField
                name={`reason.${f.revisionId}`}
                label="Reason"
                hint="One short sentence."
                maxLength={200}
                defaultValue={values?.[`reason.${f.revisionId}`] ?? f.reason}
                error={error(`reason.${f.revisionId}`)}
                isLong
                isOptional
              />
            </div>
          ))}
          <div className="mt-8">
            <Actions>
              <Button busy={isBusy ? 'Saving' : undefined}>Save the claims</Button>
              <ButtonLink kind="outline" href={`/boards/${data.slug}`}>
                Not now
              </ButtonLink>
            </Actions>
          </div>
        </Form>
      </Section>
    </SiteSheet>
  )
}
