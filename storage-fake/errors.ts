/** HTTP status of each error code this server answers, as the S3 API's published list of error responses has them. */
const statuses = {
  AccessDenied: 403,
  AuthorizationHeaderMalformed: 400,
  AuthorizationQueryParametersError: 400,
  BadDigest: 400,
  BucketAlreadyOwnedByYou: 409,
  EntityTooLarge: 400,
  EntityTooSmall: 400,
  IllegalLocationConstraintException: 400,
  IncompleteBody: 400,
  InternalError: 500,
  InvalidAccessKeyId: 403,
  InvalidArgument: 400,
  InvalidBucketName: 400,
  InvalidChunkSizeError: 403,
  InvalidDigest: 400,
  InvalidPart: 400,
  InvalidPartOrder: 400,
  InvalidRange: 416,
  InvalidRequest: 400,
  InvalidToken: 400,
  InvalidURI: 400,
  KeyTooLongError: 400,
  MalformedTrailerError: 400,
  MalformedXML: 400,
  MaxMessageLengthExceeded: 400,
  MetadataTooLarge: 400,
  MethodNotAllowed: 405,
  MissingContentLength: 411,
  NoSuchBucket: 404,
  NoSuchKey: 404,
  NoSuchUpload: 404,
  NotImplemented: 501,
  OperationAborted: 409,
  PreconditionFailed: 412,
  RequestTimeTooSkewed: 403,
  RequestTimeout: 400,
  SignatureDoesNotMatch: 403,
  XAmzContentSHA256Mismatch: 400
} as const

export type ErrorCode = keyof typeof statuses

/** A refusal as the S3 API words it: an XML document with a code, a message and, for some codes, further elements. */
export class S3Error extends Error {
  readonly code: ErrorCode
  readonly status: number
  /** Further elements of the XML answer, by element name. */
  readonly details: Record<string, string>
  readonly headers: Record<string, string>

  constructor(code: ErrorCode, message: string, details: Record<string, string> = {}, headers: Record<string, string> = {}) {
    super(message)
    this.name = 'S3Error'
    this.code = code
    this.status = statuses[code]
    this.details = details
    this.headers = headers
  }
}
