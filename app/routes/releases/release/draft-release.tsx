import { DeleteDraft, PublishDraft } from './draft-publish'
import { DraftFindings } from './draft-findings'
import { DraftUpload } from './draft-upload'
import { BoardFigures, drawnFigures } from './board-figures'
import { hasViewer } from './board-viewer'
import { Layers } from './layers-part'
import { Facts } from './release-parts'
import { Parts, partsTables } from './parts-section'
import { WhatChangedSection } from './what-changed-section'
import { ButtonLink } from '~/components/button'
import { DoneLine } from '~/components/done-line'
import { Prose } from '~/components/prose'
import { Section } from '~/components/section'
import { SiteSheet } from '~/components/site-sheet'
import { ReleaseTag } from '~/components/tag'
import { Title } from '~/components/title'
import type { ReleasePage } from '~/domain/releases/release-page.server'
import { releasePath } from '~/domain/releases/release-path'
import type { FieldError } from '~/lib/domain-error'
import type { FormValues } from '~/lib/parse-form'

const upload = 'Upload the bundle: one zip with Gerber layers, drill files, bill of materials and placement.'

/** The next step, in one sentence. */
function leadOf({ bundle, refused, obstacles }: ReleasePage): string {
  const first = obstacles[0]?.kind
  if (first === 'stops')
    return 'Something keeps it from being published: read what the check found, mend the files and upload them again.'
  if (first === 'cautions') return 'Read what the check found, answer its cautions, then publish.'
  if (first === 'check-running') return 'The check is running.'
  if (refused) return 'The last file was refused. Read why, make the zip again and upload it.'
  if (!bundle) return upload
  return first === 'not-checked'
    ? 'Have the bundle checked again, then publish.'
    : 'Nothing stands in its way. Look it over, then publish.'
}

export type DraftReleaseProps = {
  page: ReleasePage
  maxBytes: number
  done: string | null
  /** What was done is about the findings, and is said there. */
  isAboutFindings: boolean
  errors: FieldError[]
  values: FormValues
}

/** A draft as its maintainers see it: upload, what was found, answers, publish. */
export function DraftRelease({ page, maxBytes, done, isAboutFindings, errors, values }: DraftReleaseProps) {
  const { board, release, bundle, refused } = page
  const hasFindings = bundle !== null || refused !== null
  const isSaidBelow = isAboutFindings && hasFindings
  const path = releasePath(board.slug, release.version)
  const of = (intent: string) => (values.intent === intent ? errors : [])
  return (
    <SiteSheet
      current="My bench"
      trail={[
        { label: 'Boards', href: '/' },
        { label: board.name, href: `/boards/${board.slug}` },
        { label: `Draft ${release.version}` }
      ]}
    >
      <Title
        tag={
          <ReleaseTag isHead board={board.name} version={release.version} state="draft" boardRevision={release.boardRevision} />
        }
        lead={leadOf(page)}
        actions={
          <>
            <ButtonLink href={`${path}/edit`} kind="outline">
              Edit details and notes
            </ButtonLink>
            <p className="small soft">
              Will be published as {release.willBe === 'trial' ? 'a trial: its version has a pre-release.' : 'a full release.'}
            </p>
          </>
        }
      >
        {done && !isSaidBelow && <DoneLine what={done} />}
      </Title>
      <Section
        number={1}
        heading="The bundle"
        margin={
          <p>
            <b>Uploading changes nothing for others.</b> The check reads every file, measures, compares and says what a board
            house would ask.
          </p>
        }
      >
        <DraftUpload page={page} path={path} maxBytes={maxBytes} refused={of('bundle')[0]?.message} errors={of('recheck')} />
      </Section>
      {hasFindings && <DraftFindings page={page} done={isSaidBelow ? done : null} errors={of('answers')} values={values} />}
      {bundle && page.files.length > 0 && (
        <>
          <Section number={3} heading="The board">
            <BoardFigures page={page} />
          </Section>
          <Section number={4} heading="Facts">
            <Facts page={page} number={1} />
          </Section>
          <Section number={5} heading="Layers">
            <Layers page={page} number={2} figure={drawnFigures(page) + 1} />
          </Section>
          <Section number={6} heading="Parts">
            <Parts page={page} number={3} />
          </Section>
          <WhatChangedSection
            page={page}
            number={7}
            figure={drawnFigures(page) + (hasViewer(page) ? 2 : 1)}
            table={3 + partsTables(page)}
          />
        </>
      )}
      <Section number={bundle && page.files.length > 0 ? 8 : hasFindings ? 3 : 2} heading="Notes">
        {release.notes ? (
          <Prose html={release.notes} />
        ) : (
          <p className="soft">None yet. Say what changed and what to look out for.</p>
        )}
      </Section>
      <Section number={bundle && page.files.length > 0 ? 9 : hasFindings ? 4 : 3} heading="Publish" id="publish">
        <PublishDraft page={page} errors={of('publish')} />
        <DeleteDraft errors={of('delete')} />
      </Section>
    </SiteSheet>
  )
}
