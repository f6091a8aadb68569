import { Section } from '~/components/section'
import { TextLink } from '~/components/text-link'
import type { CalculatorFigures } from '~/domain/survival/calculator-figures'

/** The answer as text to copy: nothing is kept here from which it could be fetched later. */
export function TakeAway({ number, figures: { json, csv } }: { number: number; figures: CalculatorFigures }) {
  return (
    <Section number={number} heading="Take the answer with you">
      <p className="mb-4 max-w-[66ch]">
        Nothing of this page is kept. Copy what you need, or print the page.{' '}
        {(json === null || csv === null) && (
          <>
            The whole answer is too long for a page: the <TextLink href="/guides/api#compute-survival">endpoint</TextLink> and the
            command line give it as a file.
          </>
        )}
      </p>
      {csv !== null && <Text id="answer-csv" label="The curves as CSV" text={csv} />}
      {json !== null && <Text id="answer-json" label="The whole answer as JSON" text={json} />}
    </Section>
  )
}

function Text({ id, label, text }: { id: string; label: string; text: string }) {
  return (
    <details className="mb-3">
      <summary className="min-h-[44px] py-2 font-semibold">{label}</summary>
      <div className="field long">
        <label htmlFor={id}>{label}</label>
        <textarea id={id} readOnly rows={10} defaultValue={text} spellCheck={false} />
      </div>
      <p className="small">
        <a
          href={`data:${id === 'answer-csv' ? 'text/csv' : 'application/json'};charset=utf-8,${encodeURIComponent(text)}`}
          download={`survival.${id.slice(7)}`}
        >
          Save as a file
        </a>
      </p>
    </details>
  )
}
