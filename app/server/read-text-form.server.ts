import { once } from 'node:events'
import { Readable } from 'node:stream'
import type { ReadableStream as NodeReadableStream } from 'node:stream/web'
import busboy from 'busboy'
import { DomainError } from '~/lib/domain-error'
import { formValues, type FormValues } from '~/lib/parse-form'
import { readForm } from './read-form.server'
import { isFileForm, linger } from './receive-file.server'

/** What a form brought: its fields as entered, and the bytes of its one file; null when none was chosen. */
export type TextForm = { values: FormValues; file: Uint8Array<ArrayBuffer> | null }

export type TextFormLimits = { fileBytes: number; fieldBytes: number }

const mib = 1024 * 1024
const slackBytes = 64 * 1024
const sizeText = (bytes: number) => `${Math.floor(bytes / mib)} MiB`

/**
 * Reads a form with one long text, pasted or as a file, into memory and nowhere else; what lies past the limits is not kept. `values` is filled while
 * reading, so that it holds what came even when this throws.
 * @param field name of the file field
 * @throws DomainError `too-large`, `invalid` (broken off), with the path of the field that is at fault
 */
export async function readTextForm(
  request: Request,
  field: string,
  limits: TextFormLimits,
  values: FormValues
): Promise<TextForm> {
  if (!isFileForm(request.headers.get('Content-Type')) || request.body === null) {
    Object.assign(values, formValues(await readForm(request)))
    return { values, file: null }
  }
  const source = Readable.fromWeb(request.body as unknown as NodeReadableStream)
  try {
    const most = limits.fileBytes + limits.fieldBytes + slackBytes
    if (Number(request.headers.get('Content-Length') ?? 0) > most) throw fileTooLarge(field, limits)
    return { values, file: await take(source, request.headers, field, limits, most, values) }
  } catch (error) {
    linger(source)
    throw error
  }
}

const fileTooLarge = (field: string, { fileBytes }: TextFormLimits) => {
  const message = `The file is too large: at most ${sizeText(fileBytes)} are taken.`
  return new DomainError('too-large', message, [{ path: field, message }])
}

async function take(
  source: Readable,
  headers: Headers,
  field: string,
  limits: TextFormLimits,
  most: number,
  values: FormValues
): Promise<Uint8Array<ArrayBuffer> | null> {
  const parser = parserFor(headers, limits)
  const chunks: Uint8Array[] = []
  let refused = null as DomainError | null
  const stop = new AbortController()
  parser.on('error', (error) => stop.abort(error))
  parser.on('field', (name, value, { valueTruncated }) => {
    values[name] = value
    if (!valueTruncated) return
    delete values[name]
    const message = `This text is too long to paste: at most ${sizeText(limits.fieldBytes)}. Choose it as a file.`
    refused ??= new DomainError('too-large', message, [{ path: name, message }])
  })
  parser.on('file', (name, stream) => {
    stream.on('error', (error) => stop.abort(error))
    if (name !== field) return void stream.resume()
    stream.on('data', (chunk: Uint8Array) => void chunks.push(chunk))
    stream.on('limit', () => {
      chunks.length = 0
      refused ??= fileTooLarge(field, limits)
    })
  })
  let seen = 0
  try {
    for await (const piece of source.iterator({ destroyOnReturn: false })) {
      stop.signal.throwIfAborted()
      seen += (piece as Uint8Array).length
      if (seen > most) throw fileTooLarge(field, limits)
      if (!parser.write(piece)) await once(parser, 'drain', { signal: stop.signal })
    }
    const closed = once(parser, 'close', { signal: stop.signal })
    parser.end()
    await closed
  } catch (error) {
    parser.destroy()
    if (error instanceof DomainError) throw error
    throw new DomainError('invalid', 'The form did not come whole. Send it again.')
  }
  if (refused) throw refused
  return chunks.length === 0 ? null : joined(chunks)
}

function parserFor(headers: Headers, { fileBytes, fieldBytes }: TextFormLimits): busboy.Busboy {
  try {
    return busboy({
      headers: Object.fromEntries(headers) as { 'content-type': string },
      limits: { files: 1, fileSize: fileBytes + 1, fields: 20, fieldSize: fieldBytes + 1, parts: 24, headerPairs: 20 },
      defParamCharset: 'utf8'
    })
  } catch {
    throw new DomainError('invalid', 'The form cannot be read. Open the page and send it from there.')
  }
}

function joined(chunks: Uint8Array[]): Uint8Array<ArrayBuffer> {
  const whole = new Uint8Array(chunks.reduce((sum, chunk) => sum + chunk.length, 0))
  let at = 0
  for (const chunk of chunks) {
    whole.set(chunk, at)
    at += chunk.length
  }
  return whole
}
