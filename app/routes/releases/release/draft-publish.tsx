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
  const reason = isReady || !first ? undefined : others.length > 0 ? 'Not before that is done.' : <Obstacle {...first} />
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
                  <Obstacle {...o} />
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

function Obstacle({ kind, message }: ReleasePage['obstacles'][number]) {
  return (
    <>
      {message} {(kind === 'stops' || kind === 'cautions') && <a href="#found">See section 2</a>}
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
