import { Form, useNavigation } from 'react-router'
import { Actions, Button } from '~/components/button'
import { ChoiceRows } from '~/components/choice-rows'
import { ErrorSummary } from '~/components/error-summary'
import { TextArea, TextField } from '~/components/field'
import { Section } from '~/components/section'
import { causeWords, choicesOf, statementWords } from '~/domain/reports/report-words'
import type { FormAnswer } from '~/server/answer.server'

const labels: Record<string, string> = {
  statement: 'How it is',
  stated_on: 'Day',
  last_running_on: 'Last worked',
  cause: 'Cause',
  notes: 'Notes'
}

/** How the unit is doing, by its author. Asked of a failure only: when it last worked, and the cause. */
export function CheckInForm({ today, formKey, answer }: { today: string; formKey: string; answer: FormAnswer | null }) {
  const navigation = useNavigation()
  const was = answer?.values ?? {}
  const errors = answer?.errors ?? []
  const at = (path: string) => errors.find((e) => e.path === path)?.message
  const shownForFailure = 'group-[&:not(:has(input[name=statement][value=failed]:checked))]:hidden'
  return (
    <Section
      number={3}
      heading="How is it now?"
      id="check-in"
      margin={
        <p>
          After a failure, or once it has left you, its history ends. Silence never counts as success: the figures hold only what
          was said.
        </p>
      }
    >
      <Form method="post" className="group" noValidate>
        <input type="hidden" name="intent" value="check-in" />
        <input type="hidden" name="form_key" value={was.form_key ?? formKey} />
        <ErrorSummary errors={errors} before="this can be added" labels={labels} />
        <ChoiceRows
          name="statement"
          legend="The unit"
          choices={choicesOf(statementWords).map(({ value, label, hint }) => ({ value, label, note: hint }))}
          chosen={was.statement ?? 'running'}
          error={at('statement')}
        />
        <TextField
          name="stated_on"
          type="date"
          label="On which day"
          hint="Of a failure: the day it was found."
          defaultValue={was.stated_on ?? today}
          error={at('stated_on')}
        />
        <div className={`mt-6 ${shownForFailure}`}>
          <TextField
            name="last_running_on"
            type="date"
            label="When did it last work?"
            hint="As well as you know. It makes the figures sharper."
            isOptional
            defaultValue={was.last_running_on}
            error={at('last_running_on')}
          />
          <div className="mt-6">
            <ChoiceRows
              name="cause"
              legend="What did it come from?"
              choices={choicesOf(causeWords).map(({ value, label, hint }) => ({ value, label, note: hint }))}
              chosen={was.cause}
              error={at('cause')}
            />
          </div>
        </div>
        <TextArea name="notes" label="Notes" isOptional rows={3} maxLength={4000} defaultValue={was.notes} error={at('notes')} />
        <div className="mt-6">
          <Actions>
            <Button busy={navigation.state === 'submitting' ? 'Adding it' : undefined}>Add this</Button>
          </Actions>
        </div>
      </Form>
    </Section>
  )
}
