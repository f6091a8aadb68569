import { S3Error } from './errors'
import {
  algorithm,
  canonicalRequest,
  isSameSignature,
  sign,
  signingKey,
  stringToSign,
  unsignedPayload,
  type SignedParts
} from './signature'

export type Account = { accessKeyId: string; secretAccessKey: string; region: string }

/** What later steps need of a verified request: how the body is covered, and the start of the chain of chunk signatures. */
export type Authenticated = {
  /** Value of `x-amz-content-sha256`: a hash, UNSIGNED-PAYLOAD or a STREAMING-… form. */
  payload: string
  isPresigned: boolean
  chain: { key: Buffer; at: string; scope: string; seed: string }
}

const skewMs = 15 * 60_000
const longestPresignSeconds = 7 * 86_400
const service = 's3'

type Claim = {
  credential: string
  signedHeaders: string[]
  signature: string
  at: string
  payload: string
  malformed: (text: string) => S3Error
}

/**
 * Verifies Signature Version 4 of a request, in its Authorization header or in its query.
 * Throws the S3Error a real server would answer; `now` is the server's clock.
 */
export function authenticate(parts: SignedParts, account: Account, now: Date): Authenticated {
  const authorization = parts.headers.get('authorization')
  const inQuery = parts.query.some(
    ([name]) => name === 'X-Amz-Algorithm' || name === 'X-Amz-Signature' || name === 'X-Amz-Credential'
  )
  if (authorization !== undefined && inQuery) {
    throw new S3Error(
      'InvalidArgument',
      'Only one auth mechanism allowed; only the X-Amz-Algorithm query parameter or the Authorization header should be specified'
    )
  }
  if (authorization === undefined && !inQuery) throw new S3Error('AccessDenied', 'Access Denied')
  if (parts.headers.has('x-amz-security-token') || parts.query.some(([name]) => name.toLowerCase() === 'x-amz-security-token')) {
    throw new S3Error('InvalidToken', 'The provided token is malformed or otherwise invalid.')
  }
  const claim = inQuery ? queryClaim(parts, now) : headerClaim(parts, authorization!, now)
  const [accessKeyId, day, region, named, end, ...rest] = claim.credential.split('/')
  if (rest.length > 0 || end !== 'aws4_request' || !accessKeyId) {
    throw claim.malformed('The credential is malformed; expecting "<key>/YYYYMMDD/REGION/SERVICE/aws4_request".')
  }
  if (named !== service) throw claim.malformed(`The credential names the service "${named}"; expecting "${service}".`)
  if (day !== claim.at.slice(0, 8))
    throw claim.malformed(`The credential's date "${day}" is not that of the request, "${claim.at}".`)
  if (region !== account.region) throw wrongRegion(claim, region ?? '', account.region)
  if (accessKeyId !== account.accessKeyId) {
    throw new S3Error('InvalidAccessKeyId', 'The access key ID you provided does not exist in our records.', {
      AWSAccessKeyId: accessKeyId
    })
  }
  checkSignedHeaders(parts, claim)

  const scope = `${day}/${region}/${service}/aws4_request`
  const key = signingKey(account.secretAccessKey, day!, region, service)
  const unsignedQuery = inQuery ? parts.query.filter(([name]) => name !== 'X-Amz-Signature') : parts.query
  const canonical = canonicalRequest({ ...parts, query: unsignedQuery }, claim.signedHeaders, claim.payload)
  const text = stringToSign(claim.at, scope, canonical)
  if (!isSameSignature(sign(key, text), claim.signature)) {
    throw new S3Error(
      'SignatureDoesNotMatch',
      'The request signature we calculated does not match the signature you provided. Check your key and signing method.',
      {
        AWSAccessKeyId: accessKeyId,
        SignatureProvided: claim.signature,
        StringToSign: text,
        CanonicalRequest: canonical
      }
    )
  }
  return { payload: claim.payload, isPresigned: inQuery, chain: { key, at: claim.at, scope, seed: claim.signature } }
}

function wrongRegion(claim: Claim, region: string, expected: string): S3Error {
  const error = claim.malformed(`the region '${region}' is wrong; expecting '${expected}'`)
  return new S3Error(error.code, error.message, { Region: expected })
}

function checkSignedHeaders(parts: SignedParts, claim: Claim): void {
  if (!claim.signedHeaders.includes('host')) throw claim.malformed('The signed headers must name "host".')
  if ([...claim.signedHeaders].sort().join() !== claim.signedHeaders.join())
    throw claim.malformed('The signed headers must be sorted.')
  const missing = [...parts.headers.keys()].filter((name) => name.startsWith('x-amz-') && !claim.signedHeaders.includes(name))
  if (missing.length > 0) {
    throw new S3Error('AccessDenied', 'There were headers present in the request which were not signed', {
      HeadersNotSigned: missing.join(', ')
    })
  }
}

function headerClaim(parts: SignedParts, authorization: string, now: Date): Claim {
  const malformed = (text: string) =>
    new S3Error('AuthorizationHeaderMalformed', `The authorization header is malformed; ${text}`)
  const [scheme, ...rest] = authorization.split(' ')
  if (scheme === 'AWS')
    throw new S3Error(
      'InvalidRequest',
      `The authorization mechanism you have provided is not supported. Please use ${algorithm}.`
    )
  if (scheme !== algorithm)
    throw new S3Error('InvalidArgument', 'Unsupported Authorization Type', { ArgumentName: 'Authorization' })
  const fields = new Map(
    rest
      .join('')
      .split(',')
      .map((piece) => [piece.slice(0, piece.indexOf('=')), piece.slice(piece.indexOf('=') + 1)] as const)
  )
  const [credential, signedHeaders, signature] = [fields.get('Credential'), fields.get('SignedHeaders'), fields.get('Signature')]
  if (!credential || !signedHeaders || !signature) throw malformed('it needs Credential, SignedHeaders and Signature.')

  const stated = parts.headers.get('x-amz-date') ?? compactDate(parts.headers.get('date'))
  const at = stated === undefined ? undefined : instantOf(stated)
  if (stated === undefined || at === undefined)
    throw new S3Error('AccessDenied', 'AWS authentication requires a valid Date or x-amz-date header')
  if (Math.abs(at - now.getTime()) > skewMs) {
    throw new S3Error('RequestTimeTooSkewed', 'The difference between the request time and the current time is too large.', {
      RequestTime: stated,
      ServerTime: now.toISOString(),
      MaxAllowedSkewMilliseconds: String(skewMs)
    })
  }
  const payload = parts.headers.get('x-amz-content-sha256')
  if (!payload) throw new S3Error('InvalidRequest', 'Missing required header for this request: x-amz-content-sha256')
  return { credential, signedHeaders: signedHeaders.split(';'), signature, at: stated, payload, malformed }
}

function queryClaim(parts: SignedParts, now: Date): Claim {
  const malformed = (text: string) => new S3Error('AuthorizationQueryParametersError', text)
  const all = (name: string) => parts.query.filter(([other]) => other === name).map(([, value]) => value)
  const one = (name: string): string => {
    const [value, ...more] = all(name)
    if (!value || more.length > 0) throw malformed(`Query-string authentication version 4 requires one ${name} parameter.`)
    return value
  }
  if (one('X-Amz-Algorithm') !== algorithm) throw malformed(`X-Amz-Algorithm only supports "${algorithm}".`)
  const stated = one('X-Amz-Date')
  const at = instantOf(stated)
  if (at === undefined) throw malformed("X-Amz-Date must be in the ISO8601 Long Format \"yyyyMMdd'T'HHmmss'Z'\".")
  const expires = one('X-Amz-Expires')
  if (!/^\d{1,9}$/.test(expires)) throw malformed('X-Amz-Expires should be a number.')
  const seconds = Number(expires)
  if (seconds > longestPresignSeconds) throw malformed('X-Amz-Expires must be less than a week (in seconds).')
  if (seconds < 1) throw malformed('X-Amz-Expires must be a positive number.')
  if (at - now.getTime() > skewMs)
    throw new S3Error('AccessDenied', 'Request is not valid yet', { ServerTime: now.toISOString() })
  if (now.getTime() > at + seconds * 1000) {
    throw new S3Error('AccessDenied', 'Request has expired', {
      'X-Amz-Expires': expires,
      Expires: new Date(at + seconds * 1000).toISOString(),
      ServerTime: now.toISOString()
    })
  }
  const payload = parts.headers.get('x-amz-content-sha256') ?? all('X-Amz-Content-Sha256')[0] ?? unsignedPayload
  return {
    credential: one('X-Amz-Credential'),
    signedHeaders: one('X-Amz-SignedHeaders').split(';'),
    signature: one('X-Amz-Signature'),
    at: stated,
    payload,
    malformed
  }
}

/** Milliseconds of a `YYYYMMDDTHHMMSSZ` instant, undefined when it is none. */
function instantOf(text: string): number | undefined {
  const found = /^(\d{4})(\d\d)(\d\d)T(\d\d)(\d\d)(\d\d)Z$/.exec(text)
  if (!found) return undefined
  const at = Date.parse(`${found[1]}-${found[2]}-${found[3]}T${found[4]}:${found[5]}:${found[6]}Z`)
  return Number.isNaN(at) ? undefined : at
}

function compactDate(header: string | undefined): string | undefined {
  const at = header === undefined ? NaN : Date.parse(header)
  return Number.isNaN(at) ? undefined : new Date(at).toISOString().replace(/[-:]|\.\d{3}/g, '')
}
