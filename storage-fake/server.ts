import { randomBytes } from 'node:crypto'
import { createServer, type IncomingMessage, type ServerResponse } from 'node:http'
import type { AddressInfo, Socket } from 'node:net'
import { pipeline } from 'node:stream/promises'
import { authenticate, type Account } from './auth'
import { Buckets } from './buckets'
import type { Limits, Reply } from './call'
import { S3Error } from './errors'
import { route } from './route'
import { headerMap } from './signature'
import { parseQuery, splitPath, splitTarget } from './uri'
import { xmlDocument } from './xml'

export type StorageFakeOptions = Account & {
  /** Folder for the objects; made when absent. */
  dir: string
  /** Made at start when absent. */
  bucket?: string
  /** 0, the default, takes any free port. */
  port?: number
  /** Loopback by default. */
  host?: string
  limits?: Partial<Limits>
  /** A connection that is silent for so long is answered RequestTimeout and closed. */
  idleMs?: number
  /** The clock, for tests of expiry. */
  now?: () => Date
  /** Told of every fault of the server itself (answered InternalError). */
  onFault?: (error: unknown) => void
}

export type StorageFake = { url: string; close: () => Promise<void> }

const defaultLimits: Limits = { objectBytes: 1024 ** 3, documentBytes: 1024 ** 2, partBytes: 5 * 1024 ** 2 }
const headerBytes = 16 * 1024
/** After an early refusal so much of the body is still read and dropped, so that the client gets to see the answer. */
const drainBytes = 8 * 1024 ** 2

/** Starts the server; resolves when it listens. */
export async function startStorageFake(options: StorageFakeOptions): Promise<StorageFake> {
  const { host = '127.0.0.1', port = 0, idleMs = 60_000, onFault = (error: unknown) => console.error(error) } = options
  const buckets = new Buckets(options.dir)
  if (options.bucket !== undefined && !buckets.has(options.bucket)) buckets.create(options.bucket)
  const limits = { ...defaultLimits, ...options.limits }
  const active = new WeakMap<Socket, { request: IncomingMessage; response: ServerResponse }>()

  const serve = async (request: IncomingMessage, response: ServerResponse, isWaiting: boolean): Promise<void> => {
    active.set(request.socket, { request, response })
    try {
      await send(request, response, await answer(request, response, isWaiting))
    } catch (error) {
      const isGone = request.socket.destroyed || response.destroyed
      if (!isGone && !(error instanceof S3Error)) onFault(error)
      if (isGone || response.headersSent) response.destroy()
      else await send(request, response, errorReply(request, error))
    }
  }

  const answer = (request: IncomingMessage, response: ServerResponse, isWaiting: boolean): Promise<Reply> => {
    const now = (options.now ?? (() => new Date()))()
    const target = splitTarget(request.url ?? '')
    const { bucket: bucketName, key } = splitPath(target.path)
    const headers = headerMap(request.rawHeaders)
    const pairs = parseQuery(target.query)
    const auth = authenticate({ method: request.method ?? '', path: target.path, query: pairs, headers }, options, now)
    const query = new Map<string, string>()
    for (const [name, value] of pairs) if (!query.has(name)) query.set(name, value)
    const signedQuery = auth.isPresigned ? pairs.map(([name, value]) => [name.toLowerCase(), value] as const) : []
    const metadata = Object.fromEntries([...signedQuery, ...headers].filter(([name]) => name.startsWith('x-amz-meta-')))
    const header = (name: string) => headers.get(name)
    const amz = (name: string) => headers.get(name) ?? signedQuery.find(([other]) => other === name)?.[1]
    const invite = () => (isWaiting ? response.writeContinue() : undefined)
    const common = { request, auth, header, amz, invite, key, query, metadata, now, limits }
    return route({ ...common, method: request.method ?? '', bucketName, region: options.region }, buckets)
  }

  const handle = (isWaiting: boolean) => (request: IncomingMessage, response: ServerResponse) => {
    serve(request, response, isWaiting).catch((error: unknown) => {
      onFault(error)
      response.destroy()
    })
  }
  const server = createServer({ maxHeaderSize: headerBytes, requestTimeout: 600_000, headersTimeout: 20_000 }, handle(false))
  server.on('checkContinue', handle(true))
  server.setTimeout(idleMs, (socket) => {
    const current = active.get(socket)
    if (!current || current.response.headersSent) return void socket.destroy()
    const error = new S3Error(
      'RequestTimeout',
      'Your socket connection to the server was not read from or written to within the timeout period.'
    )
    send(current.request, current.response, errorReply(current.request, error)).then(() => socket.destroy(), onFault)
  })
  await new Promise<void>((resolve, reject) => {
    server.once('error', reject)
    server.listen(port, host, resolve)
  })
  const address = server.address() as AddressInfo
  return {
    url: `http://${address.family === 'IPv6' ? `[${address.address}]` : address.address}:${address.port}`,
    close: () =>
      new Promise((resolve, reject) => {
        server.close((error) => (error ? reject(error) : resolve()))
        server.closeAllConnections()
      })
  }
}

function errorReply(request: IncomingMessage, error: unknown): Reply {
  const known =
    error instanceof S3Error ? error : new S3Error('InternalError', 'We encountered an internal error. Please try again.')
  const body = xmlDocument(
    'Error',
    { Code: known.code, Message: known.message, Resource: request.url ?? '', ...known.details },
    false
  )
  return { status: known.status, headers: { 'content-type': 'application/xml', ...known.headers }, body }
}

async function send(request: IncomingMessage, response: ServerResponse, { status, headers = {}, body }: Reply): Promise<void> {
  const isRead = request.complete || request.readableEnded || !hasBody(request)
  response.writeHead(status, {
    server: 'storage-fake',
    'x-amz-request-id': randomBytes(8).toString('hex').toUpperCase(),
    ...(typeof body === 'string' ? { 'content-length': String(Buffer.byteLength(body)) } : {}),
    ...(isRead ? {} : { connection: 'close' }),
    ...headers
  })
  if (body === undefined || request.method === 'HEAD') response.end()
  else if (typeof body === 'string') response.end(body)
  else await pipeline(body, response)
  if (!isRead) drain(request)
}

const hasBody = (request: IncomingMessage): boolean =>
  request.headers['transfer-encoding'] !== undefined || Number(request.headers['content-length'] ?? 0) > 0

function drain(request: IncomingMessage): void {
  let left = drainBytes
  request.on('data', (piece: Buffer) => {
    left -= piece.length
    if (left < 0) request.destroy()
  })
  request.on('error', () => request.destroy())
  request.resume()
}
