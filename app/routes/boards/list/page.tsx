import { Form } from 'react-router'
import type { Route } from './+types/page'
import { Button, ButtonLink, GoLink } from '~/components/button'
import { NothingFound } from '~/components/empty'
import { SiteSheet } from '~/components/site-sheet'
import { Section } from '~/components/section'
import { Table } from '~/components/table'
import { TextLink } from '~/components/text-link'
import { Title } from '~/components/title'
import { listBoards } from '~/domain/boards/boards.server'
import { dayOf } from '~/lib/dates'
import { answerPage } from '~/server/answer.server'
import { services } from '~/server/services.server'

export const meta: Route.MetaFunction = () => [{ title: 'All boards · Fettle' }]

const pageSize = 30

export function loader({ url }: Route.LoaderArgs) {
  return answerPage(url, async () => {
    const q = (url.searchParams.get('q') ?? '').trim().slice(0, 100)
    const after = url.searchParams.get('after')
    const { boards, next } = await listBoards(services().db, { q, after, limit: pageSize })
    const query = (cursor: string) => `/boards?${new URLSearchParams({ ...(q ? { q } : {}), after: cursor })}`
    return {
      q,
      isFirst: after === null,
      first: `/boards${q ? `?${new URLSearchParams({ q })}` : ''}`,
      next: next === null ? null : query(next),
      boards: boards.map(({ id, slug, name, summary, consoleName, newest }) => ({
        id,
        slug,
        name,
        summary,
        consoleName,
        newest: newest && {
          version: newest.version,
          state: newest.state,
          on: dayOf(newest.publishedAt),
          thumbnail: newest.thumbnail,
          width: newest.widthMm,
          height: newest.heightMm
        }
      }))
    }
  })
}

/** Pixels a millimetre at which the widest of the boards is this wide. */
const widest = 120

export default function Boards({ loaderData: { q, isFirst, first, next, boards } }: Route.ComponentProps) {
  const scale = widest / Math.max(1, ...boards.map((b) => b.newest?.width ?? 0))
  return (
    <SiteSheet current="Boards" trail={[{ label: 'Boards', href: '/' }, { label: 'All boards' }]}>
      <Title
        heading={q ? `Boards with “${q}”` : 'All boards'}
        lead="By name, each with its newest release."
        actions={
          <ButtonLink href="/boards/new" kind="outline">
            Name a board
          </ButtonLink>
        }
      >
        <Form role="search" action="/boards" className="mt-6 max-w-[560px]">
          <label htmlFor="q">Search</label>
          <div className="with mt-1.5">
            <input id="q" name="q" type="search" defaultValue={q} maxLength={100} />
            <Button>Find</Button>
          </div>
          <span className="hint mt-1.5">Name, summary, replaced part or console</span>
        </Form>
      </Title>
      <Section number={1} heading="The boards">
        {boards.length === 0 ? (
          <NothingFound what={q ? `No board has “${q}” in its name or summary.` : 'No board is open yet.'}>
            <p>
              {q ? (
                <TextLink href="/boards">Show all boards</TextLink>
              ) : (
                <TextLink href="/boards/new">Name the first one</TextLink>
              )}
            </p>
          </NothingFound>
        ) : (
          <Table
            caption={q ? 'What was found.' : 'Open a board for its releases, what it fits and how long it lasts.'}
            rows={boards}
            rowKey={(b) => b.id}
            isFolded
            columns={[
              {
                key: 'name',
                head: 'Board',
                isRowHead: true,
                cell: (b) => <TextLink href={`/boards/${b.slug}`}>{b.name}</TextLink>
              },
              { key: 'summary', head: 'What it does', label: '', className: 'long', cell: (b) => b.summary },
              { key: 'console', head: 'For', cell: (b) => b.consoleName },
              {
                key: 'newest',
                head: 'Newest release',
                className: 'nw',
                cell: (b) =>
                  b.newest ? `${b.newest.version}, ${b.newest.state} ${b.newest.on}` : <span className="soft">none yet</span>
              },
              { key: 'picture', head: 'Top side, at one scale', cell: (b) => <Thumbnail board={b} scale={scale} /> }
            ]}
          />
        )}
        {(next || !isFirst) && (
          <p className="mt-4 flex flex-wrap gap-6">
            {!isFirst && <GoLink href={first}>From the beginning</GoLink>}
            {next && <GoLink href={next}>Further boards</GoLink>}
          </p>
        )}
      </Section>
    </SiteSheet>
  )
}

type Listed = Route.ComponentProps['loaderData']['boards'][number]

function Thumbnail({ board: { name, newest }, scale }: { board: Listed; scale: number }) {
  if (!newest?.thumbnail || newest.width === null || newest.height === null) return <span className="soft">not drawn</span>
  return (
    <img
      className="max-w-none align-top"
      src={newest.thumbnail}
      alt={`Top side of ${name} ${newest.version}`}
      width={Math.round(newest.width * scale)}
      height={Math.round(newest.height * scale)}
      loading="lazy"
      decoding="async"
    />
  )
}
