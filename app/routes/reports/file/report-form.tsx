import { Form, useNavigation } from 'react-router'
import { Button } from '~/components/button'
import { ChoiceRows } from '~/components/choice-rows'
import { ErrorSummary } from '~/components/error-summary'
import { SelectField, TextArea, TextField } from '~/components/field'
import { Section } from '~/components/section'
import { UnitTag } from '~/components/tag'
import { TextLink } from '~/components/text-link'
import { Warning } from '~/components/warning'
import type { FilingStep } from '~/domain/reports/filing.server'
import { causeWords, choicesOf, evidenceWords, firstPowerWords, methodWords } from '~/domain/reports/report-words'
import type { FormAnswer } from '~/server/answer.server'
import { SafetyCautions } from './safety-cautions'

const labels: Record<string, string> = {
  release: 'Release',
  revision: 'Revision',
  unit_tag: 'Unit tag',
  installed_on: 'Date fitted',
  evidence: 'The fault',
  method: 'Method',
  first_power: 'First power',
  cause: 'Cause',
  notes: 'Notes'
}

const choices = <T extends string>(words: Record<T, { label: string; hint?: string }>) =>
  choicesOf(words).map(({ value, label, hint }) => ({ value, label, note: hint }))

type Props = { step: Extract<FilingStep, { kind: 'report' }>; today: string; formKey: string; answer: FormAnswer | null }

/** The report itself. Asked of a failure only: what it came from. */
export function ReportForm({ step, today, formKey, answer }: Props) {
  const { board, release, revision, unit, warnings } = step
  const navigation = useNavigation()
  const errors = answer?.errors ?? []
  const was = answer?.values ?? {}
  const at = (path: string) => errors.find((e) => e.path === path)?.message
  const back = unit ? `/report?unit=${unit.tag}` : `/report?board=${board.slug}&release=${encodeURIComponent(release.version)}`
  return (
    <Form method="post" noValidate>
      <input type="hidden" name="form_key" value={was.form_key ?? formKey} />
      <input type="hidden" name="release" value={release.id} />
      <input type="hidden" name="revision" value={revision.id} />
      <ErrorSummary
        errors={errors}
        before="this can be filed"
        labels={labels}
        idOf={(path) => (path in labels ? path : 'unit_tag')}
      />
      <Section
        number={1}
        heading="The unit"
        margin={<p>The date decides from when the unit is followed. A day or two off does no harm.</p>}
      >
        <SafetyCautions />
        {unit ? (
          <>
            <input type="hidden" name="unit_tag" value={unit.tag} />
            <UnitTag
              tag={unit.tag}
              what={
                <>
                  {unit.board_name} <b>{unit.version}</b>
                </>
              }
              facts={[
                { label: 'Batch', value: unit.batch_code },
                { label: 'Reported', value: unit.reports === 0 ? 'not yet' : `${unit.reports} times` }
              ]}
            />
          </>
        ) : (
          <TextField
            name="unit_tag"
            label="Unit tag"
            hint="On the label. Leave empty for an untagged board."
            defaultValue={was.unit_tag}
            error={at('unit_tag')}
            autoCapitalize="characters"
            autoComplete="off"
            maxLength={40}
          />
        )}
        <TextField
          name="installed_on"
          type="date"
          label="Date fitted"
          defaultValue={was.installed_on ?? today}
          error={at('installed_on')}
          required
        />
      </Section>
      <Section number={2} heading="Board and console" margin={<p>A warning does not keep you from filing.</p>}>
        <p>
          <b>
            {board.name} {release.version}
          </b>{' '}
          in a <b>{board.console_name}</b>, revision <b className="nw">{revision.code}</b>.{' '}
          <TextLink href={back}>Change</TextLink>
        </p>
        {warnings.map(({ severity, heading, text, because }) => (
          <Warning key={heading} severity={severity} heading={heading} because={because}>
            {text}
          </Warning>
        ))}
      </Section>
      <Section
        number={3}
        heading="The fault"
        margin={
          <p>
            <b>Why we ask.</b> A board cannot cure a fault that was elsewhere. Reports with a measured fault are the ones that the
            figures can be narrowed to.
          </p>
        }
      >
        <ChoiceRows
          name="evidence"
          legend={`How did you know that it needed ${board.name}?`}
          choices={choices(evidenceWords)}
          chosen={was.evidence}
          error={at('evidence')}
          isRequired
        />
        <SelectField
          name="method"
          label="Fitted with"
          isOptional
          empty="not said"
          options={choicesOf(methodWords)}
          defaultValue={was.method ?? ''}
          error={at('method')}
        />
      </Section>
      <div className="group">
        <Section
          number={4}
          heading="First power"
          margin={
            <p>
              <b>Filing “works” says that it still works today.</b> If it has failed since, file it and add the failure with its
              day on the next page.
            </p>
          }
        >
          <ChoiceRows
            name="first_power"
            legend="What did it do?"
            choices={choices(firstPowerWords)}
            chosen={was.first_power}
            error={at('first_power')}
            isRequired
          />
          <div className="mt-8 group-[&:not(:has(input[name=first\_power]:checked:not([value=works])))]:hidden">
            <ChoiceRows
              name="cause"
              legend="It did not work as it should. What did that come from?"
              hint="Asked when it did anything but work. It counts as a failure on the day it was fitted."
              choices={choices(causeWords)}
              chosen={was.cause}
              error={at('cause')}
            />
          </div>
        </Section>
      </div>
      <Section number={5} heading="Notes" margin={<p>Everybody can read them. Leave out names and addresses.</p>}>
        <TextArea
          name="notes"
          label="What others should know"
          hint="Measurements, substitute parts, what was hard. Up to 4000 characters."
          isOptional
          isLong
          rows={6}
          maxLength={4000}
          defaultValue={was.notes}
          error={at('notes')}
        />
      </Section>
      <div className="bar">
        {errors.length > 0 ? (
          <a href="#errors">
            <b>Not filed yet</b>
            <span>{errors.length === 1 ? '1 field to mend' : `${errors.length} fields to mend`}</span>
          </a>
        ) : (
          <span>It counts at once, and everybody can read it.</span>
        )}
        <Button busy={navigation.state === 'submitting' ? 'Filing the report' : undefined}>File report</Button>
      </div>
    </Form>
  )
}
