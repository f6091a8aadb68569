import { mkdtemp, rm } from 'node:fs/promises'
import { request as httpRequest, type IncomingHttpHeaders } from 'node:http'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { startStorageFake, type StorageFake, type StorageFakeOptions } from './server'
import { algorithm, canonicalRequest, headerMap, sha256Hex, sign, signingKey, stringToSign } from './signature'
import { parseQuery, splitTarget } from './uri'

export const testAccount = {
  accessKeyId: 'test-key',
  secretAccessKey: 'test-secret',
  region: 'test-region-1',
  bucket: 'test-bucket'
}

export type TestFake = StorageFake & { dir: string; stop: () => Promise<void> }

/** A storage server on a free port over a folder of its own, for one test file. */
export async function startTestFake(options: Partial<StorageFakeOptions> = {}): Promise<TestFake> {
  const dir = options.dir ?? (await mkdtemp(join(tmpdir(), 'storage-fake-')))
  const fake = await startStorageFake({ ...testAccount, dir, ...options })
  const stop = async () => {
    await fake.close()
    await rm(dir, { recursive: true, force: true })
  }
  return { ...fake, dir, stop }
}

export type Answer = { status: number; headers: IncomingHttpHeaders; body: Buffer; text: string; code: string | undefined }

/** Sends a request whose target goes out exactly as given, and reads the answer. `code` is that of an XML error. */
export function send(
  url: string,
  method: string,
  target: string,
  headers: Record<string, string> = {},
  body: Buffer | string = ''
): Promise<Answer> {
  const { hostname, port } = new URL(url)
  return new Promise((resolve, reject) => {
    const request = httpRequest({ hostname, port, method, path: target, headers, agent: false, timeout: 20_000 }, (response) => {
      const pieces: Buffer[] = []
      response.on('data', (piece: Buffer) => pieces.push(piece))
      response.on('error', reject)
      response.on('end', () => {
        const whole = Buffer.concat(pieces)
        const text = whole.toString('utf8')
        resolve({
          status: response.statusCode!,
          headers: response.headers,
          body: whole,
          text,
          code: /<Code>(\w+)<\/Code>/.exec(text)?.[1]
        })
      })
    })
    request.on('timeout', () => request.destroy(new Error('no answer')))
    request.on('error', reject)
    request.end(body)
  })
}

/**
 * The headers of a request signed by the test account (the signing functions are held to published examples in `signature.test.ts`).
 * `payload` is the payload hash to state.
 */
export function signedHeaders(
  url: string,
  method: string,
  target: string,
  headers: Record<string, string>,
  payload: string
): Record<string, string> {
  const at = new Date().toISOString().replace(/[-:]|\.\d{3}/g, '')
  const scope = `${at.slice(0, 8)}/${testAccount.region}/s3/aws4_request`
  const all: Record<string, string> = { ...headers, host: new URL(url).host, 'x-amz-date': at, 'x-amz-content-sha256': payload }
  const map = headerMap(Object.entries(all).flat())
  const names = [...map.keys()].sort()
  const { path, query } = splitTarget(target)
  const canonical = canonicalRequest({ method, path, query: parseQuery(query), headers: map }, names, payload)
  const key = signingKey(testAccount.secretAccessKey, at.slice(0, 8), testAccount.region, 's3')
  const signature = sign(key, stringToSign(at, scope, canonical))
  const authorization = `${algorithm} Credential=${testAccount.accessKeyId}/${scope}, SignedHeaders=${names.join(';')}, Signature=${signature}`
  return { ...all, authorization }
}

/** Signs and sends a request over its true payload, or over the payload hash given. */
export function sendSigned(
  url: string,
  method: string,
  target: string,
  headers: Record<string, string> = {},
  body: Buffer | string = '',
  payload: string = sha256Hex(body)
): Promise<Answer> {
  const sized = body.length > 0 || method === 'PUT' ? { 'content-length': String(Buffer.byteLength(body)), ...headers } : headers
  return send(url, method, target, signedHeaders(url, method, target, sized, payload), body)
}
