import { Form } from 'react-router'
import { Actions, Button } from '~/components/button'
import { ChoiceRows } from '~/components/choice-rows'
import { ErrorSummary } from '~/components/error-summary'
import { TextArea } from '~/components/field'
import { Section } from '~/components/section'
import { exclusionKinds, exclusionWords } from '~/domain/reports/report-words'
import type { FormAnswer } from '~/server/answer.server'

/** A steward's decision to leave a report out. */
export function ExclusionForm({ number, answer }: { number: number; answer: FormAnswer | null }) {
  const was = answer?.values ?? {}
  const errors = answer?.errors ?? []
  const at = (path: string) => errors.find((e) => e.path === path)?.message
  return (
    <Section
      number={number}
      heading="Leave it out"
      id="exclude"
      margin={<p>Shown to stewards only. That a report displeases its maintainer is no reason.</p>}
    >
      <Form method="post" noValidate>
        <input type="hidden" name="intent" value="exclude" />
        <ErrorSummary errors={errors} before="this can be done" labels={{ kind: 'Kind of reason', reason: 'Reason' }} />
        <ChoiceRows
          name="kind"
          legend="Why?"
          choices={exclusionKinds.map((kind) => ({ value: kind, label: exclusionWords[kind].label }))}
          chosen={was.kind}
          error={at('kind')}
        />
        <TextArea
          name="reason"
          label="The reason, for everybody to read"
          hint="What others can check: the other report’s address, the board in the photo."
          rows={3}
          maxLength={500}
          defaultValue={was.reason}
          error={at('reason')}
        />
        <div className="mt-6">
          <Actions>
            <Button
              kind="destructive"
              note="Every figure of this board changes at once. The report stays readable, struck out, with this reason and your name. It cannot be taken back in."
            >
              Exclude this report
            </Button>
          </Actions>
        </div>
      </Form>
    </Section>
  )
}
