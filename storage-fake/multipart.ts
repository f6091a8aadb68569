import { createHash, randomBytes } from 'node:crypto'
import { mkdir, readdir, readFile, rename, rm, writeFile } from 'node:fs/promises'
import { join } from 'node:path'
import { receive, receiveText } from './body'
import { xmlReply, type Call, type Reply } from './call'
import { checksumNames, type Checksums } from './checksums'
import { S3Error } from './errors'
import { isErrno, openObjectFile, writeObjectFile, type Description } from './object-file'
import { checksumHeaders, describedHeaders, writeCondition } from './objects'
import { childrenOf, parseXml, textOf, xmlDocument } from './xml'

type Upload = { key: string; headers: Record<string, string> }
type WantedPart = { number: number; etag: string; checksums: Checksums }

const largestPartNumber = 10_000
const largestPage = 1000
const busy = new Set<string>()

const noSuchUpload = (id: string) =>
  new S3Error(
    'NoSuchUpload',
    'The specified upload does not exist. The upload ID may be invalid, or the upload may have been aborted or completed.',
    { UploadId: id }
  )

/** POST ?uploads */
export async function createUpload(call: Call): Promise<Reply> {
  const id = randomBytes(24).toString('hex')
  const upload: Upload = { key: call.key, headers: describedHeaders(call) }
  await mkdir(call.bucket.uploadFolder(id))
  await writeFile(join(call.bucket.uploadFolder(id), 'upload.json'), JSON.stringify(upload))
  return xmlReply(xmlDocument('InitiateMultipartUploadResult', { Bucket: call.bucket.name, Key: call.key, UploadId: id }))
}

/** PUT ?partNumber&uploadId: parts come in any order, the last one of a number counts. */
export async function uploadPart(call: Call): Promise<Reply> {
  const { folder } = await findUpload(call)
  const text = call.query.get('partNumber') ?? ''
  const number = /^\d{1,5}$/.test(text) ? Number(text) : 0
  if (number < 1 || number > largestPartNumber) {
    throw new S3Error('InvalidArgument', `Part number must be an integer between 1 and ${largestPartNumber}, inclusive`, {
      ArgumentName: 'partNumber',
      ArgumentValue: text
    })
  }
  const temporary = call.bucket.temporaryPath()
  const file = await writeObjectFile(temporary)
  try {
    const { bytes, md5, checksums } = await receive(call, call.limits.objectBytes, file.write)
    const etag = md5.toString('hex')
    await file.finish({ key: call.key, bytes, etag, checksums, modifiedAt: call.now.toISOString(), headers: {} })
    await rename(temporary, partPath(folder, number)).catch((error: unknown) => {
      throw isErrno(error, 'ENOENT') ? noSuchUpload(call.query.get('uploadId')!) : error
    })
    return { status: 200, headers: { etag: `"${etag}"`, ...checksumHeaders(checksums) } }
  } catch (error) {
    await file.discard()
    throw error
  }
}

/** POST ?uploadId with the list of parts: joins them to the object. */
export async function completeUpload(call: Call): Promise<Reply> {
  const { id, folder, upload } = await findUpload(call)
  const condition = writeCondition(call)
  const { text } = await receiveText(call, call.limits.documentBytes)
  const wanted = wantedParts(text)
  if (busy.has(id))
    throw new S3Error(
      'OperationAborted',
      'A conflicting conditional operation is currently in progress against this resource. Try again.'
    )
  busy.add(id)
  try {
    const parts = await matchParts(call, folder, wanted)
    const md5 = createHash('md5')
    for (const part of parts) md5.update(Buffer.from(part.etag, 'hex'))
    const etag = `${md5.digest('hex')}-${parts.length}`
    const bytes = parts.reduce((sum, part) => sum + part.bytes, 0)
    const description: Description = {
      key: call.key,
      bytes,
      etag,
      modifiedAt: call.now.toISOString(),
      headers: upload.headers,
      checksums: {}
    }
    await joinParts(call, folder, wanted, description, condition)
    await rm(folder, { recursive: true, force: true })
    return xmlReply(
      xmlDocument('CompleteMultipartUploadResult', {
        Location: `/${call.bucket.name}/${call.key}`,
        Bucket: call.bucket.name,
        Key: call.key,
        ETag: `"${etag}"`
      })
    )
  } finally {
    busy.delete(id)
  }
}

async function joinParts(
  call: Call,
  folder: string,
  wanted: WantedPart[],
  description: Description,
  condition: ReturnType<typeof writeCondition>
): Promise<void> {
  const temporary = call.bucket.temporaryPath()
  const file = await writeObjectFile(temporary)
  try {
    for (const { number } of wanted) {
      const part = await openObjectFile(partPath(folder, number))
      if (!part) throw noSuchUpload(call.query.get('uploadId')!)
      if (part.description.bytes === 0) await part.close()
      else for await (const piece of part.stream(0, part.description.bytes - 1)) await file.write(piece as Buffer)
    }
    await file.finish(description)
    await call.bucket.commit(temporary, description, condition)
  } catch (error) {
    await file.discard()
    throw error
  }
}

/** DELETE ?uploadId */
export async function abortUpload(call: Call): Promise<Reply> {
  const { folder } = await findUpload(call)
  await rm(folder, { recursive: true, force: true })
  return { status: 204 }
}

/** GET ?uploadId: the parts received so far, by number, in pages. */
export async function listParts(call: Call): Promise<Reply> {
  const { id, folder } = await findUpload(call)
  const number = (name: string, fallback: number): number => {
    const text = call.query.get(name) || String(fallback)
    if (!/^\d{1,9}$/.test(text))
      throw new S3Error('InvalidArgument', `Provided ${name} not an integer or within integer range`, { ArgumentName: name })
    return Number(text)
  }
  const marker = number('part-number-marker', 0)
  const maxParts = Math.min(number('max-parts', largestPage), largestPage)
  const numbers = (await readdir(folder))
    .map((name) => /^(\d{5})\.part$/.exec(name)?.[1])
    .filter((found) => found !== undefined)
    .map(Number)
    .filter((n) => n > marker)
    .sort((a, b) => a - b)
  const shown = numbers.slice(0, maxParts)
  const parts = await Promise.all(shown.map((n) => describePart(folder, n)))
  return xmlReply(
    xmlDocument('ListPartsResult', {
      Bucket: call.bucket.name,
      Key: call.key,
      UploadId: id,
      PartNumberMarker: marker,
      NextPartNumberMarker: shown.at(-1) ?? marker,
      MaxParts: maxParts,
      IsTruncated: numbers.length > shown.length,
      Part: parts.flatMap((part, i) =>
        part ? [{ PartNumber: shown[i]!, LastModified: part.modifiedAt, ETag: `"${part.etag}"`, Size: part.bytes }] : []
      )
    })
  )
}

const partPath = (folder: string, number: number): string => join(folder, `${String(number).padStart(5, '0')}.part`)

async function describePart(folder: string, number: number): Promise<Description | undefined> {
  const part = await openObjectFile(partPath(folder, number))
  await part?.close()
  return part?.description
}

/** The upload a request names; its id is checked before it becomes part of a path. */
async function findUpload(call: Call): Promise<{ id: string; folder: string; upload: Upload }> {
  const id = call.query.get('uploadId') ?? ''
  if (!/^[0-9a-f]{48}$/.test(id)) throw noSuchUpload(id)
  const folder = call.bucket.uploadFolder(id)
  try {
    const upload = JSON.parse(await readFile(join(folder, 'upload.json'), 'utf8')) as Upload
    if (upload.key !== call.key) throw noSuchUpload(id)
    return { id, folder, upload }
  } catch (error) {
    throw isErrno(error, 'ENOENT') ? noSuchUpload(id) : error
  }
}

function wantedParts(text: string): WantedPart[] {
  const parts = childrenOf(parseXml(text), 'CompleteMultipartUpload', 'Part').map((element) => {
    const number = textOf(element, 'PartNumber')?.trim() ?? ''
    const checksums: Checksums = {}
    for (const name of checksumNames) {
      const value = textOf(element, `Checksum${name.toUpperCase()}`)
      if (value !== undefined) checksums[name] = value
    }
    return {
      number: /^\d{1,5}$/.test(number) ? Number(number) : 0,
      etag: (textOf(element, 'ETag') ?? '').trim().replaceAll('"', ''),
      checksums
    }
  })
  if (parts.length === 0 || parts.some((part) => part.number < 1 || part.number > largestPartNumber)) {
    throw new S3Error('MalformedXML', 'The XML you provided was not well-formed or did not validate against our published schema')
  }
  if (parts.some((part, i) => i > 0 && part.number <= parts[i - 1]!.number)) {
    throw new S3Error(
      'InvalidPartOrder',
      'The list of parts was not in ascending order. The parts list must be specified in order by part number.'
    )
  }
  return parts
}

async function matchParts(call: Call, folder: string, wanted: WantedPart[]): Promise<Description[]> {
  const parts: Description[] = []
  for (const [i, { number, etag, checksums }] of wanted.entries()) {
    const part = await describePart(folder, number)
    const isSame =
      part?.etag === etag &&
      checksumNames.every((name) => checksums[name] === undefined || checksums[name] === part.checksums[name])
    if (!part || !isSame) {
      throw new S3Error(
        'InvalidPart',
        "One or more of the specified parts could not be found. The part might not have been uploaded, or the specified entity tag might not have matched the part's entity tag.",
        {
          PartNumber: String(number)
        }
      )
    }
    if (i < wanted.length - 1 && part.bytes < call.limits.partBytes) {
      throw new S3Error('EntityTooSmall', 'Your proposed upload is smaller than the minimum allowed size', {
        PartNumber: String(number),
        ProposedSize: String(part.bytes),
        MinSizeAllowed: String(call.limits.partBytes)
      })
    }
    parts.push(part)
  }
  const bytes = parts.reduce((sum, part) => sum + part.bytes, 0)
  if (bytes > call.limits.objectBytes) {
    throw new S3Error('EntityTooLarge', 'Your proposed upload exceeds the maximum allowed object size.', {
      ProposedSize: String(bytes),
      MaxSizeAllowed: String(call.limits.objectBytes)
    })
  }
  return parts
}
