import { redirect } from 'react-router'
import type { Route } from './+types/page'
import { DraftRelease } from './draft-release'
import { PublishedRelease } from './published-release'
import type { Actor } from '~/domain/accounts/can'
import { answerCautions, deleteDraft } from '~/domain/releases/drafts.server'
import { intakeDeps } from '~/domain/releases/intake-deps.server'
import { lastingOf } from '~/domain/releases/lasting.server'
import { publishRelease } from '~/domain/releases/publish.server'
import { answerSchema, publishSchema } from '~/domain/releases/release.schema'
import { releasePage } from '~/domain/releases/release-page.server'
import { releasePath } from '~/domain/releases/release-path'
import { findRelease } from '~/domain/releases/releases.server'
import { recheckBundle, takeInBundle } from '~/domain/releases/take-in-bundle.server'
import { dayOf } from '~/lib/dates'
import { DomainError, statusOf, type FieldError } from '~/lib/domain-error'
import { formValues, parseForm, type FormValues } from '~/lib/parse-form'
import { answerForm, answerPage, formAnswer } from '~/server/answer.server'
import { actorContext } from '~/server/context'
import { readForm } from '~/server/read-form.server'
import { discardBody, isFileForm, receiveFile } from '~/server/receive-file.server'
import { services } from '~/server/services.server'

const done = {
  drafted: 'The draft is saved. Now upload its bundle.',
  saved: 'The draft is saved.',
  rechecked: 'The draft is saved and its bundle checked again.',
  checked: 'The bundle is stored and checked.',
  refused: 'The file was checked and refused.',
  answered: 'Your answers are saved.',
  published: 'It is published.',
  withdrawn: 'It is withdrawn.'
}

/** Said where the page then stands: over what the check found. */
const saidAtFindings = ['checked', 'refused', 'answered']

export const meta: Route.MetaFunction = ({ loaderData }) => {
  const page = (
    loaderData as { page?: { board: { name: string; summary: string }; release: { version: string; state: string } } } | undefined
  )?.page
  if (!page) return [{ title: 'Fettle' }]
  const draft = page.release.state === 'draft' ? 'Draft: ' : ''
  return [
    { title: `${draft}${page.board.name} ${page.release.version} · Fettle` },
    { name: 'description', content: page.board.summary }
  ]
}

export function loader({ url, params, context }: Route.LoaderArgs) {
  return answerPage(url, async () => {
    const s = services()
    const { db, config, now } = s
    const page = await releasePage(db, context.get(actorContext), params.board, params.version)
    const told = url.searchParams.get('done')
    const asked = told === 'checked' && page.refused ? 'refused' : told
    return {
      page,
      lasting: page.release.state === 'draft' ? null : await lastingOf(s, params.board, params.version),
      maxBytes: config.uploadMaxBytes,
      today: dayOf(now()),
      done: asked !== null && Object.hasOwn(done, asked) ? done[asked as keyof typeof done] : null,
      isAboutFindings: asked !== null && saidAtFindings.includes(asked)
    }
  })
}

export async function action({ request, url, params, context }: Route.ActionArgs) {
  // The one form of this page that carries a file; every other is short.
  if (isFileForm(request.headers.get('Content-Type'))) return takeUpload(request, url, params, context.get(actorContext))
  const form = await readForm(request)
  const values = formValues(form)
  return answerForm(url, values, async () => {
    const actor = context.get(actorContext)
    const path = releasePath(params.board, params.version)
    switch (values.intent) {
      case 'answers': {
        const refused = await saveAnswers(actor, params, values)
        if (refused.length > 0) return formAnswer(refused, values)
        throw redirect(`${path}?done=answered#found`, 303)
      }
      case 'publish': {
        await findRelease(services().db, actor, params.board, params.version)
        const wish = parseForm(publishSchema, form)
        if (!wish.ok)
          return formAnswer([{ path: '', message: 'There is no checked bundle to publish. Load the page again.' }], values)
        await publishRelease(services(), actor, params.board, params.version, wish.value)
        throw redirect(`${path}?done=published`, 303)
      }
      case 'recheck':
        await recheckBundle(intakeDeps(services()), actor, params.board, params.version)
        throw redirect(`${path}?done=checked#found`, 303)
      case 'delete':
        await deleteDraft(services(), actor, params.board, params.version)
        throw redirect(`/boards/${params.board}?done=deleted`, 303)
      default:
        await findRelease(services().db, actor, params.board, params.version)
        return formAnswer([{ path: '', message: 'This form is not complete. Load the page again.' }], values)
    }
  })
}

/** Takes the bundle as a browser without scripts sends it: streamed, and refused at its field. */
async function takeUpload(request: Request, url: URL, { board, version }: { board: string; version: string }, actor: Actor) {
  const s = services()
  return answerForm(url, { intent: 'bundle' }, async () => {
    try {
      await takeInBundle(intakeDeps(s), actor, board, version, () =>
        receiveFile(request, 'bundle', s.config.uploadDir, s.config.uploadMaxBytes)
      )
    } catch (error) {
      discardBody(request)
      if (!(error instanceof DomainError) || ['unauthenticated', 'forbidden', 'not-found'].includes(error.kind)) throw error
      return formAnswer([{ path: 'bundle', message: error.message }], { intent: 'bundle' }, statusOf[error.kind])
    }
    throw redirect(`${releasePath(board, version)}?done=checked#found`, 303)
  })
}

/** @returns what is wrong with the answers; they are saved when nothing is */
async function saveAnswers(actor: Actor, { board, version }: { board: string; version: string }, values: FormValues) {
  const errors: FieldError[] = []
  const answers = new Map<string, string>()
  for (const [name, text] of Object.entries(values)) {
    if (!name.startsWith('answer.')) continue
    const parsed = answerSchema.safeParse(text)
    if (parsed.success) answers.set(name.slice('answer.'.length), parsed.data)
    else errors.push({ path: name, message: parsed.error.issues[0]!.message })
  }
  if (errors.length === 0) await answerCautions(services(), actor, board, version, answers)
  return errors
}

export default function Release({ loaderData, actionData }: Route.ComponentProps) {
  const { page, maxBytes, today } = loaderData
  if (page.release.state !== 'draft')
    return <PublishedRelease page={page} lasting={loaderData.lasting} today={today} done={loaderData.done} />
  return (
    <DraftRelease
      page={page}
      maxBytes={maxBytes}
      done={loaderData.done}
      isAboutFindings={loaderData.isAboutFindings}
      errors={actionData?.errors ?? []}
      values={actionData?.values ?? {}}
    />
  )
}
