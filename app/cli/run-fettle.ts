import { DomainError } from '../lib/domain-error'
import { problemOf } from '../lib/problem'
import type { CommandIo } from './command'
import { commands } from './commands'

const help = () => `Usage: fettle COMMAND\n\n${commands.map((command) => `  fettle ${command.usage}`).join('\n')}\n`

/**
 * Runs one command line and answers its exit code: 0 when the answer could be computed, 2 on bad input, with a problem object
 * (RFC 9457) on standard error. Anything else that is thrown is a defect and passes through.
 */
export async function runFettle(args: string[], io: CommandIo): Promise<number> {
  const [name, ...rest] = args
  if (name === '--help' || name === '-h' || name === 'help') {
    io.out(help())
    return 0
  }
  try {
    const command = commands.find((candidate) => candidate.name === name)
    if (!command) {
      const message = name === undefined ? 'Name a command.' : `There is no command ${JSON.stringify(name.slice(0, 60))}.`
      throw new DomainError('invalid', `${message} Known: ${commands.map((c) => c.name).join(', ')}.`, [
        { path: 'command', message: 'Unknown command' }
      ])
    }
    return await command.run(rest, io)
  } catch (error) {
    if (!(error instanceof DomainError)) throw error
    io.err(`${JSON.stringify(problemOf(error), null, 2)}\n`)
    return 2
  }
}
