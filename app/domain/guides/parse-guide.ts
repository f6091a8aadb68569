/** A guide as its Markdown is laid out: `# Heading`, one plain paragraph, then sections `## Heading {#place}`. */
export type ParsedGuide = {
  heading: string
  /** The first paragraph, as plain text. */
  lead: string
  /** Markdown between the lead and the first section; often empty. */
  opening: string
  sections: { id: string; heading: string; markdown: string }[]
}

const headed = /^##\s+(.*?)(?:\s+\{#([a-z0-9-]+)\})?\s*$/

/** A place to point at, for a heading that names none: its words in lower case, joined by hyphens. */
export const placeOf = (heading: string): string =>
  heading
    .toLowerCase()
    .replace(/[^a-z0-9]+/g, '-')
    .replace(/^-|-$/g, '')

/**
 * Takes a guide's Markdown apart. Lines that look like headings inside fenced code are code.
 * @throws Error when the text has no heading or lead, or names a place twice: a guide is a file of the project, and this fails the build's tests
 */
export function parseGuide(text: string): ParsedGuide {
  const lines = text.replace(/\r\n/g, '\n').split('\n')
  const first = lines.findIndex((line) => line.trim() !== '')
  const heading = /^#\s+(.+?)\s*$/.exec(lines[first] ?? '')?.[1]
  if (heading === undefined) throw new Error('A guide begins with its heading, "# …"')

  const parts: { id: string; heading: string; lines: string[] }[] = [{ id: '', heading: '', lines: [] }]
  let fence: string | null = null
  for (const line of lines.slice(first + 1)) {
    const mark = /^\s*(```|~~~)/.exec(line)?.[1] ?? null
    if (mark !== null) fence = fence === null ? mark : fence === mark ? null : fence
    const found = fence === null ? headed.exec(line) : null
    if (found) parts.push({ id: found[2] ?? placeOf(found[1]!), heading: found[1]!, lines: [] })
    else parts.at(-1)!.lines.push(line)
  }

  const [opening, ...sections] = parts.map((part) => ({
    id: part.id,
    heading: part.heading,
    markdown: part.lines.join('\n').trim()
  }))
  const [lead, ...rest] = opening!.markdown.split(/\n\s*\n/)
  if (!lead) throw new Error(`The guide "${heading}" lacks its first paragraph`)
  const ids = sections.map((section) => section.id)
  if (new Set(ids).size < ids.length) throw new Error(`The guide "${heading}" names a place twice: ${ids.join(', ')}`)
  return { heading, lead: lead.replace(/\s*\n\s*/g, ' '), opening: rest.join('\n\n'), sections }
}
