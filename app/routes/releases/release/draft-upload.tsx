import { useCallback } from 'react'
import { Form, useNavigate, useRevalidator } from 'react-router'
import { BundleUpload } from '~/components/bundle-upload'
import { Actions, Button } from '~/components/button'
import { Checksum } from '~/components/checksum'
import { Definitions } from '~/components/definition'
import { ErrorSummary } from '~/components/error-summary'
import { Warning } from '~/components/warning'
import { checkStepNames, checkSteps } from '~/domain/bundle/bundle-check.types'
import type { ReleasePage } from '~/domain/releases/release-page.server'
import { exactBytes } from '~/lib/byte-size'
import type { FieldError } from '~/lib/domain-error'

const steps = checkSteps.map((step) => ({ step, name: checkStepNames[step] }))

export type DraftUploadProps = {
  page: ReleasePage
  path: string
  maxBytes: number
  /** Why the bundle was not taken. */
  refused: string | undefined
  /** Why it could not be checked again. */
  errors: FieldError[]
}

/** The bundle of a draft: the upload, what lies there, and the check once more where it was cut short. */
export function DraftUpload({ page, path, maxBytes, refused, errors }: DraftUploadProps) {
  const { bundle, refused: refusedFile, checkState, run } = page
  const { revalidate } = useRevalidator()
  const navigate = useNavigate()
  const showFound = useCallback(async () => {
    await navigate(`${path}?done=checked#found`, { replace: true })
    await revalidate()
  }, [navigate, path, revalidate])
  return (
    <>
      <BundleUpload
        action={`${path}#s1`}
        send={`${path}/bundle`}
        refused={refused}
        progress={`${path}/check`}
        steps={steps}
        maxBytes={maxBytes}
        isReplacing={bundle !== null}
        again={path}
        running={run && { isReceived: run.phase === 'checking', step: run.step }}
        onDone={showFound}
      />
      <ErrorSummary errors={errors} before="it can be checked" />
      {refusedFile && !run && (
        <Warning severity="stop" heading="The file was refused">
          <p>
            {refusedFile.sentAs}, {exactBytes(refusedFile.bytes)}, could not be taken. Nothing of it is kept, and the draft has no
            bundle until you upload another file. <a href="#found">What is wrong with it</a>
          </p>
        </Warning>
      )}
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
            <p>
              {checkState === 'interrupted'
                ? 'Our server restarted while it ran. The bundle is kept; have it checked again.'
                : 'The declared details changed since the last check.'}
            </p>
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
