import { BoardFigures, drawnFigures } from './board-figures'
import { hasViewer } from './board-viewer'
import { FindingsList } from './findings-list'
import { Layers } from './layers-part'
import { Facts, foundInWords } from './release-parts'
import { Parts, partsTables } from './parts-section'
import { TakeFiles } from './take-files'
import { changeFigures, WhatChangedSection } from './what-changed-section'
import { ButtonLink } from '~/components/button'
import { DoneLine } from '~/components/done-line'
import { FitStrip } from '~/components/fit-strip'
import { IndexLine } from '~/components/index-line'
import { Prose } from '~/components/prose'
import { ReleaseLine } from '~/components/release-line'
import { LastingWords, type LastingWordsProps } from '~/components/lasting-words'
import { Section } from '~/components/section'
import { NoteSign } from '~/components/signs'
import { SiteSheet } from '~/components/site-sheet'
import { ReleaseTag } from '~/components/tag'
import { TextLink } from '~/components/text-link'
import { Title } from '~/components/title'
import { Warning } from '~/components/warning'
import type { ReleasePage } from '~/domain/releases/release-page.server'
import { releasePath } from '~/domain/releases/release-path'
import { aboutBytes } from '~/lib/byte-size'

export type PublishedReleaseProps = {
  page: ReleasePage
  lasting: LastingWordsProps['lasting']
  today: string
  done: string | null
}

/** A published release as everybody sees it. */
export function PublishedRelease({ page, lasting, today, done }: PublishedReleaseProps) {
  const { board, release, bundle, findings } = page
  return (
    <SiteSheet
      current="Boards"
      trail={[
        { label: 'Boards', href: '/' },
        { label: board.name, href: `/boards/${board.slug}` },
        { label: `Release ${release.version}` }
      ]}
      foot={`Release ${release.version} · board revision ${release.boardRevision} · as of ${today}`}
    >
      <Title
        tag={
          <ReleaseTag
            isHead
            board={board.name}
            version={release.version}
            state={release.state}
            on={(release.state === 'withdrawn' ? release.withdrawnOn : release.publishedOn) ?? undefined}
            releasedOn={release.state === 'withdrawn' ? (release.publishedOn ?? undefined) : undefined}
            boardRevision={release.boardRevision}
          />
        }
        lead={
          release.state === 'trial' ? `${board.summary} A trial: meant to be tried out, not to be made in number.` : board.summary
        }
        actions={
          <>
            <ButtonLink href="#s3" kind={release.state === 'withdrawn' ? 'outline' : 'solid'}>
              {release.state === 'withdrawn' ? 'Take the files all the same' : 'Take the files'}
            </ButtonLink>
            <ButtonLink href={`/report?board=${board.slug}&release=${encodeURIComponent(release.version)}`} kind="outline">
              File a report
            </ButtonLink>
            <p className="small soft">
              zip, {aboutBytes(bundle?.bytes ?? 0)}, {page.files.length} files, {board.licence}. Cautions to read first:{' '}
              <a href="#s3">section 3</a>.
            </p>
          </>
        }
      >
        {done && <DoneLine what={done} />}
        {release.state === 'withdrawn' && (
          <Warning severity="caution" heading="Withdrawn by its maintainer">
            <p className="whitespace-pre-line">{release.withdrawnReason}</p>
            <p>The files stay here for those who have this release.</p>
          </Warning>
        )}
        {page.newer && (
          <p className="newer">
            <NoteSign size={20} />
            <span>
              {page.newer.isSameRevision ? 'A later release of this board revision exists: ' : 'A later release exists: '}
              <TextLink href={releasePath(board.slug, page.newer.version)}>{page.newer.version}</TextLink>.
            </span>
          </p>
        )}
        {page.rights.canWithdraw && (
          <p className="small mt-4">
            <TextLink href={`${releasePath(board.slug, release.version)}/withdraw`}>Withdraw {release.version}</TextLink>
            <span className="soft"> if nobody should make it any more.</span>
          </p>
        )}
      </Title>
      <ReleaseLine board={board.name} releases={page.line} shown={release.version} today={today} />
      <IndexLine
        entries={['Board', 'Fit', 'Files', 'Facts', 'Findings', 'Layers', 'Parts', 'Changes', 'Notes', 'How long it lasts'].map(
          (word, i) => ({
            number: i + 1,
            word
          })
        )}
      />
      <Section number={1} heading="The board">
        <BoardFigures page={page} />
      </Section>
      <Section
        number={2}
        heading="What it fits"
        margin={
          <p>
            <b>The maintainer’s claim,</b> per mainboard revision of the {board.consoleName}.{' '}
            <TextLink href={`/consoles/${board.consoleSlug}`}>Where the revision is printed</TextLink>
          </p>
        }
      >
        <FitStrip cells={page.fit.map((f) => ({ code: f.code, fit: f.claim, reason: f.reason || undefined }))} />
      </Section>
      <Section number={3} heading="Take the files">
        <TakeFiles page={page} />
      </Section>
      <Section
        number={4}
        heading="Facts"
        margin={
          <>
            <p>
              <b>=</b> means that the files say what the maintainer says. A difference becomes a finding.
            </p>
            <p>
              <b>Thickness, copper weight and finish</b> are ordered, not drawn: a file cannot show them. Ask the board house.
            </p>
          </>
        }
      >
        <Facts page={page} number={1} />
        {release.orderNote && (
          <p className="mt-4 whitespace-pre-line">
            <b>For whoever makes it:</b> {release.orderNote}
          </p>
        )}
      </Section>
      <Section number={5} heading="Findings" id="s5">
        <p id="found">The bundle check raised {foundInWords(findings)}.</p>
        <FindingsList page={page} />
      </Section>
      <Section number={6} heading="Layers">
        <Layers page={page} number={2} figure={drawnFigures(page) + 1} />
      </Section>
      <Section number={7} heading="Parts">
        <Parts page={page} number={3} />
      </Section>
      <WhatChangedSection
        page={page}
        number={8}
        figure={drawnFigures(page) + (hasViewer(page) ? 2 : 1)}
        table={3 + partsTables(page)}
      />
      <Section number={9} heading="Notes">
        {release.notes ? <Prose html={release.notes} /> : <p className="soft">The maintainer wrote none.</p>}
      </Section>
      <Section number={10} heading="How long it lasts">
        <LastingWords
          lasting={lasting}
          name={`${board.name} ${release.version}`}
          figure={drawnFigures(page) + changeFigures(page) + (hasViewer(page) ? 2 : 1)}
          href={`/boards/${board.slug}/reliability?release=${encodeURIComponent(release.version)}`}
          link="Reliability by console revision"
        />
      </Section>
    </SiteSheet>
  )
}
