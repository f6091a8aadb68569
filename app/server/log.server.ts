type Fields = Record<string, string | number | boolean | null | undefined>

/** One JSON line on standard error for each event. Never put secrets, addresses of people or request bodies in it. */
export function log(level: 'info' | 'warn' | 'error', event: string, fields: Fields = {}): void {
  process.stderr.write(`${JSON.stringify({ at: new Date().toISOString(), level, event, ...fields })}\n`)
}

export function logError(event: string, error: unknown, fields: Fields = {}): void {
  log('error', event, { ...fields, error: error instanceof Error ? (error.stack ?? error.message) : String(error) })
}
