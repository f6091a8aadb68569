import { useEffect, useRef, useState, type FormEvent } from 'react'
import { aboutBytes, shareOfBytes } from '~/lib/byte-size'
import { Actions, Button } from './button'
import { FileField } from './file-field'
import { BundleChecking, type CheckStepName } from './bundle-checking'
import { UploadScale } from './progress'

type Running = { isReceived: boolean; step: string | null }
type Going =
  | { phase: 'idle'; error?: string }
  | { phase: 'sending'; sent: number; total: number }
  | ({ phase: 'checking' } & Running)
  | { phase: 'broken'; sent: number; total: number; error: string }

export type BundleUploadProps = {
  /** Where the plain form posts to, without scripts. */
  action: string
  /** Where a script sends the file, for an answer in JSON. */
  send: string
  /** Why the plain form was refused. */
  refused?: string
  /** Where the progress of the check is asked. */
  progress: string
  steps: CheckStepName[]
  maxBytes: number
  /** A bundle is there already and will be replaced. */
  isReplacing: boolean
  /** How far an upload or check has come that was begun elsewhere. */
  running: Running | null
  /** The page itself, to load again without scripts. */
  again: string
  /** The draft has changed: load it again. */
  onDone: () => void
}

const pollMs = 500

/**
 * Uploads a bundle: a plain form without scripts; with them a scale in bytes and percent, a way to stop, then the steps of the check as
 * they are done.
 */
export function BundleUpload({
  action,
  send: address,
  refused,
  progress,
  steps,
  maxBytes,
  isReplacing,
  running,
  again,
  onDone
}: BundleUploadProps) {
  const [going, setGoing] = useState<Going>(running ? { phase: 'checking', ...running } : { phase: 'idle', error: refused })
  const [file, setFile] = useState<File | null>(null)
  const request = useRef<XMLHttpRequest | null>(null)
  const box = useRef<HTMLDivElement>(null)
  const isUnderWay = going.phase === 'sending' || going.phase === 'checking'
  const isChecking = going.phase === 'checking'

  const error = going.phase === 'idle' || going.phase === 'broken' ? going.error : undefined

  useEffect(() => () => request.current?.abort(), [])
  /* Where the upload ended badly the way on is to choose again: the focus goes there, and reads out why. */
  useEffect(() => {
    if (error !== undefined) document.getElementById('bundle')?.focus()
  }, [error])
  /* The button that was pressed is gone: the focus goes to what stands in its place. */
  useEffect(() => {
    if (isUnderWay && request.current) box.current?.focus({ preventScroll: true })
  }, [isUnderWay])
  useEffect(() => {
    if (!isChecking) return
    const timer = setInterval(async () => {
      const answer = await fetch(progress, { headers: { Accept: 'application/json' } }).catch(() => null)
      if (!answer?.ok) return
      const { phase, step } = (await answer.json()) as { phase: string; step: string | null }
      if (phase !== 'none')
        setGoing((now) => (now.phase === 'checking' ? { phase: 'checking', isReceived: phase === 'checking', step } : now))
      else if (request.current === null) {
        setGoing({ phase: 'idle' })
        onDone()
      }
    }, pollMs)
    return () => clearInterval(timer)
  }, [isChecking, progress, onDone])

  function send(event: FormEvent<HTMLFormElement>) {
    event.preventDefault()
    if (request.current) return
    if (!file) return setGoing({ phase: 'idle', error: 'Choose the bundle first: one zip.' })
    if (file.size > maxBytes)
      return setGoing({
        phase: 'idle',
        error: `${file.name} has ${aboutBytes(file.size)}; at most ${Math.floor(maxBytes / 1024 / 1024)} MiB are taken. Leave out what is not needed to make the board.`
      })
    const xhr = new XMLHttpRequest()
    request.current = xhr
    let sent = 0
    const end = (next: Going) => {
      request.current = null
      setGoing(next)
    }
    setGoing({ phase: 'sending', sent: 0, total: file.size })
    xhr.upload.onprogress = ({ loaded }) => {
      sent = Math.min(loaded, file.size)
      setGoing({ phase: 'sending', sent, total: file.size })
    }
    xhr.upload.onload = () => setGoing({ phase: 'checking', isReceived: false, step: null })
    xhr.onload = () => {
      if (xhr.status >= 200 && xhr.status < 300) {
        end({ phase: 'idle' })
        setFile(null)
        onDone()
      } else end({ phase: 'idle', error: messageOf(xhr) })
    }
    xhr.onerror = () =>
      end({
        phase: 'broken',
        sent,
        total: file.size,
        error: 'The connection was lost. Send the file again; the draft is as it was.'
      })
    xhr.onabort = () => end({ phase: 'broken', sent, total: file.size, error: 'You stopped it. The draft is as it was.' })
    xhr.open('POST', address)
    xhr.setRequestHeader('Accept', 'application/json')
    const form = new FormData()
    form.set('bundle', file)
    xhr.send(form)
  }

  if (going.phase === 'sending' || going.phase === 'checking')
    return (
      <div className="going" tabIndex={-1} ref={box} role="group" aria-label="Upload and check">
        {going.phase === 'checking' ? (
          <BundleChecking isReceived={going.isReceived} step={going.step} steps={steps} again={again} />
        ) : (
          <>
            <UploadScale
              label={`Uploading ${file?.name ?? 'the bundle'}`}
              detail={shareOfBytes(going.sent, going.total)}
              share={going.total === 0 ? 1 : going.sent / going.total}
            />
            <Actions>
              <Button type="button" kind="outline" onClick={() => request.current?.abort()}>
                Stop the upload
              </Button>
            </Actions>
          </>
        )}
      </div>
    )
  return (
    <form method="post" action={action} encType="multipart/form-data" onSubmit={send} noValidate>
      {going.phase === 'broken' && (
        <UploadScale
          label={`Broken off at ${shareOfBytes(going.sent, going.total)}`}
          detail="nothing was kept"
          share={going.total === 0 ? 0 : going.sent / going.total}
        />
      )}
      <FileField
        name="bundle"
        label={file ? file.name : isReplacing ? 'Choose another bundle' : 'Choose the bundle'}
        hint={
          file
            ? `${aboutBytes(file.size)}; choose again to take another`
            : `one zip, at most ${Math.floor(maxBytes / 1024 / 1024)} MiB, or drop it here`
        }
        accept=".zip,application/zip"
        error={error}
        onChange={(event) => {
          setFile(event.currentTarget.files?.[0] ?? null)
          setGoing({ phase: 'idle' })
        }}
        required
      />
      <Actions>
        <Button
          kind={isReplacing ? 'outline' : 'solid'}
          note={isReplacing ? 'Takes the place of the bundle below, and is checked anew.' : undefined}
        >
          Upload and check
        </Button>
      </Actions>
    </form>
  )
}

function messageOf(xhr: XMLHttpRequest): string {
  try {
    const { detail } = JSON.parse(xhr.responseText) as { detail?: string }
    if (detail) return detail
  } catch {
    /* Not our own answer: something between here and the server spoke. */
  }
  return `The upload was not taken (answer ${xhr.status}). Try again in a minute; the draft is as it was.`
}
