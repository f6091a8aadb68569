import { open } from 'node:fs/promises'
import { computeSurvival } from '../domain/survival/compute-survival'
import { maxBytes, parseSurvivalText } from '../domain/survival/compute-survival.schema'
import { DomainError } from '../lib/domain-error'
import type { Command, CommandIo } from './command'

const usage = 'survival FILE.json (- for standard input)'

/** The text of a file or of standard input; reading stops a little past what a request may hold. */
async function readText(name: string, io: CommandIo): Promise<string> {
  const chunks: Buffer[] = []
  let size = 0
  for await (const chunk of name === '-' ? io.stdin : await streamOf(name)) {
    chunks.push(Buffer.from(chunk))
    size += chunks.at(-1)!.length
    if (size > maxBytes)
      throw new DomainError('too-large', `The input is larger than ${maxBytes / 1024 / 1024} MiB.`, [
        { path: 'file', message: 'Too large' }
      ])
  }
  try {
    return new TextDecoder('utf-8', { fatal: true }).decode(Buffer.concat(chunks))
  } catch {
    throw new DomainError('invalid', 'The input is not UTF-8 text.', [{ path: 'file', message: 'Not UTF-8' }])
  }
}

async function streamOf(name: string): Promise<NodeJS.ReadableStream> {
  try {
    const file = await open(name)
    if ((await file.stat()).isFile()) return file.createReadStream()
    await file.close()
  } catch (error) {
    throw unreadable(name, (error as NodeJS.ErrnoException).code === 'ENOENT' ? 'There is no such file' : 'It cannot be read')
  }
  throw unreadable(name, 'It is not a file')
}

const unreadable = (name: string, message: string) =>
  new DomainError('invalid', `${message}: ${name}`, [{ path: 'file', message }])

/** Computes survival from a request as `POST /api/v1/compute/survival` takes it and prints the answer. */
export const survivalCommand: Command = {
  name: 'survival',
  usage,
  async run(args, io) {
    const [name, ...rest] = args
    if (name === undefined || rest.length > 0 || (name.startsWith('-') && name !== '-')) {
      const errors = [{ path: 'file', message: name === undefined ? 'Name a file' : 'Name one file and nothing else' }]
      throw new DomainError('invalid', `One request is computed at a time. Usage: fettle ${usage}`, errors)
    }
    const answer = computeSurvival(parseSurvivalText(await readText(name, io)))
    io.out(`${JSON.stringify(answer, null, 2)}\n`)
    return 0
  }
}
