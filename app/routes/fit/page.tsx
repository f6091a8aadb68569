import { data, redirect } from 'react-router'
import type { Route } from './+types/page'
import { ButtonLink } from '~/components/button'
import { ConsoleQuestion } from '~/components/console-question'
import { Empty } from '~/components/empty'
import { FieldMessage } from '~/components/field'
import { FitMark, FitStrip } from '~/components/fit-strip'
import { MarginNote, Section, SubHeading } from '~/components/section'
import { SiteSheet } from '~/components/site-sheet'
import { Table } from '~/components/table'
import { TextLink } from '~/components/text-link'
import { Title } from '~/components/title'
import { Warning } from '~/components/warning'
import { chosenAddress, fitQuestion } from '~/domain/fit/fit-question.server'
import { answerPage } from '~/server/answer.server'
import { services } from '~/server/services.server'

export const meta: Route.MetaFunction = () => [
  { title: 'What fits? · Fettle' },
  { name: 'description', content: 'Which repair boards fit your console and its mainboard revision, and why.' }
]

export function loader({ url }: Route.LoaderArgs) {
  return answerPage(url, async () => {
    const chosen = chosenAddress(url.searchParams)
    if (chosen) return redirect(chosen)
    const question = await fitQuestion(services().db, url.searchParams)
    return data(question, { status: question.errors.length > 0 ? 400 : 200 })
  })
}

export default function FitPage({ loaderData: question }: Route.ComponentProps) {
  const { consoles, errors, answer } = question
  return (
    <SiteSheet current="What fits?" trail={[{ label: 'Boards', href: '/' }, { label: 'What fits?' }]}>
      <Title
        heading="What fits my console?"
        lead="Tell the console and its mainboard revision. The answer is what the boards’ maintainers claim, and why."
      />
      <Section number={1} heading="My console" id="question">
        {consoles.length === 0 ? (
          <Empty action={<ButtonLink href="/">To the boards</ButtonLink>}>No console has been described yet.</Empty>
        ) : (
          <Question question={question} />
        )}
        {errors.map(({ path, message }) => (
          <FieldMessage key={path}>{message}</FieldMessage>
        ))}
      </Section>
      {answer?.revision && <OneRevision answer={answer} revision={answer.revision} />}
      {answer && !answer.revision && <AllRevisions answer={answer} />}
      {answer && <BeforeYouStart />}
    </SiteSheet>
  )
}

type Question = Route.ComponentProps['loaderData']
type Answer = NonNullable<Question['answer']>

function Question({ question }: { question: Question }) {
  return (
    <>
      <ConsoleQuestion {...question} />
      <p className="small soft">
        The revision is printed on the mainboard:{' '}
        <TextLink href={question.console ? `/consoles/${question.console}#revisions` : '/consoles'}>
          where to look for it
        </TextLink>
        .
      </p>
    </>
  )
}

function OneRevision({ answer, revision }: { answer: Answer; revision: NonNullable<Answer['revision']> }) {
  const { consoleName, consoleSlug } = answer
  return (
    <Section number={2} heading={`For the ${consoleName} ${revision.code}`} id="answer">
      {revision.boards.length === 0 ? (
        <NoBoard />
      ) : (
        <Table
          number={1}
          caption="What fits stands first."
          columns={[
            {
              key: 'board',
              head: 'Board',
              isRowHead: true,
              cell: (board) => (
                <>
                  <TextLink href={`/boards/${board.slug}`}>{board.name}</TextLink>{' '}
                  {board.newest && <span className="soft font-normal">{board.newest}</span>}
                </>
              )
            },
            { key: 'claim', head: 'Claim', cell: (board) => <FitMark fit={board.claim} />, className: 'nw' },
            { key: 'reason', head: 'Why', cell: (board) => board.reason },
            { key: 'summary', head: 'What it does', label: '', className: 'long', cell: (board) => board.summary },
            { key: 'reports', head: 'Reports', isFigure: true, cell: (board) => board.reports }
          ]}
          rows={revision.boards}
          rowKey={(board) => board.slug}
          isFolded
        />
      )}
      <MarginNote beside="top">
        <p>
          <b>Is it really a {revision.code}?</b> {revision.recognise}
        </p>
        <p>
          <TextLink href={`/consoles/${consoleSlug}/${revision.code}`}>More on {revision.code}</TextLink>
        </p>
      </MarginNote>
    </Section>
  )
}

function AllRevisions({ answer }: { answer: Answer }) {
  return (
    <Section
      number={2}
      heading={`For the ${answer.consoleName}, by revision`}
      id="answer"
      margin={
        <p>
          <b>Find your revision first:</b> a board that fits one may harm the next.{' '}
          <TextLink href={`/consoles/${answer.consoleSlug}#revisions`}>How to tell them apart</TextLink>
        </p>
      }
    >
      {answer.boards.length === 0 ? (
        <NoBoard />
      ) : (
        answer.boards.map((board) => (
          <div key={board.slug}>
            <SubHeading>
              <TextLink href={`/boards/${board.slug}`}>{board.name}</TextLink>
            </SubHeading>
            <p className="mb-3">{board.summary}</p>
            <FitStrip
              cells={board.cells.map(({ code, claim, reason }) => ({
                code,
                fit: claim,
                reason,
                href: `/fit?console=${answer.consoleSlug}&revision=${code}`
              }))}
            />
          </div>
        ))
      )}
    </Section>
  )
}

const NoBoard = () => (
  <Empty
    action={<ButtonLink href="/boards/new">Name a board</ButtonLink>}
    harmless={
      <ButtonLink kind="outline" href="/">
        All boards
      </ButtonLink>
    }
  >
    No board is made for this console yet. If you have designed one, it goes here.
  </Empty>
)

function BeforeYouStart() {
  return (
    <Section number={3} heading="Before you order or solder" id="before">
      <Warning severity="caution" heading="Measure before you replace">
        A board cures the fault it is made for and no other. Establish the fault first; a wrong diagnosis is a common reason why a
        sound board changes nothing.
      </Warning>
      <Warning severity="caution" heading="Stored charge, heat, lead and lithium">
        <p>
          Consoles can hurt after the plug is out. Follow your local electrical rules and the maker’s service information, and
          leave what you are not sure of to somebody qualified. <TextLink href="/guides/safety">Safety</TextLink>
        </p>
      </Warning>
    </Section>
  )
}
