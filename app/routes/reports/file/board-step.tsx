import { useMemo } from 'react'
import { Form } from 'react-router'
import { Button } from '~/components/button'
import { Empty } from '~/components/empty'
import { ErrorSummary } from '~/components/error-summary'
import { TextField } from '~/components/field'
import { Section, SubHeading } from '~/components/section'
import { TextLink } from '~/components/text-link'
import type { FilingStep } from '~/domain/reports/filing.server'
import { SafetyCautions } from './safety-cautions'

/** The first step: a unit tag, or the board by its console. */
export function BoardStep({ step }: { step: Extract<FilingStep, { kind: 'board' }> }) {
  const { tagError } = step
  const errors = useMemo(() => (tagError === null ? [] : [{ path: 'unit', message: tagError }]), [tagError])
  return (
    <>
      <Section number={1} heading="By the unit tag">
        <SafetyCautions />
        <Form method="get" action="/report">
          <ErrorSummary errors={errors} before="the unit can be looked up" labels={{ unit: 'Unit tag' }} />
          <TextField
            name="unit"
            label="Unit tag"
            hint="On the label of the board, beside its square code. It says board, release and batch."
            defaultValue={step.tag ?? ''}
            error={tagError ?? undefined}
            autoCapitalize="characters"
            autoComplete="off"
            maxLength={40}
            beside={<Button kind="outline">Look it up</Button>}
          />
        </Form>
      </Section>
      <Section number={2} heading="Or by the board">
        {step.consoles.length === 0 ? (
          <Empty harmless={<TextLink href="/">To the boards</TextLink>}>
            No board has a published release yet. A report needs one: what was fitted has to have a version.
          </Empty>
        ) : (
          step.consoles.map(({ consoleName, boards }) => (
            <div key={consoleName}>
              <SubHeading>{consoleName}</SubHeading>
              <ul className="mb-6 border-t border-hair">
                {boards.map(({ slug, name, replaces }) => (
                  <li key={slug} className="border-b border-hair">
                    <TextLink
                      href={`/report?board=${slug}`}
                      className="block min-h-[52px] py-2 no-underline hover:bg-wash focus-visible:bg-wash"
                    >
                      <b className="text-petrol underline">{name}</b>
                      <span className="block text-small text-soft">replaces {replaces}</span>
                    </TextLink>
                  </li>
                ))}
              </ul>
            </div>
          ))
        )}
      </Section>
    </>
  )
}
