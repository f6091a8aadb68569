import { readFileSync, readdirSync } from 'node:fs'
import { renderToStaticMarkup as render } from 'react-dom/server'
import { createRoutesStub } from 'react-router'
import { describe, expect, it } from 'vitest'
import { Button } from './button'
import { Checksum } from './checksum'
import { ChoiceGrid, ChoiceRows } from './choice-rows'
import { ErrorSummary } from './error-summary'
import { FactsTable } from './facts-table'
import { SelectField, TextArea, TextField } from './field'
import { FileField } from './file-field'
import { Finding } from './finding'
import { FitStrip } from './fit-strip'
import { PageError } from './page-error'
import { Pager, pageNumbers } from './pager'
import { UploadScale } from './progress'
import { Section } from './section'
import { Sheet, sheetWords } from './sheet'
import { Table } from './table'
import { ReleaseTag } from './tag'
import { Warning } from './warning'

describe('the sources', () => {
  const files = readdirSync(import.meta.dirname).filter((f) => f.endsWith('.tsx') && !f.includes('.test.'))
  it('never set a style attribute: the Content-Security-Policy forbids it', () => {
    for (const file of files) expect(readFileSync(`${import.meta.dirname}/${file}`, 'utf8'), file).not.toMatch(/\sstyle=/)
  })
  it('set HTML only in prose.tsx', () => {
    const setting = files.filter((file) =>
      readFileSync(`${import.meta.dirname}/${file}`, 'utf8').includes('dangerouslySetInnerHTML')
    )
    expect(setting).toEqual(['prose.tsx'])
  })
})

describe('Sheet', () => {
  const html = render(
    <Sheet current="Consoles" trail={[{ label: 'Consoles', href: '/consoles' }, { label: 'Talvi 16' }]}>
      <p>text</p>
    </Sheet>
  )
  it('has a skip link to its main part, and one main', () => {
    expect(html).toContain('href="#main"')
    expect(html.match(/<main id="main"/g)).toHaveLength(1)
  })
  it('marks the current word in the running head and in the menu that needs no script', () => {
    expect(html.match(/href="\/consoles" aria-current="page"/g)).toHaveLength(2)
    expect(html).toContain('<details class="menu"><summary>')
    for (const { href } of sheetWords) expect(html).toContain(`href="${href}"`)
  })
  it('offers to sign in, or says who is', () => {
    expect(html).toContain('>Sign in<')
    expect(render(<Sheet account={{ label: 'mirela', href: '/account' }}>x</Sheet>)).toContain('href="/account">mirela<')
  })
  it('marks the last step of the trail', () => expect(html).toContain('<li aria-current="page">Talvi 16</li>'))
  it('moves inside the application when there is a router', () => {
    const Stub = createRoutesStub([{ path: '/', Component: () => <Sheet>x</Sheet> }])
    expect(render(<Stub initialEntries={['/']} />)).toContain('data-discover')
  })
})

describe('fields', () => {
  const wired = (html: string, id: string) => {
    expect(html).toContain(`aria-describedby="${id}-hint ${id}-error"`)
    expect(html).toContain('aria-invalid="true"')
    expect(html).toContain(`<span class="hint" id="${id}-hint"`)
    expect(html).toContain(`<p class="err" id="${id}-error"`)
    expect(html).toContain(`<label for="${id}">`)
  }
  const common = { name: 'version', label: 'Version', hint: 'SemVer', error: '2.1 lacks its third number' }
  it('tie hint and error to the control', () => {
    wired(render(<TextField {...common} defaultValue="2.1" />), 'version')
    wired(render(<TextField {...common} unit="V" />), 'version')
    wired(render(<TextArea {...common} />), 'version')
    wired(render(<SelectField {...common} options={[{ value: 'a', label: 'A' }]} />), 'version')
  })
  it('come back filled in', () => expect(render(<TextField {...common} defaultValue="2.1" />)).toContain('value="2.1"'))
  it('say nothing of errors when there is none', () => {
    const html = render(<TextField name="a" label="A" />)
    expect(html).not.toMatch(/aria-invalid|aria-describedby|class="err"/)
  })
  it('wire a file to its error', () =>
    expect(render(<FileField name="bundle" label="Choose the bundle" error="No zip" />)).toContain(
      'aria-describedby="bundle-error"'
    ))
})

describe('choices', () => {
  const choices = [
    { value: 'works', label: 'Works' },
    { value: 'worse', label: 'Worse', isDisabled: true }
  ]
  it('name the group by its legend and wire its error', () => {
    const html = render(
      <ChoiceRows name="result" legend="What did it do?" error="Say what it did" choices={choices} chosen="works" />
    )
    expect(html).toContain(
      '<fieldset class="bad" role="radiogroup" aria-invalid="true" aria-describedby="result-error"><legend>What did it do?</legend>'
    )
    expect(html).toMatch(
      /<input type="radio" id="result" name="result" checked="" value="works"|<input type="radio"[^>]*id="result"[^>]*checked=""/
    )
  })
  it('carry invalid on each box when any may be chosen', () => {
    const html = render(
      <ChoiceRows kind="any" name="mail" legend="Mail me" error="One at least" choices={choices} chosen={['works']} />
    )
    expect(html).not.toContain('radiogroup')
    expect(html.match(/type="checkbox"[^>]*aria-invalid="true"|aria-invalid="true"[^>]*type="checkbox"/g)).toHaveLength(2)
  })
  it('give the first control the name as id, so that the summary leads to it', () =>
    expect(render(<ChoiceGrid name="rev" legend="Revision" choices={choices} />).match(/id="rev"/g)).toHaveLength(1))
})

describe('ErrorSummary', () => {
  it('counts in words, links to the fields, and keeps what is about the whole apart', () => {
    const html = render(
      <ErrorSummary
        before="this can be filed"
        labels={{ on: 'Date fitted' }}
        errors={[
          { path: '', message: 'Changed elsewhere.' },
          { path: 'on', message: 'has not come yet' }
        ]}
      />
    )
    expect(html).toContain('role="alert"')
    expect(html).toContain('One field to mend before this can be filed.')
    expect(html).toContain('<a href="#on">Date fitted: has not come yet</a>')
    expect(html).toContain('<b>Changed elsewhere.</b>')
  })
  it('is nothing when nothing is wrong', () => expect(render(<ErrorSummary before="x" errors={[]} />)).toBe(''))
})

describe('buttons', () => {
  it('are disabled only with their reason, which is tied to them', () => {
    const html = render(<Button reason="One stop stands">Publish</Button>)
    const id = /aria-describedby="([^"]+)"/.exec(html)![1]
    expect(html).toContain('disabled=""')
    expect(html).toContain(`id="${id}">One stop stands`)
  })
  it('say what they are doing when busy', () => {
    const html = render(<Button busy="Publishing">Publish</Button>)
    expect(html).toContain('aria-busy="true"')
    expect(html).toContain('>Publishing<')
  })
})

describe('parts that say what a thing is', () => {
  it('tell severity by a word', () => {
    expect(render(<Warning severity="stop" heading="Overheats" />)).toContain('<strong>Stop.</strong> <strong>Overheats</strong>')
    expect(render(<Finding severity="note" heading="h" code="zip-extra-data" />)).toContain('<b>Note</b>')
  })
  it('leave out rows of a finding that have no value', () =>
    expect(render(<Finding severity="note" heading="h" code="c" />)).not.toContain('Expected'))
  it('tell a release by state word and strike what was withdrawn', () => {
    const html = render(<ReleaseTag isHead board="Sundial" version="1.0.0" state="withdrawn" on="2026-11-18" />)
    expect(html).toContain('<h1 class="tn">Sundial <span class="vr">1.0.0</span></h1>')
    expect(html).toContain('<b>withdrawn</b> 2026-11-18')
  })
  it('tell a fit by its word', () =>
    expect(render(<FitStrip cells={[{ code: 'TM-1', fit: 'does-not-fit' }]} />)).toContain('does not fit'))
  it('name a section by its heading', () =>
    expect(
      render(
        <Section number={2} heading="Fit">
          x
        </Section>
      )
    ).toContain('id="s2" aria-labelledby="s2-h"'))
  it('link a difference to its finding', () => {
    const html = render(
      <FactsTable caption="c" rows={[{ fact: 'Layers', declared: 2, measured: 4, differs: { href: '#f1' } }]} />
    )
    expect(html).toContain('<a href="#f1" aria-label="differs, see the finding">≠</a>')
  })
  it('write a checksum without gaps', () => {
    const sha = 'ab'.repeat(32)
    expect(render(<Checksum sha256={sha} />).replace(/<[^>]+>/g, '')).toBe(sha)
  })
  it('say how far an upload is', () => {
    const html = render(<UploadScale label="Uploading" detail="60 %" share={0.6} />)
    expect(html).toContain('role="progressbar"')
    expect(html).toContain('aria-valuenow="60"')
  })
  it('fold a table with the label before each value', () => {
    const columns = [
      { key: 'p', head: 'Part', cell: (r: string) => r, isRowHead: true },
      { key: 'v', head: 'Value', cell: () => '1 µF' }
    ]
    const html = render(<Table caption="Parts" isFolded columns={columns} rows={['C1']} rowKey={(r) => r} />)
    expect(html).toContain('<th scope="row">C1</th><td data-l="Value"><span>1 µF</span></td>')
  })
  it.each([403, 404, 418, 500, 503])('give a way on for %d', (status) =>
    expect(render(<PageError status={status} />)).toMatch(/<a href="\/" class="btn[^>]*>To the boards<\/a>/)
  )
})

describe('Pager', () => {
  it.each([
    [1, 3, [1, 2, 3]],
    [5, 19, [1, null, 4, 5, 6, null, 19]],
    [3, 5, [1, 2, 3, 4, 5]],
    [1, 1, [1]]
  ])('page %d of %d', (page, pages, numbers) => expect(pageNumbers(page, pages)).toEqual(numbers))
  it('says what is shown, and is nothing for one page', () => {
    const props = { pageSize: 50, total: 439, of: 'reports', hrefOf: (n: number) => `?page=${n}` }
    expect(render(<Pager {...props} page={9} />)).toContain('reports 401 to 439 of 439')
    expect(render(<Pager {...props} page={9} />)).not.toContain('Older')
    expect(render(<Pager {...props} page={1} total={50} />)).toBe('')
  })
})
