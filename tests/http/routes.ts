import routes from '../../app/routes'

type Entry = { path?: string; index?: boolean; file: string; children?: Entry[] }

/** Every address pattern of the site, as `app/routes.ts` declares it; `isPage` is false for endpoints without a page. */
export const routePatterns: { pattern: string; isPage: boolean }[] = flatten((await routes) as Entry[], '')

function flatten(entries: Entry[], above: string): { pattern: string; isPage: boolean }[] {
  return entries.flatMap(({ path = '', file, children = [] }) => {
    const pattern = `${above}/${path}`.replace(/\/$/, '') || '/'
    return [{ pattern, isPage: file.endsWith('.tsx') }, ...flatten(children, pattern)]
  })
}

/** The names of a pattern's parameters, `*` for the rest of the address. */
export const paramsOf = (pattern: string): string[] => [...pattern.matchAll(/:(\w+)|(\*)/g)].map((m) => m[1] ?? m[2]!)

/** An address of the pattern; what goes in is taken as it stands, so it must be encoded already. */
export const fillPattern = (pattern: string, values: Record<string, string>): string =>
  pattern.replace(/:(\w+)|(\*)/g, (_, name?: string) => values[name ?? '*'] ?? 'none')
