import { redirect } from 'react-router'
import type { Route } from './+types/page'
import { DraftForm, startNotesIntent } from '../draft-form'
import type { Actor } from '~/domain/accounts/can'
import { SiteSheet } from '~/components/site-sheet'
import { Title } from '~/components/title'
import { draftToEdit } from '~/domain/releases/board-releases.server'
import { editDraft } from '~/domain/releases/drafts.server'
import { intakeDeps } from '~/domain/releases/intake-deps.server'
import { draftSchema, type Draft } from '~/domain/releases/release.schema'
import { releasePath } from '~/domain/releases/release-path'
import { recheckBundle } from '~/domain/releases/take-in-bundle.server'
import { notesOffer, startNotesOf } from '~/domain/releases/what-changed.server'
import { formValues, parseForm, type FormValues } from '~/lib/parse-form'
import { answerForm, answerPage, formAnswer } from '~/server/answer.server'
import { actorContext } from '~/server/context'
import { readForm } from '~/server/read-form.server'
import { services } from '~/server/services.server'

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `Edit ${loaderData ? `${loaderData.name} ${loaderData.version}` : 'a draft'} · Fettle` }
]

const text = (value: number | string | null) => (value === null ? '' : String(value))

export function loader({ url, params, context }: Route.LoaderArgs) {
  return answerPage(url, async () => {
    const { db } = services()
    const { board, release } = await draftToEdit(db, context.get(actorContext), params.board, params.version)
    return {
      offer: await notesOffer(db, release),
      slug: board.slug,
      name: board.name,
      version: release.version,
      values: {
        version: release.version,
        boardRevision: release.board_revision,
        layers: text(release.declared_layers),
        thicknessMm: text(release.declared_thickness_mm),
        copperUm: text(release.declared_copper_um),
        finish: text(release.declared_finish),
        mask: text(release.declared_mask),
        legend: text(release.declared_legend),
        stencil: text(release.declared_stencil),
        orderNote: release.order_note,
        notes: release.notes_md
      }
    }
  })
}

export async function action({ request, url, params, context }: Route.ActionArgs) {
  const form = await readForm(request)
  const values = formValues(form)
  return answerForm(url, values, async () => {
    const s = services()
    const actor = context.get(actorContext)
    await draftToEdit(s.db, actor, params.board, params.version)
    const parsed = parseForm(draftSchema, form)
    if (!parsed.ok) return formAnswer(parsed.errors, parsed.values)
    if (values.intent === startNotesIntent) return startNotes(actor, params, parsed.value, values)
    const { version, needsCheck } = await editDraft(s, actor, params.board, params.version, parsed.value)
    if (needsCheck) await recheckBundle(intakeDeps(s), actor, params.board, version)
    throw redirect(`${releasePath(params.board, version)}?done=${needsCheck ? 'rechecked' : 'saved'}`, 303)
  })
}

/** The form as it was entered, with what changed before the notes; nothing is saved. */
async function startNotes(
  actor: Actor,
  { board, version }: { board: string; version: string },
  entered: Draft,
  values: FormValues
) {
  const started = await startNotesOf(services().db, actor, board, version, entered, values.notes ?? '')
  if (!started) {
    const message = 'There is nothing to compare yet: no release before this one, or no checked bundle.'
    return formAnswer([{ path: 'notes', message }], values, 409)
  }
  if (started.outcome === 'too-long')
    return formAnswer(
      [{ path: 'notes', message: 'With what changed before them the notes would pass 20 000 characters.' }],
      values
    )
  const told = {
    started: `What changed since ${started.since} stands before your notes now. Read it over, then save the draft.`,
    'stands-already': `What changed since ${started.since} stands in the notes already.`,
    'nothing-changed': `Nothing that Fettle can see changed since ${started.since}, so the notes are as they were.`
  }
  return { errors: [], values: { ...values, notes: started.notes }, told: told[started.outcome] }
}

export default function EditRelease({ loaderData: data, actionData }: Route.ComponentProps) {
  const path = releasePath(data.slug, data.version)
  return (
    <SiteSheet
      current="My bench"
      trail={[
        { label: 'Boards', href: '/' },
        { label: data.name, href: `/boards/${data.slug}` },
        { label: `Draft ${data.version}`, href: path },
        { label: 'Edit' }
      ]}
      isForm
    >
      <Title
        heading={`Edit ${data.name} ${data.version}`}
        lead="A draft can still change. When board revision, layers or thickness do, the bundle is checked again."
      />
      <DraftForm
        values={actionData?.values ?? data.values}
        errors={actionData?.errors ?? []}
        action="Save the draft"
        back={path}
        notesStart={
          data.offer && {
            ...data.offer,
            address: `${path}/edit#s3`,
            told: actionData && 'told' in actionData ? actionData.told : null
          }
        }
      />
    </SiteSheet>
  )
}
