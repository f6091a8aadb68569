import { request } from 'node:http'

export type RawAnswer = { status: number; text: string; headers: Record<string, string | string[] | undefined> }

/** A request whose target and headers, Host among them, go out as they stand, which `fetch` would not do. */
export function rawRequest(
  origin: string,
  {
    method = 'GET',
    path,
    headers = {},
    body = ''
  }: { method?: string; path: string; headers?: Record<string, string>; body?: string }
): Promise<RawAnswer> {
  const { hostname, port } = new URL(origin)
  return new Promise((resolve, reject) => {
    const length = body === '' ? {} : { 'Content-Length': String(Buffer.byteLength(body)) }
    const out = request({ hostname, port, method, path, headers: { ...length, ...headers }, agent: false }, (answer) => {
      let text = ''
      answer.setEncoding('utf8').on('data', (part: string) => (text += part))
      answer.on('end', () => resolve({ status: answer.statusCode!, text, headers: answer.headers }))
      answer.on('error', reject)
    })
    out.on('error', reject)
    out.end(body)
  })
}
