import { parseArgs } from 'node:util'
import { layersReader, thicknessReader, type DetailReader } from '../domain/bundle/declared-details'
import { publicAnswer } from '../domain/bundle/bundle-check.types'
import { runBundleCheck } from '../domain/bundle/run-bundle-check.server'
import { DomainError } from '../lib/domain-error'
import type { Command } from './command'

const usage = 'check FILE.zip [--layers N] [--thickness MM]'

/** A number given with an option, or undefined; the message names the option. */
function numberOption(name: string, text: string | undefined, { expected, read }: DetailReader): number | undefined {
  if (text === undefined) return undefined
  const value = read(text)
  if (value === null)
    throw new DomainError('invalid', `--${name} takes ${expected}.`, [{ path: name, message: `Expected ${expected}` }])
  return value
}

function parse(args: string[]) {
  try {
    return parseArgs({ args, allowPositionals: true, options: { layers: { type: 'string' }, thickness: { type: 'string' } } })
  } catch (error) {
    throw new DomainError('invalid', `${(error as Error).message.split('. ')[0]}. Usage: fettle ${usage}`)
  }
}

/** Checks a bundle as a release would, for a maintainer's own machine. The answer goes to standard output, whatever it finds. */
export const checkCommand: Command = {
  name: 'check',
  usage,
  async run(args, io) {
    const { values, positionals } = parse(args)
    if (positionals.length !== 1) {
      const errors = [{ path: 'file', message: positionals.length === 0 ? 'Name a file' : 'Name one file' }]
      throw new DomainError('invalid', `One zip file is checked at a time. Usage: fettle ${usage}`, errors)
    }
    const declaredLayers = numberOption('layers', values.layers, layersReader)
    const thicknessMm = numberOption('thickness', values.thickness, thicknessReader)
    const check = await runBundleCheck({ path: positionals[0]!, declaredLayers, thicknessMm })
    io.out(`${JSON.stringify(publicAnswer(check), null, 2)}\n`)
    return 0
  }
}
