import type { Route } from './+types/page'
import { Section } from '~/components/section'
import { SiteSheet } from '~/components/site-sheet'
import { Table } from '~/components/table'
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
        <Table
          caption="Start with the first, whatever you came for."
          columns={[
            {
              key: 'heading',
              head: 'Guide',
              isRowHead: true,
              className: 'nw',
              cell: (guide) => <TextLink href={`/guides/${guide.page}`}>{guide.heading}</TextLink>
            },
            { key: 'lead', head: 'What it says', className: 'long', cell: (guide) => guide.lead }
          ]}
          rows={guides}
          rowKey={(guide) => guide.page}
          isFolded
        />
      </Section>
    </SiteSheet>
  )
}
