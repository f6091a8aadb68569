import { redirect } from 'react-router'
import type { Route } from './+types/page'
import { BoardForm } from '../board-form'
import { SiteSheet } from '~/components/site-sheet'
import { Section } from '~/components/section'
import { Title } from '~/components/title'
import { must } from '~/domain/accounts/must'
import { boardOpenSchema } from '~/domain/boards/board.schema'
import { consolesToChoose } from '~/domain/boards/board-page.server'
import { openBoard } from '~/domain/boards/boards.server'
import { customaryLicences } from '~/domain/boards/spdx'
import { formValues, parseForm } from '~/lib/parse-form'
import { answerForm, answerPage, formAnswer } from '~/server/answer.server'
import { actorContext } from '~/server/context'
import { readForm } from '~/server/read-form.server'
import { services } from '~/server/services.server'

export const meta: Route.MetaFunction = () => [{ title: 'Name a board · Fettle' }]

export function loader({ url, context }: Route.LoaderArgs) {
  return answerPage(url, async () => {
    must(context.get(actorContext), 'board.open', null)
    return { consoles: await consolesToChoose(services().db), licences: [...customaryLicences] }
  })
}

export async function action({ request, url, context }: Route.ActionArgs) {
  const form = await readForm(request)
  const values = formValues(form)
  return answerForm(url, values, async () => {
    const actor = context.get(actorContext)
    must(actor, 'board.open', null)
    const parsed = parseForm(boardOpenSchema, form)
    if (!parsed.ok) return formAnswer(parsed.errors, parsed.values)
    const slug = await openBoard(services(), actor, parsed.value)
    throw redirect(`/boards/${slug}/fit?opened=1`, 303)
  })
}

export default function NewBoard({ loaderData, actionData }: Route.ComponentProps) {
  return (
    <SiteSheet current="My bench" trail={[{ label: 'My bench', href: '/bench' }, { label: 'Name a board' }]} isForm>
      <Title
        heading="Name a board"
        lead="A board is the design; its releases come next, each with one bundle of files. You will be its owner."
      />
      <Section
        number={1}
        heading="What it is"
        margin={
          <>
            <p>
              <b>Nothing is published yet.</b> The board is listed at once, its releases only when you publish them.
            </p>
            <p>
              <b>A licence</b> tells others what they may do with the files. Common for hardware: CERN-OHL-P-2.0 (permissive),
              -W-2.0 and -S-2.0 (changes stay open).
            </p>
          </>
        }
      >
        <BoardForm
          values={actionData?.values ?? {}}
          errors={actionData?.errors ?? []}
          consoles={loaderData.consoles}
          licences={loaderData.licences}
          action="Open the board"
          before="the board can be opened"
          hasAddress
        />
      </Section>
    </SiteSheet>
  )
}
