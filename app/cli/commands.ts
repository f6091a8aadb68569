import { checkCommand } from './check-command'
import type { Command } from './command'

/** Every command of `fettle`, by name. */
export const commands: Command[] = [checkCommand]
