import { receiveText, type BodySource } from './body'
import { checkLocation, type Buckets } from './buckets'
import type { Call, Reply } from './call'
import { S3Error } from './errors'
import { listObjects } from './list'
import { abortUpload, completeUpload, createUpload, listParts, uploadPart } from './multipart'
import { deleteObject, deleteObjects, getObject, putObject } from './objects'

/** Everything about a verified request but its bucket, which may not exist yet. */
export type Request = Omit<Call, 'bucket' | 'isHead'> & { method: string; bucketName: string; region: string }

const keyLimit = 1024

/** Query parameters that belong to each operation; any other one names a part of the S3 API that is not implemented. */
const objectParameters: Record<string, string[]> = {
  GET: [
    'response-content-type',
    'response-content-language',
    'response-expires',
    'response-cache-control',
    'response-content-disposition',
    'response-content-encoding'
  ],
  PUT: [],
  POST: [],
  DELETE: []
}
const bucketParameters: Record<string, string[]> = {
  GET: ['list-type', 'prefix', 'delimiter', 'max-keys', 'continuation-token', 'start-after', 'encoding-type', 'fetch-owner'],
  HEAD: [],
  PUT: [],
  POST: ['delete']
}
objectParameters.HEAD = objectParameters.GET!

const refusedHeaders = [
  'x-amz-copy-source',
  'x-amz-tagging',
  'x-amz-website-redirect-location',
  'x-amz-server-side-encryption',
  'x-amz-server-side-encryption-customer-algorithm',
  'x-amz-object-lock-mode',
  'x-amz-object-lock-legal-hold',
  'x-amz-write-offset-bytes'
]

const notImplemented = (details: Record<string, string>) =>
  new S3Error('NotImplemented', 'A header or query you provided implies functionality that is not implemented', details)

/** Finds and runs the operation a verified request asks for. */
export async function route(request: Request, buckets: Buckets): Promise<Reply> {
  for (const name of refusedHeaders) if (request.amz(name) !== undefined) throw notImplemented({ Header: name })
  if (request.bucketName === '') throw notImplemented({ Resource: '/' })
  return request.key === '' ? routeBucket(request, buckets) : routeObject(request, buckets)
}

async function routeBucket(request: Request, buckets: Buckets): Promise<Reply> {
  const { method, bucketName, region, query } = request
  checkParameters(query, bucketParameters[method])
  if (method === 'PUT') {
    const hasBody = Number(request.header('content-length') ?? 0) > 0 || request.header('transfer-encoding') !== undefined
    checkLocation(hasBody ? (await receiveText(request as BodySource, request.limits.documentBytes)).text : '', region)
    buckets.create(bucketName)
    return { status: 200, headers: { location: `/${bucketName}` } }
  }
  const call: Call = { ...request, bucket: buckets.get(bucketName), isHead: method === 'HEAD' }
  if (method === 'HEAD') return { status: 200, headers: { 'x-amz-bucket-region': region } }
  if (method === 'GET') return listObjects(call)
  if (query.has('delete')) return deleteObjects(call)
  throw notAllowed(method)
}

async function routeObject(request: Request, buckets: Buckets): Promise<Reply> {
  const { method, key, query } = request
  const size = Buffer.byteLength(key)
  if (size > keyLimit)
    throw new S3Error('KeyTooLongError', 'Your key is too long', { Size: String(size), MaxSizeAllowed: String(keyLimit) })
  const call: Call = { ...request, bucket: buckets.get(request.bucketName), isHead: method === 'HEAD' }
  if (query.has('uploadId')) {
    checkParameters(query, ['uploadId', 'partNumber', 'max-parts', 'part-number-marker'])
    if (method === 'PUT') return uploadPart(call)
    if (method === 'POST') return completeUpload(call)
    if (method === 'DELETE') return abortUpload(call)
    if (method === 'GET') return listParts(call)
    throw notAllowed(method)
  }
  if (method === 'POST' && query.has('uploads')) return createUpload(call)
  checkParameters(query, objectParameters[method])
  if (method === 'GET' || method === 'HEAD') return getObject(call)
  if (method === 'PUT') return putObject(call)
  if (method === 'DELETE') return deleteObject(call)
  throw notAllowed(method)
}

const notAllowed = (method: string) =>
  new S3Error('MethodNotAllowed', 'The specified method is not allowed against this resource.', { Method: method })

function checkParameters(query: ReadonlyMap<string, string>, allowed: string[] | undefined): void {
  for (const name of query.keys()) {
    if (name === 'x-id' || /^x-amz-/i.test(name) || allowed?.includes(name)) continue
    throw notImplemented({ Parameter: name })
  }
}
