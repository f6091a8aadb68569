import { readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import JSZip from 'jszip'

const folder = fileURLToPath(new URL('../../db/seed/bundles/', import.meta.url))

/** A demo bundle's files by their path below its top folder; change, drop or add some and zip them again with `zipOf`. */
export async function demoFiles(release: string): Promise<Map<string, Buffer>> {
  const files = await filesOf(readFileSync(`${folder}${release}.zip`))
  return new Map([...files].map(([path, bytes]) => [path.slice(path.indexOf('/') + 1), bytes]))
}

/** The files of any zip by their whole path. */
export async function filesOf(bytes: Uint8Array): Promise<Map<string, Buffer>> {
  const zip = await JSZip.loadAsync(bytes)
  const files = new Map<string, Buffer>()
  for (const file of Object.values(zip.files)) if (!file.dir) files.set(file.name, await file.async('nodebuffer'))
  return files
}

export async function zipOf(files: ReadonlyMap<string, Buffer | string>): Promise<Buffer> {
  const zip = new JSZip()
  for (const [path, bytes] of files) zip.file(path, bytes)
  return zip.generateAsync({ type: 'nodebuffer', compression: 'DEFLATE' })
}
