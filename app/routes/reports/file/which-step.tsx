import { Form } from 'react-router'
import { Button } from '~/components/button'
import { ChoiceGrid } from '~/components/choice-rows'
import { Empty } from '~/components/empty'
import { ErrorSummary } from '~/components/error-summary'
import { SelectField } from '~/components/field'
import { FitStrip } from '~/components/fit-strip'
import { Section } from '~/components/section'
import { UnitTag } from '~/components/tag'
import { TextLink } from '~/components/text-link'
import type { FilingStep } from '~/domain/reports/filing.server'
import { SafetyCautions } from './safety-cautions'

const stateWords = { draft: '', released: '', trial: ', trial', withdrawn: ', withdrawn' }

/** The second step: which release, in which revision of the console. */
export function WhichStep({ step }: { step: Extract<FilingStep, { kind: 'which' }> }) {
  const { board, releases, revisions, unit, chosen, errors } = step
  const errorAt = (path: string) => errors.find((e) => e.path === path)?.message
  if (releases.length === 0)
    return (
      <Section number={1} heading="The unit">
        <Empty harmless={<TextLink href="/report">Choose another board</TextLink>}>
          {`${board.name} has no published release yet, so nothing that was fitted can be named.`}
        </Empty>
      </Section>
    )
  return (
    <Form method="get" action="/report">
      {unit ? <input type="hidden" name="unit" value={unit.tag} /> : <input type="hidden" name="board" value={board.slug} />}
      <ErrorSummary errors={errors} before="you can go on" labels={{ release: 'Release', revision: 'Revision' }} />
      <Section number={1} heading="The unit" margin={<p>The version stands on the board, beside its name.</p>}>
        <SafetyCautions />
        {unit ? (
          <UnitTag
            tag={unit.tag}
            what={
              <>
                {unit.board_name} <b>{unit.version}</b>
              </>
            }
            facts={[
              { label: 'Batch', value: unit.batch_code },
              { label: 'Made', value: unit.made_on }
            ]}
          />
        ) : (
          <SelectField
            name="release"
            label={`Release of ${board.name}`}
            defaultValue={chosen.release?.version}
            error={errorAt('release')}
            options={releases.map(({ version, state }) => ({ value: version, label: `${version}${stateWords[state]}` }))}
          />
        )}
        <p className="mt-3">
          <TextLink href="/report">Another board</TextLink>
        </p>
      </Section>
      <Section
        number={2}
        heading={`The ${board.console_name}`}
        margin={<p>Not sure? Each revision below says where its code stands.</p>}
      >
        <ChoiceGrid
          name="revision"
          legend="Revision of the mainboard"
          chosen={chosen.revision?.code}
          error={errorAt('revision')}
          isRequired
          choices={revisions.map(({ code }) => ({ value: code, label: code }))}
        />
        <div className="mt-6">
          <FitStrip cells={revisions.map(({ code, claim, reason }) => ({ code, fit: claim, reason }))} />
        </div>
        <dl className="defs mt-6">
          {revisions.map(({ code, recognise }) => (
            <div key={code} className="contents">
              <dt>{code}</dt>
              <dd>{recognise}</dd>
            </div>
          ))}
        </dl>
      </Section>
      <div className="bar">
        <span>Then the fault, the first power, and that is all.</span>
        <Button>Go on</Button>
      </div>
    </Form>
  )
}
