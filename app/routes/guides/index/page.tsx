import type { Route } from './+types/page'
import { Section } from '~/components/section'
import { SiteSheet } from '~/components/site-sheet'
import { TextLink } from '~/components/text-link'
import { Title } from '~/components/title'
import { listGuides } from '~/domain/guides/guides.server'

export const meta: Route.MetaFunction = () => [
  { title: 'Guides · Fettle' },
  { name: 'description', content: 'How to work safely, file a report, cut a release, and read the figures.' }
]

export function loader() {
  return { guides: listGuides() }
}

export default function Guides({ loaderData: { guides } }: Route.ComponentProps) {
  return (
    <SiteSheet current="Guides" trail={[{ label: 'Boards', href: '/' }, { label: 'Guides' }]}>
      <Title
        heading="Guides"
        lead="How to work without getting hurt, what to write in a report, and how the figures come about."
      />
      <Section number={1} heading="What there is to read">
        <p className="soft">Start with the first, whatever you came for.</p>
        <ul className="entries">
          {guides.map(({ page, heading, lead }) => (
            <li key={page}>
              <TextLink href={`/guides/${page}`}>{heading}</TextLink>
              <p>{lead}</p>
            </li>
          ))}
        </ul>
      </Section>
    </SiteSheet>
  )
}
