import type { Route } from './+types/page'
import { ButtonLink } from '~/components/button'
import { Definitions } from '~/components/definition'
import { Empty } from '~/components/empty'
import { Section } from '~/components/section'
import { SiteSheet } from '~/components/site-sheet'
import { TextLink } from '~/components/text-link'
import { Title } from '~/components/title'
import { listConsoles, type ListedConsole } from '~/domain/consoles/consoles.server'
import { answerPage } from '~/server/answer.server'
import { services } from '~/server/services.server'
import { builtYears, kindWord, revisionSpan } from '../console-words'

export const meta: Route.MetaFunction = () => [
  { title: 'Consoles · Fettle' },
  { name: 'description', content: 'Consoles and their revisions: how to tell which one you own, and what fits it.' }
]

export function loader({ url }: Route.LoaderArgs) {
  return answerPage(url, async () => {
    const after = url.searchParams.get('after')?.slice(0, 100) || null
    return { ...(await listConsoles(services().db, { after })), isContinued: after !== null }
  })
}

export default function Consoles({ loaderData: { consoles, next, isContinued } }: Route.ComponentProps) {
  return (
    <SiteSheet current="Consoles" trail={[{ label: 'Boards', href: '/' }, { label: 'Consoles' }]}>
      <Title
        heading="Consoles"
        lead="A maker changed the mainboard of a console more than once. What fits depends on which one you own."
      />
      {consoles.length === 0 && (
        <Section number={1} heading="None yet">
          <Empty action={<ButtonLink href="/">To the boards</ButtonLink>}>
            {isContinued ? 'The list ends here.' : 'No console has been described yet. A steward of the site does that.'}
          </Empty>
        </Section>
      )}
      {consoles.map((console, i) => (
        <ConsoleSection key={console.slug} number={i + 1} console={console} />
      ))}
      {(next || isContinued) && (
        <nav className="pgr" aria-label="Pages of the list">
          {isContinued && <TextLink href="/consoles">From the start</TextLink>}
          {next && (
            <TextLink className="end" href={`/consoles?after=${encodeURIComponent(next)}`} rel="next">
              More consoles
            </TextLink>
          )}
        </nav>
      )}
    </SiteSheet>
  )
}

function ConsoleSection({ number, console }: { number: number; console: ListedConsole }) {
  const span = revisionSpan(console.revisions.map((r) => r.code))
  return (
    <Section number={number} heading={<TextLink href={`/consoles/${console.slug}`}>{console.name}</TextLink>} id={console.slug}>
      <p>{console.summary}</p>
      <Definitions
        layout="plate"
        items={[
          { label: 'Maker', value: console.maker },
          { label: 'Kind', value: kindWord[console.kind] },
          { label: 'Built', value: builtYears(console.builtFrom, console.builtTo) },
          { label: 'Revisions', value: span },
          { label: 'Boards for it', value: console.boards === 0 ? 'none yet' : String(console.boards) }
        ]}
      />
      <p>
        <TextLink className="go" href={`/consoles/${console.slug}`}>
          Which revision of {console.name} do I have?
        </TextLink>
      </p>
    </Section>
  )
}
