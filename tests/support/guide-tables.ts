import { readFileSync } from 'node:fs'
import { parseGuide } from '~/domain/guides/parse-guide'

/** A table of a guide as printed: its head and rows of cells. */
export type GuideTable = { head: string[]; rows: string[][] }
export type GuideSection = { tables: GuideTable[]; prose: string }

const cellsOf = (line: string) =>
  line
    .trim()
    .replace(/^\||\|$/g, '')
    .split('|')
    .map((cell) => cell.trim())

/** The sections of a guide by their place: the tables in their order, and the text around them. */
export function guideSections(page: string): Map<string, GuideSection> {
  const text = readFileSync(new URL(`../../content/${page}.md`, import.meta.url), 'utf8')
  return new Map(parseGuide(text).sections.map(({ id, markdown }) => [id, sectionOf(markdown)]))
}

function sectionOf(markdown: string): GuideSection {
  const blocks = markdown.split(/\n\s*\n/)
  const isTable = (block: string) => block.startsWith('|')
  return {
    tables: blocks.filter(isTable).map((block) => {
      const [head, , ...rows] = block.split('\n').map(cellsOf)
      return { head: head!, rows }
    }),
    prose: blocks.filter((block) => !isTable(block)).join('\n\n')
  }
}

/** The numbers that stand in a text, as printed, in their order; digits within words and addresses' words are none. */
export const numbersIn = (text: string): string[] => text.match(/(?<![\w.-])\d+(?:[.-]\d+)*(?![\w])/g) ?? []
