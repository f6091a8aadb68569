import type { Route } from './+types/page'
import { IndexLine } from '~/components/index-line'
import { Prose } from '~/components/prose'
import { Section } from '~/components/section'
import { SiteSheet } from '~/components/site-sheet'
import { Title } from '~/components/title'
import { guideByPage } from '~/domain/guides/guides.server'
import { answerPage } from '~/server/answer.server'

export const meta: Route.MetaFunction = ({ loaderData }) =>
  loaderData
    ? [{ title: `${loaderData.guide.heading} · Fettle` }, { name: 'description', content: loaderData.guide.lead }]
    : [{ title: 'No such guide · Fettle' }]

export function loader({ params, url }: Route.LoaderArgs) {
  return answerPage(url, async () => ({ guide: guideByPage(params.page) }))
}

export default function GuidePage({ loaderData: { guide } }: Route.ComponentProps) {
  const trail = [{ label: 'Boards', href: '/' }, { label: 'Guides', href: '/guides' }, { label: guide.heading }]
  return (
    <SiteSheet current="Guides" trail={trail}>
      <Title heading={guide.heading} lead={guide.lead}>
        {guide.opening && (
          <div className="mt-4">
            <Prose html={guide.opening} />
          </div>
        )}
      </Title>
      {guide.sections.length > 3 && (
        <IndexLine entries={guide.sections.map(({ id, heading }, i) => ({ number: i + 1, word: heading, id }))} />
      )}
      {guide.sections.map(({ id, heading, html }, i) => (
        <Section key={id} number={i + 1} heading={heading} id={id}>
          <Prose html={html} />
        </Section>
      ))}
    </SiteSheet>
  )
}
