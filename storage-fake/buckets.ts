import { mkdirSync, readdirSync } from 'node:fs'
import { join } from 'node:path'
import { Bucket, checkBucketName } from './bucket'
import { S3Error } from './errors'
import { childrenOf, parseXml, textOf } from './xml'

/** The buckets under one folder, each opened once. */
export class Buckets {
  readonly #folder: string
  readonly #open = new Map<string, Bucket>()

  constructor(folder: string) {
    this.#folder = join(folder, 'buckets')
    mkdirSync(this.#folder, { recursive: true })
    for (const name of readdirSync(this.#folder)) this.#open.set(name, new Bucket(join(this.#folder, name), name))
  }

  has(name: string): boolean {
    return this.#open.has(name)
  }

  get(name: string): Bucket {
    const bucket = this.#open.get(name)
    if (!bucket) throw new S3Error('NoSuchBucket', 'The specified bucket does not exist', { BucketName: name })
    return bucket
  }

  create(name: string): void {
    checkBucketName(name)
    if (this.#open.has(name)) {
      throw new S3Error(
        'BucketAlreadyOwnedByYou',
        'Your previous request to create the named bucket succeeded and you already own it.',
        { BucketName: name }
      )
    }
    this.#open.set(name, new Bucket(join(this.#folder, name), name))
  }
}

/** Checks the body of a CreateBucket request: empty, or a document that names this server's region. */
export function checkLocation(text: string, region: string): void {
  if (text.trim() === '') return
  const document = parseXml(text)
  childrenOf(document, 'CreateBucketConfiguration', 'LocationConstraint')
  const wanted = textOf(document, 'LocationConstraint') ?? ''
  if (wanted !== '' && wanted !== region) {
    throw new S3Error(
      'IllegalLocationConstraintException',
      `The ${wanted} location constraint is incompatible for the region specific endpoint this request was sent to.`
    )
  }
}
