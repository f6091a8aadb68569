/** What a command may touch besides its own arguments: handed in, so that tests can look on. */
export type CommandIo = {
  /** Writes to standard output. */
  out(text: string): void
  /** Writes to standard error. */
  err(text: string): void
  /** Standard input, where a command reads `-`. */
  stdin: NodeJS.ReadableStream
}

/**
 * One command of `fettle`. `run` gets the arguments after the command's name and answers the exit code: 0 when the answer could be
 * computed (`recount`: and what was stored agreed, else 1). Bad input is thrown as a `DomainError`; the frame prints it as a problem object to standard error and exits with 2.
 */
export type Command = {
  name: string
  /** One line for the list of commands, for instance `check FILE.zip [--layers N]`. */
  usage: string
  run(args: string[], io: CommandIo): Promise<number>
}
