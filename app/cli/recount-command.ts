import { parseArgs } from 'node:util'
import { recountDatabase } from '../domain/reliability/recount-database.server'
import { DomainError } from '../lib/domain-error'
import type { Command } from './command'

const usage = 'recount [--check]'

function parse(args: string[]) {
  try {
    return parseArgs({ args, options: { check: { type: 'boolean', default: false } } }).values
  } catch (error) {
    throw new DomainError('invalid', `${(error as Error).message.split('. ')[0]}. Usage: fettle ${usage}`)
  }
}

/**
 * Rebuilds the counts behind the reliability pages from the reports of the server's database (DATA_DIR), and proves that both agree: exit 0 when
 * they did, 1 when they differed, and were mended unless only checked.
 */
export const recountCommand: Command = {
  name: 'recount',
  usage,
  async run(args, io) {
    const { check } = parse(args)
    const tell = (board: string) => io.err(`Counting ${board} ...\n`)
    const answer = await recountDatabase({ env: process.env, isCheck: check, tell })
    io.out(`${JSON.stringify(answer, null, 2)}\n`)
    return answer.differing === 0 ? 0 : 1
  }
}
