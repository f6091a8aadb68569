import { Form, useNavigation } from 'react-router'
import { Actions, Button } from '~/components/button'
import { ErrorSummary } from '~/components/error-summary'
import type { ReleasePage } from '~/domain/releases/release-page.server'
import type { FieldError } from '~/lib/domain-error'

/** What stands between a draft and everybody, and the one button. */
export function PublishDraft({ page, errors }: { page: ReleasePage; errors: FieldError[] }) {
  const { release, bundle, obstacles } = page
  const isBusy = useNavigation().formData?.get('intent') === 'publish'
  const isReady = obstacles.length === 0 && bundle !== null
  const [first, ...others] = obstacles
  const reason =
    isReady || !first ? undefined : others.length > 0 ? 'Not before that is done.' : <Obstacle {...first} page={page} />
  return (
    <>
      <ErrorSummary errors={errors} before="it can be published" />
      {isReady ? (
        <p>
          Everybody will see {release.version} as {release.willBe === 'trial' ? 'a trial' : 'released'} and can take its files. It
          never changes again: errors are mended by the next version, and it can only be withdrawn.
        </p>
      ) : (
        obstacles.length > 1 && (
          <>
            <p>Before it can be published:</p>
            <ul className="mt-2 list-disc pl-6">
              {obstacles.map((o) => (
                <li key={o.kind}>
                  <Obstacle {...o} page={page} />
                </li>
              ))}
            </ul>
          </>
        )
      )}
      <Form method="post" action="#publish">
        <input type="hidden" name="intent" value="publish" />
        <input type="hidden" name="bundle" value={bundle?.sha256 ?? ''} />
        <input type="hidden" name="updatedAt" value={release.updatedAt} />
        <Actions>
          <Button reason={reason} busy={isBusy ? 'Publishing' : undefined}>
            Publish {release.version}
          </Button>
        </Actions>
      </Form>
    </>
  )
}

/** What stands in the way, with the way to the first of it. */
function Obstacle({ kind, message, page }: ReleasePage['obstacles'][number] & { page: ReleasePage }) {
  const { findings } = page
  const stop = findings.findIndex((f) => f.severity === 'stop')
  const open = findings.find((f) => f.severity === 'caution' && (f.answer ?? '').trim() === '')
  return (
    <>
      {message} {kind === 'stops' && <a href={stop < 0 ? '#found' : `#f${stop + 1}`}>To the first</a>}
      {kind === 'cautions' && open && <a href={`#answer.${open.id}`}>To the first to answer</a>}
    </>
  )
}

export function DeleteDraft({ errors }: { errors: FieldError[] }) {
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
