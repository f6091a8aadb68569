import { Form, useNavigation } from 'react-router'
import { FindingsList } from './findings-list'
import { foundInWords } from './release-parts'
import { Actions, Button } from '~/components/button'
import { DoneLine } from '~/components/done-line'
import { ErrorSummary } from '~/components/error-summary'
import { TextArea } from '~/components/field'
import { Section } from '~/components/section'
import { describeFinding } from '~/domain/bundle/describe-finding'
import type { FindingCode } from '~/domain/bundle/finding-codes'
import type { ReleasePage } from '~/domain/releases/release-page.server'
import type { FieldError } from '~/lib/domain-error'
import type { FormValues } from '~/lib/parse-form'

type DraftFindingsProps = {
  page: ReleasePage
  /** What was just done about them. */
  done: string | null
  errors: FieldError[]
  values: FormValues
}

/** What the check found on a draft, with room for an answer under each caution. */
export function DraftFindings({ page, done, errors, values }: DraftFindingsProps) {
  const { findings } = page
  const hasCautions = findings.some((f) => f.severity === 'caution')
  const isBusy = useNavigation().formData?.get('intent') === 'answers'
  const error = (id: string) => errors.find((e) => e.path === `answer.${id}`)?.message
  const labels = Object.fromEntries(findings.map((f) => [`answer.${f.id}`, describeFinding(f.code as FindingCode).title]))
  return (
    <Section
      number={2}
      heading="What the check found"
      id="found"
      margin={
        <>
          <p>
            <b>A stop</b> keeps a release from being published. <b>A caution</b> must be answered first. <b>A note</b> wants
            nothing.
          </p>
          <p>Your answers stand under the findings on the release page.</p>
        </>
      }
    >
      {done && <DoneLine what={done} />}
      <p role={done ? undefined : 'status'}>The bundle check raised {foundInWords(findings)}.</p>
      <ErrorSummary errors={errors} before="the answers can be saved" labels={labels} />
      <FindingsList
        page={page}
        isDraft
        mustShow={({ id, severity, answer }) => error(id) !== undefined || (severity === 'caution' && answer === null)}
        under={(f) =>
          f.severity === 'caution' && (
            <TextArea
              form="answers"
              name={`answer.${f.id}`}
              label="Your answer"
              hint={
                f.answer
                  ? 'Answered. You can still change it.'
                  : 'A caution must be answered before the release can be published.'
              }
              rows={2}
              maxLength={2000}
              defaultValue={values[`answer.${f.id}`] ?? f.answer ?? ''}
              error={error(f.id)}
              isLong
            />
          )
        }
      />
      {hasCautions && (
        <Form method="post" action="#found" id="answers" className="mt-6" noValidate>
          <input type="hidden" name="intent" value="answers" />
          <Actions>
            <Button kind="outline" busy={isBusy ? 'Saving' : undefined}>
              Save the answers
            </Button>
          </Actions>
        </Form>
      )}
    </Section>
  )
}
