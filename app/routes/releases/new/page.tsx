import { redirect } from 'react-router'
import type { Route } from './+types/page'
import { DraftForm } from '../draft-form'
import { SiteSheet } from '~/components/site-sheet'
import { Title } from '~/components/title'
import { boardToEdit } from '~/domain/boards/board-page.server'
import { releasesOfBoard } from '~/domain/releases/board-releases.server'
import { draftRelease } from '~/domain/releases/drafts.server'
import { draftSchema } from '~/domain/releases/release.schema'
import { releasePath } from '~/domain/releases/release-path'
import { formValues, parseForm } from '~/lib/parse-form'
import { answerForm, answerPage, formAnswer } from '~/server/answer.server'
import { actorContext } from '~/server/context'
import { readForm } from '~/server/read-form.server'
import { services } from '~/server/services.server'

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `Draft a release${loaderData ? ` of ${loaderData.name}` : ''} · Fettle` }
]

export function loader({ url, params, context }: Route.LoaderArgs) {
  return answerPage(url, async () => {
    const { db } = services()
    const { board } = await boardToEdit(db, context.get(actorContext), params.board)
    const used = (await releasesOfBoard(db, board.id, true)).map((r) => r.version)
    return { slug: board.slug, name: board.name, used: used.slice(0, 8), boardRevision: 'A' }
  })
}

export async function action({ request, url, params, context }: Route.ActionArgs) {
  const form = await readForm(request)
  const values = formValues(form)
  return answerForm(url, values, async () => {
    const actor = context.get(actorContext)
    await boardToEdit(services().db, actor, params.board)
    const parsed = parseForm(draftSchema, form)
    if (!parsed.ok) return formAnswer(parsed.errors, parsed.values)
    const version = await draftRelease(services(), actor, params.board, parsed.value)
    throw redirect(`${releasePath(params.board, version)}?done=drafted`, 303)
  })
}

export default function NewRelease({ loaderData: data, actionData }: Route.ComponentProps) {
  const path = `/boards/${data.slug}`
  return (
    <SiteSheet
      current="My bench"
      trail={[{ label: 'Boards', href: '/' }, { label: data.name, href: path }, { label: 'Draft a release' }]}
      isForm
    >
      <Title
        heading={`Draft a release of ${data.name}`}
        lead="Say which one it is and what to order; the bundle is uploaded on the next sheet. A draft is yours alone."
        margin={data.used.length > 0 && <p>Used so far: {data.used.join(', ')}.</p>}
      />
      <DraftForm
        values={actionData?.values ?? { boardRevision: data.boardRevision }}
        errors={actionData?.errors ?? []}
        action="Save the draft"
        back={path}
      />
    </SiteSheet>
  )
}
