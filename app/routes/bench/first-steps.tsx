import { Actions, ButtonLink } from '~/components/button'
import { EmptyOutline } from '~/components/empty'
import { Figure, TwoDrawings } from '~/components/figure'
import { Section } from '~/components/section'

/** The bench of somebody without a board: what to do, in which order. */
export function FirstSteps() {
  return (
    <Section number={1} heading="To begin">
      <Figure number={1} caption="Nothing released yet.">
        <TwoDrawings
          wide={<EmptyOutline width={400} height={170} words="your first board goes here" />}
          narrow={<EmptyOutline width={320} height={140} words="your first board goes here" />}
        />
      </Figure>
      <ol className="mt-6 list-decimal pl-6">
        <li>
          <b>Name the board</b> and the part it replaces.
        </li>
        <li>
          <b>Say which revisions it fits,</b> and how you know.
        </li>
        <li>
          <b>Upload a bundle.</b> The check takes a few seconds and changes nothing; a draft is yours alone.
        </li>
      </ol>
      <div className="mt-6">
        <Actions>
          <ButtonLink href="/boards/new">Name a board</ButtonLink>
          <ButtonLink kind="outline" href="/boards">
            Look at the boards of others
          </ButtonLink>
        </Actions>
      </div>
    </Section>
  )
}
