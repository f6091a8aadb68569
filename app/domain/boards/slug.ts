/** Addresses under /boards/ that are pages, and words that would mislead there. */
const reserved = new Set([
  'new',
  'edit',
  'search',
  'all',
  'boards',
  'board',
  'release',
  'releases',
  'api',
  'admin',
  'steward',
  'draft',
  'drafts'
])

export const maxSlugLength = 40

/** A slug from a name: lower case, ASCII letters and digits, single hyphens; '' when nothing of the name is left. */
export function slugOf(name: string): string {
  return name
    .normalize('NFKD')
    .replace(/[\u0300-\u036f]/g, '')
    .replace(/ß/g, 'ss')
    .toLowerCase()
    .replace(/[^a-z0-9]+/g, '-')
    .replace(/^-+|-+$/g, '')
    .slice(0, maxSlugLength)
    .replace(/-+$/, '')
}

/** What is wrong with a slug, or null when it may be taken. */
export function slugProblem(slug: string): string | null {
  if (slug.length < 2) return 'The address needs at least two letters or digits.'
  if (slug.length > maxSlugLength) return `The address may have ${maxSlugLength} characters at most.`
  if (!/^[a-z0-9]+(-[a-z0-9]+)*$/.test(slug)) return 'Small letters a to z, digits and single hyphens between them: talvi-rail'
  if (reserved.has(slug)) return `“${slug}” is kept for a page of the site. Choose another address.`
  return null
}
