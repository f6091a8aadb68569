import { compareKeys, type Entry } from './bucket'
import { xmlReply, type Call, type Reply } from './call'
import { S3Error } from './errors'
import { encodeUri } from './uri'
import { xmlDocument } from './xml'

const largestPage = 1000

export type ListQuery = { prefix: string; delimiter: string; after: string; maxKeys: number }
export type ListPage = { entries: Entry[]; commonPrefixes: string[]; isTruncated: boolean; last: string }

/**
 * One page of a listing. `sorted` is ordered by UTF-8 bytes; `after` is a key, or a common prefix that was the last thing listed.
 * A common prefix counts as one of the `maxKeys`.
 */
export function listPage(sorted: readonly Entry[], { prefix, delimiter, after, maxKeys }: ListQuery): ListPage {
  const page: ListPage = { entries: [], commonPrefixes: [], isTruncated: false, last: '' }
  if (maxKeys === 0) return page
  const isSkippedPrefix =
    delimiter !== '' && after.endsWith(delimiter) && after.startsWith(prefix) && after.length > prefix.length
  const first = Math.max(
    indexWhere(sorted, (key) => compareKeys(key, after) > 0),
    indexWhere(sorted, (key) => compareKeys(key, prefix) >= 0)
  )
  for (let i = first; i < sorted.length; i++) {
    const entry = sorted[i]!
    if (!entry.key.startsWith(prefix)) break
    if (isSkippedPrefix && entry.key.startsWith(after)) continue
    const at = delimiter === '' ? -1 : entry.key.indexOf(delimiter, prefix.length)
    const common = at < 0 ? undefined : entry.key.slice(0, at + delimiter.length)
    if (common !== undefined && common === page.commonPrefixes.at(-1)) continue
    if (page.entries.length + page.commonPrefixes.length === maxKeys) {
      page.isTruncated = true
      break
    }
    if (common === undefined) page.entries.push(entry)
    else page.commonPrefixes.push(common)
    page.last = common ?? entry.key
  }
  return page
}

/** Index of the first entry whose key holds; all after it must hold as well. */
function indexWhere(sorted: readonly Entry[], holds: (key: string) => boolean): number {
  let [low, high] = [0, sorted.length]
  while (low < high) {
    const middle = (low + high) >> 1
    if (holds(sorted[middle]!.key)) high = middle
    else low = middle + 1
  }
  return low
}

/** GET of a bucket with `list-type=2`. */
export function listObjects({ bucket, query }: Call): Reply {
  if (query.get('list-type') !== '2')
    throw new S3Error('NotImplemented', 'Only version 2 of the listing (list-type=2) is implemented.')
  const encoding = query.get('encoding-type')
  if (encoding !== undefined && encoding !== 'url') throw invalid('encoding-type', 'Invalid Encoding Method specified in Request')
  const text = (key: string) => (encoding === 'url' ? encodeUri(key, true) : key)
  const maxText = query.get('max-keys') || String(largestPage)
  if (!/^\d{1,9}$/.test(maxText)) throw invalid('max-keys', 'Provided max-keys not an integer or within integer range')
  const maxKeys = Math.min(Number(maxText), largestPage)
  const token = query.get('continuation-token')
  const [prefix, delimiter, startAfter] = [
    query.get('prefix') ?? '',
    query.get('delimiter') ?? '',
    query.get('start-after') ?? ''
  ]
  const after = token === undefined ? startAfter : readToken(token)
  const page = listPage(bucket.entries(), { prefix, delimiter, after, maxKeys })
  return xmlReply(
    xmlDocument('ListBucketResult', {
      Name: bucket.name,
      Prefix: text(prefix),
      Delimiter: delimiter === '' ? undefined : text(delimiter),
      StartAfter: startAfter === '' ? undefined : text(startAfter),
      EncodingType: encoding,
      KeyCount: page.entries.length + page.commonPrefixes.length,
      MaxKeys: maxKeys,
      IsTruncated: page.isTruncated,
      ContinuationToken: token,
      NextContinuationToken: page.isTruncated ? writeToken(page.last) : undefined,
      Contents: page.entries.map((entry) => ({
        Key: text(entry.key),
        LastModified: entry.modifiedAt,
        ETag: `"${entry.etag}"`,
        Size: entry.bytes,
        StorageClass: 'STANDARD'
      })),
      CommonPrefixes: page.commonPrefixes.map((common) => ({ Prefix: text(common) }))
    })
  )
}

const invalid = (name: string, message: string) => new S3Error('InvalidArgument', message, { ArgumentName: name })

const writeToken = (last: string): string => Buffer.from(`1:${last}`).toString('base64url')

function readToken(token: string): string {
  const text = Buffer.from(token, 'base64url').toString('utf8')
  if (!text.startsWith('1:') || writeToken(text.slice(2)) !== token)
    throw invalid('continuation-token', 'The continuation token provided is incorrect')
  return text.slice(2)
}
