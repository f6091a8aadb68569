import { Form, useNavigation } from 'react-router'
import { Actions, Button, ButtonLink } from '~/components/button'
import { DoneLine } from '~/components/done-line'
import { ErrorSummary } from '~/components/error-summary'
import { SelectField, TextArea, TextField } from '~/components/field'
import { MarginNote, Section } from '~/components/section'
import { stencils } from '~/domain/releases/stencils'
import type { FieldError } from '~/lib/domain-error'
import type { FormValues } from '~/lib/parse-form'

/** What the notes can be started with; `told` says what came of it. */
export type NotesStart = { since: string; isReady: boolean; address: string; told: string | null }
export type DraftFormProps = {
  values: FormValues
  errors: FieldError[]
  action: string
  back: string
  notesStart?: NotesStart | null
}

const labels = {
  version: 'Version',
  boardRevision: 'Board revision',
  layers: 'Copper layers',
  thicknessMm: 'Thickness',
  copperUm: 'Copper weight',
  finish: 'Finish',
  mask: 'Mask',
  legend: 'Legend',
  stencil: 'Stencil',
  orderNote: 'Note for the order sheet',
  notes: 'Release notes'
}
const stencilWords = { none: 'none needed', top: 'top', bottom: 'bottom', both: 'both sides' }

/** The form of a draft, in three numbered sections with one button. */
export function DraftForm({ values, errors, action, back, notesStart }: DraftFormProps) {
  const navigation = useNavigation()
  const intent = navigation.state === 'submitting' ? navigation.formData?.get('intent') : undefined
  const field = (name: keyof typeof labels) => ({
    name,
    label: labels[name],
    defaultValue: values[name],
    error: errors.find((e) => e.path === name)?.message
  })
  return (
    <Form method="post" noValidate>
      <ErrorSummary errors={errors} before="the draft can be saved" labels={labels} />
      <Section
        number={1}
        heading="Which one it is"
        margin={
          <>
            <p>
              <b>With a pre-release,</b> as in 1.2.0-beta.1, it is published as a trial: open to all, marked, and never the newest
              while a full release stands.
            </p>
            <p>
              <b>The board revision</b> changes with copper, drill or outline; other parts on the same board keep it.
            </p>
          </>
        }
      >
        <TextField
          {...field('version')}
          hint="By the rules of SemVer 2.0.0, such as 1.4.0"
          maxLength={64}
          autoCapitalize="none"
          spellCheck={false}
          required
        />
        <TextField
          {...field('boardRevision')}
          hint="A for the first, then B, C …"
          maxLength={4}
          autoCapitalize="characters"
          required
        />
      </Section>
      <Section number={2} heading="What to order">
        <MarginNote beside="top">
          <p>
            <b>All may wait,</b> but say layers and thickness before the upload: the check compares the files with them.
          </p>
        </MarginNote>
        <TextField {...field('layers')} inputMode="numeric" maxLength={2} isOptional />
        <TextField {...field('thicknessMm')} unit="mm" inputMode="decimal" maxLength={6} isOptional />
        <TextField
          {...field('copperUm')}
          unit="µm"
          hint="Outer layers; 35 is common."
          inputMode="decimal"
          maxLength={6}
          isOptional
        />
        <TextField {...field('finish')} hint="Of the bare copper, such as immersion gold." maxLength={60} isOptional />
        <TextField {...field('mask')} hint="Its colour." maxLength={40} isOptional />
        <TextField {...field('legend')} hint="Its colour." maxLength={40} isOptional />
        <SelectField
          {...field('stencil')}
          empty="not stated"
          options={stencils.map((value) => ({ value, label: stencilWords[value] }))}
          isOptional
        />
        <TextArea
          {...field('orderNote')}
          hint="What the board house or the assembler must know; printed on the order sheet."
          rows={3}
          isLong
          isOptional
        />
      </Section>
      <Section
        number={3}
        heading="What to say about it"
        margin={notesStart && <StartNotes {...notesStart} isBusy={intent === startNotesIntent} />}
      >
        {notesStart?.told && <DoneLine what={notesStart.told} />}
        <TextArea
          {...field('notes')}
          // started notes replace what the field holds; they contain it
          key={values.notes}
          hint="Markdown: what changed, what to look out for when fitting."
          rows={8}
          isLong
          isOptional
        />
        <Actions>
          <Button busy={intent === null ? 'Saving' : undefined}>{action}</Button>
          <ButtonLink kind="outline" href={back}>
            Not now
          </ButtonLink>
        </Actions>
      </Section>
    </Form>
  )
}

/** What the second button of the form says it is for. */
export const startNotesIntent = 'start-notes'

/** Stands behind the button that saves, which the Enter key presses. */
function StartNotes({ since, isReady, address, isBusy }: NotesStart & { isBusy: boolean }) {
  if (!isReady)
    return (
      <p>
        <b>Once the bundle is checked,</b> the notes can start with what changed since {since}.
      </p>
    )
  return (
    <>
      <p>
        <b>What changed since {since}</b> was read from the files: parts, places, layers, holes and details. It is put before what
        stands in the notes; nothing is saved yet.
      </p>
      <p className="mt-3">
        <Button
          kind="outline"
          name="intent"
          value={startNotesIntent}
          formAction={address}
          busy={isBusy ? 'Comparing' : undefined}
        >
          Start the notes with what changed
        </Button>
      </p>
    </>
  )
}
