import { describe, expect, it } from 'vitest'
import { findingCodes } from '~/domain/bundle/finding-codes'
import { statusOf } from '~/lib/domain-error'
import { guideByPage, listGuides } from './guides.server'

const allHtml = (page: string) => {
  const guide = guideByPage(page)
  return [guide.opening ?? '', ...guide.sections.map((s) => s.html)].join('\n')
}

describe('the guides', () => {
  it('are those that pages and answers point to', () => {
    const pages = listGuides().map((g) => g.page)
    for (const page of ['safety', 'reporting', 'figures', 'releasing', 'problems']) expect(pages).toContain(page)
    expect(pages[0]).toBe('safety')
  })

  it.each(['../package', '..%2fpackage', 'safety.md', 'Safety', '', '__proto__', 'constructor'])('know no page %j', (page) => {
    expect(() => guideByPage(page)).toThrow(expect.objectContaining({ kind: 'not-found' }))
  })

  it('have a place for every kind of problem, with its status', () => {
    const sections = new Map(guideByPage('problems').sections.map((s) => [s.id, s.heading]))
    for (const [kind, status] of Object.entries(statusOf)) expect(sections.get(kind), kind).toContain(`(${status})`)
    expect(sections.size).toBe(Object.keys(statusOf).length)
  })

  it('list every finding code with its severity, and no other', () => {
    const rows = [...allHtml('releasing').matchAll(/<td><code>([a-z-]+)<\/code><\/td>\s*<td>(\w+)<\/td>/g)]
    expect(Object.fromEntries(rows.map(([, code, severity]) => [code, severity]))).toEqual(findingCodes)
  })

  it('link within the site only to guides and places that exist', () => {
    for (const { page } of listGuides())
      for (const [, target, hash] of allHtml(page).matchAll(/href="\/guides\/([^"#]*)(?:#([^"]*))?"/g)) {
        const ids = guideByPage(target!).sections.map((s) => s.id)
        if (hash !== undefined) expect(ids, `${page} -> ${target}#${hash}`).toContain(hash)
      }
  })

  it('carry no script, style or picture', () => {
    for (const { page } of listGuides()) expect(allHtml(page)).not.toMatch(/<(script|style|img|iframe)|\son\w+=|style=/i)
  })
})
