import { useCallback } from 'react'
import { Form, useNavigate, useNavigation, useRevalidator } from 'react-router'
import { BoardFigures, Facts, FindingEntry, foundInWords, Layers } from './release-parts'
import { BundleUpload } from '~/components/bundle-upload'
import { Actions, Button, ButtonLink } from '~/components/button'
import { Checksum } from '~/components/checksum'
import { Definitions } from '~/components/definition'
import { DoneLine } from '~/components/done-line'
import { ErrorSummary } from '~/components/error-summary'
import { TextArea } from '~/components/field'
import { Prose } from '~/components/prose'
import { Section } from '~/components/section'
import { SiteSheet } from '~/components/site-sheet'
import { ReleaseTag } from '~/components/tag'
import { Title } from '~/components/title'
import { Warning } from '~/components/warning'
import { checkStepNames, checkSteps } from '~/domain/bundle/bundle-check.types'
import type { ReleasePage } from '~/domain/releases/release-page.server'
import { releasePath } from '~/domain/releases/release-path'
import type { FieldError } from '~/lib/domain-error'
import type { FormValues } from '~/lib/parse-form'
import { exactBytes } from '~/lib/byte-size'

export type DraftReleaseProps = {
  page: ReleasePage
  maxBytes: number
  done: string | null
  errors: FieldError[]
  values: FormValues
}

/** A draft as its maintainers see it: upload, what was found, answers, publish. */
export function DraftRelease({ page, maxBytes, done, errors, values }: DraftReleaseProps) {
  const { board, release, bundle } = page
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
        lead={
          bundle
            ? 'Read what the check found, answer its cautions, then publish.'
            : 'Upload the bundle: one zip with Gerber layers, drill files, bill of materials and placement.'
        }
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
        {done && <DoneLine what={done} />}
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
        <Upload page={page} path={path} maxBytes={maxBytes} errors={of('recheck')} />
      </Section>
      {bundle && <Found page={page} errors={of('answers')} values={values} />}
      {bundle && page.files.length > 0 && (
        <>
          <Section number={3} heading="The board">
            <BoardFigures page={page} />
          </Section>
          <Section number={4} heading="Facts">
            <Facts page={page} number={1} />
          </Section>
          <Section number={5} heading="Layers">
            <Layers page={page} number={2} />
          </Section>
        </>
      )}
      <Section number={bundle && page.files.length > 0 ? 6 : bundle ? 3 : 2} heading="Notes">
        {release.notes ? (
          <Prose html={release.notes} />
        ) : (
          <p className="soft">None yet. Say what changed and what to look out for.</p>
        )}
      </Section>
      <Section number={bundle && page.files.length > 0 ? 7 : bundle ? 4 : 3} heading="Publish" id="publish">
        <Publish page={page} errors={of('publish')} />
        <Delete errors={of('delete')} />
      </Section>
    </SiteSheet>
  )
}

const steps = checkSteps.map((step) => ({ step, name: checkStepNames[step] }))

function Upload({ page, path, maxBytes, errors }: { page: ReleasePage; path: string; maxBytes: number; errors: FieldError[] }) {
  const { bundle, checkState } = page
  const { revalidate } = useRevalidator()
  const navigate = useNavigate()
  const showFound = useCallback(async () => {
    await navigate(`${path}?done=checked#found`, { replace: true })
    await revalidate()
  }, [navigate, path, revalidate])
  return (
    <>
      <BundleUpload
        action={`${path}/bundle`}
        progress={`${path}/check`}
        steps={steps}
        maxBytes={maxBytes}
        isReplacing={bundle !== null}
        isRunning={checkState === 'running'}
        onDone={showFound}
      />
      <ErrorSummary errors={errors} before="it can be checked" />
      {bundle && (
        <div className="mt-6">
          <Definitions
            items={[
              { label: 'Sent as', value: bundle.sentAs },
              { label: 'Size', value: `${exactBytes(bundle.bytes)}, ${page.files.length} files` },
              { label: 'SHA-256', value: <Checksum sha256={bundle.sha256} /> }
            ]}
          />
          <p className="mt-2">
            <a href={`${path}/bundle`} download={bundle.fileName}>
              Download it
            </a>
          </p>
        </div>
      )}
      {bundle && (checkState === 'interrupted' || checkState === 'none') && (
        <>
          <Warning severity="note" heading={checkState === 'interrupted' ? 'The check was cut short' : 'To be checked again'}>
            {checkState === 'interrupted'
              ? 'Our server restarted while it ran. The bundle is kept; have it checked again.'
              : 'The declared details changed since the last check.'}
          </Warning>
          <Form method="post">
            <input type="hidden" name="intent" value="recheck" />
            <Actions>
              <Button kind="outline">Check the bundle again</Button>
            </Actions>
          </Form>
        </>
      )}
    </>
  )
}

function Found({ page, errors, values }: { page: ReleasePage; errors: FieldError[]; values: FormValues }) {
  const { findings } = page
  const hasCautions = findings.some((f) => f.severity === 'caution')
  const isBusy = useNavigation().formData?.get('intent') === 'answers'
  const error = (id: string) => errors.find((e) => e.path === `answer.${id}`)?.message
  return (
    <Section
      number={2}
      heading="What the check found"
      id="found"
      margin={
        <>
          <p>
            <b>A stop</b> keeps a release from being published. <b>A caution</b> must be answered first. <b>A note</b> wants
            nothing.
          </p>
          <p>Your answers stand under the findings on the release page.</p>
        </>
      }
    >
      <p role="status">The bundle check raised {foundInWords(findings)}.</p>
      <ErrorSummary errors={errors} before="the answers can be saved" />
      {findings.map((f, i) => (
        <FindingEntry key={f.id} finding={f} place={i + 1} isDraft>
          {f.severity === 'caution' && (
            <TextArea
              form="answers"
              name={`answer.${f.id}`}
              label="Your answer"
              hint={
                f.answer
                  ? 'Answered. You can still change it.'
                  : 'A caution must be answered before the release can be published.'
              }
              rows={2}
              maxLength={2000}
              defaultValue={values[`answer.${f.id}`] ?? f.answer ?? ''}
              error={error(f.id)}
              isLong
            />
          )}
        </FindingEntry>
      ))}
      {hasCautions && (
        <Form method="post" action="#found" id="answers" className="mt-6" noValidate>
          <input type="hidden" name="intent" value="answers" />
          <Actions>
            <Button kind="outline" busy={isBusy ? 'Saving' : undefined}>
              Save the answers
            </Button>
          </Actions>
        </Form>
      )}
    </Section>
  )
}

function Publish({ page, errors }: { page: ReleasePage; errors: FieldError[] }) {
  const { release, bundle, obstacles } = page
  const isBusy = useNavigation().formData?.get('intent') === 'publish'
  const isReady = obstacles.length === 0 && bundle !== null
  return (
    <>
      <ErrorSummary errors={errors} before="it can be published" />
      {isReady ? (
        <p>
          Everybody will see {release.version} as {release.willBe === 'trial' ? 'a trial' : 'released'} and can take its files. It
          never changes again: errors are mended by the next version, and it can only be withdrawn.
        </p>
      ) : (
        <>
          <p>Before it can be published:</p>
          <ul className="mt-2 list-disc pl-6">
            {obstacles.map((o) => (
              <li key={o.kind}>
                {o.message} {(o.kind === 'stops' || o.kind === 'cautions') && <a href="#found">See section 2</a>}
              </li>
            ))}
          </ul>
        </>
      )}
      <Form method="post" action="#publish">
        <input type="hidden" name="intent" value="publish" />
        <input type="hidden" name="bundle" value={bundle?.sha256 ?? ''} />
        <input type="hidden" name="updatedAt" value={release.updatedAt} />
        <Actions>
          <Button reason={isReady ? undefined : obstacles[0]?.message} busy={isBusy ? 'Publishing' : undefined}>
            Publish {release.version}
          </Button>
        </Actions>
      </Form>
    </>
  )
}

function Delete({ errors }: { errors: FieldError[] }) {
  return (
    <Form method="post" className="mt-8">
      <ErrorSummary errors={errors} before="it can be deleted" />
      <input type="hidden" name="intent" value="delete" />
      <Actions>
        <Button
          kind="destructive"
          note="The draft, its answers and its bundle are gone for good. Published releases are not touched."
        >
          Delete this draft
        </Button>
      </Actions>
    </Form>
  )
}
