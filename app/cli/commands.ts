import { checkCommand } from './check-command'
import type { Command } from './command'
import { recountCommand } from './recount-command'
import { survivalCommand } from './survival-command'

/** Every command of `fettle`, by name. */
export const commands: Command[] = [checkCommand, survivalCommand, recountCommand]
