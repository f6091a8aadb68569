import type { Readable } from 'node:stream'
import type { BodySource } from './body'
import type { Bucket } from './bucket'

export type Limits = {
  /** Largest object, and largest part. */
  objectBytes: number
  /** Largest XML document in a request. */
  documentBytes: number
  /** Smallest part of a multipart upload but its last. */
  partBytes: number
}

/** A verified request for something in a bucket that exists. */
export type Call = BodySource & {
  bucket: Bucket
  key: string
  /** First value of each query parameter. */
  query: ReadonlyMap<string, string>
  /** Names and values of all headers (or presigned query parameters) that start with `x-amz-meta-`. */
  metadata: Record<string, string>
  isHead: boolean
  now: Date
  limits: Limits
}

export type Reply = { status: number; headers?: Record<string, string>; body?: string | Readable }

export const xmlReply = (body: string, headers: Record<string, string> = {}): Reply => ({
  status: 200,
  headers: { 'content-type': 'application/xml', ...headers },
  body
})
