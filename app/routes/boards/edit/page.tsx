import { redirect } from 'react-router'
import type { Route } from './+types/page'
import { BoardForm } from '../board-form'
import { SiteSheet } from '~/components/site-sheet'
import { Section } from '~/components/section'
import { TextLink } from '~/components/text-link'
import { Title } from '~/components/title'
import { boardEditSchema } from '~/domain/boards/board.schema'
import { boardToEdit } from '~/domain/boards/board-page.server'
import { editBoard } from '~/domain/boards/boards.server'
import { customaryLicences } from '~/domain/boards/spdx'
import { formValues, parseForm } from '~/lib/parse-form'
import { answerForm, answerPage, formAnswer } from '~/server/answer.server'
import { actorContext } from '~/server/context'
import { readForm } from '~/server/read-form.server'
import { services } from '~/server/services.server'

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `Edit ${(loaderData as { name?: string } | undefined)?.name ?? 'a board'} · Fettle` }
]

export function loader({ url, params, context }: Route.LoaderArgs) {
  return answerPage(url, async () => {
    const { board, consoles, isConsoleFixed } = await boardToEdit(services().db, context.get(actorContext), params.board)
    return {
      slug: board.slug,
      name: board.name,
      consoles,
      isConsoleFixed,
      licences: [...customaryLicences],
      values: {
        name: board.name,
        summary: board.summary,
        replaces: board.replaces,
        console: board.console_id,
        licence: board.licence,
        description: board.description_md
      }
    }
  })
}

export async function action({ request, url, params, context }: Route.ActionArgs) {
  const form = await readForm(request)
  const values = formValues(form)
  return answerForm(url, values, async () => {
    const actor = context.get(actorContext)
    await boardToEdit(services().db, actor, params.board)
    const parsed = parseForm(boardEditSchema, form)
    if (!parsed.ok) return formAnswer(parsed.errors, parsed.values)
    await editBoard(services(), actor, params.board, parsed.value)
    throw redirect(`/boards/${params.board}?done=saved`, 303)
  })
}

export default function EditBoard({ loaderData: data, actionData }: Route.ComponentProps) {
  return (
    <SiteSheet
      current="Boards"
      trail={[{ label: 'Boards', href: '/' }, { label: data.name, href: `/boards/${data.slug}` }, { label: 'Edit' }]}
      isForm
    >
      <Title heading={`Edit ${data.name}`} lead="What the board says about itself. Releases keep their own notes." />
      <Section
        number={1}
        heading="What it is"
        margin={
          <p>
            Which revisions it fits is stated <TextLink href={`/boards/${data.slug}/fit`}>on its own sheet</TextLink>.
          </p>
        }
      >
        <BoardForm
          values={actionData?.values ?? data.values}
          errors={actionData?.errors ?? []}
          consoles={data.consoles}
          licences={data.licences}
          consoleFixed={data.isConsoleFixed ? 'Fixed: a release is published for it.' : undefined}
          action="Save"
          before="this can be saved"
        />
      </Section>
    </SiteSheet>
  )
}
