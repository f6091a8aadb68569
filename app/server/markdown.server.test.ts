import { describe, expect, it } from 'vitest'
import { maxMarkdownLength, renderMarkdown } from './markdown.server'

describe('renderMarkdown', () => {
  it('renders what release notes are made of', () => {
    const html = renderMarkdown(
      '# Changed\n\n- **C15** added, see [the sheet](https://example.org/a?b=1&c=2)\n- `R4` left off\n\n| a | b |\n|---|---|\n| 1 | 2 |'
    )
    expect(html).toContain('<h3>Changed</h3>')
    expect(html).toContain('<strong>C15</strong>')
    expect(html).toContain('<a href="https://example.org/a?b=1&amp;c=2" rel="nofollow ugc noopener">the sheet</a>')
    expect(html).toContain('<td>2</td>')
  })

  /* Written after the filter evasion examples that OWASP's XSS cheat sheet describes by kind; none is copied. */
  it.each([
    '<script>alert(1)</script>',
    '<img src=x onerror=alert(1)>',
    '![x](https://example.org/track.png)',
    '![x](x" onerror="alert(1))',
    '[x](javascript:alert(1))',
    '[x](JaVaScRiPt:alert(1))',
    '[x](java&#x0A;script:alert(1))',
    '[x](&#106;avascript:alert(1))',
    '[x](data:text/html,<b>1</b>)',
    '[x](vbscript:x)',
    '[x](//evil.example/a)',
    '[x](/boards/new)',
    '[x](\\\\evil.example)',
    '[x](http://plain.example)',
    '<a href="javascript:alert(1)">x</a>',
    '<a href="https://a.example" onclick="alert(1)" id="login" class="btn" style="position:fixed">x</a>',
    '<svg><style><img src=x onerror=alert(1)></style></svg>',
    '<math><mtext></p><img src=x onerror=alert(1)></math>',
    '<form action="/boards/new"><input name=a><button>b</button></form>',
    '<iframe srcdoc="<b>1</b>"></iframe>',
    '<style>body{display:none}</style>',
    '<base href="https://evil.example/">',
    '<meta http-equiv=refresh content=0>',
    '<p id="errors" class="warn stop" style="color:red">x</p>',
    '<textarea></p><script>alert(1)</script>',
    '<!--<script>-->alert(1)<!--</script>-->',
    '```<script>\nx\n```',
    '<https://a.example" onmouseover="alert(1)>',
    '[a]: javascript:alert(1)\n\n[a]',
    '<div onpointerenter=alert(1)>x</div>'
  ])('lets nothing of %j run, load, post or restyle', (text) => {
    const html = renderMarkdown(text)
    const tags = html.match(/<[^>]*>/g) ?? []
    for (const tag of tags) {
      expect(tag).toMatch(/^<\/?(p|br|hr|h[3-6]|strong|em|del|code|pre|blockquote|ul|ol|li|a|table|thead|tbody|tr|th|td)\b/)
      expect(tag).not.toMatch(/\s(on\w+|id|class|style|src)\s*=/i)
      const href = /href="([^"]*)"/.exec(tag)?.[1]
      if (href !== undefined) expect(href).toMatch(/^(https:\/\/|mailto:)/)
      if (tag.startsWith('<a')) expect(tag).toContain('rel="nofollow ugc noopener"')
    }
  })

  it('survives text that overflows the parser', () => {
    for (const text of ['>'.repeat(19_000), '['.repeat(19_000), '- '.repeat(9_000), '*a '.repeat(6_000), '`'.repeat(19_999)])
      expect(typeof renderMarkdown(text)).toBe('string')
  })

  it('cuts what is too long and shows it as typed', () => {
    const html = renderMarkdown(`**${'a'.repeat(maxMarkdownLength)}**`)
    expect(html).toContain('**aaa')
    expect(html.length).toBeLessThan(maxMarkdownLength + 20)
  })

  it('answers the same text from memory', () => {
    expect(renderMarkdown('the *same*')).toBe(renderMarkdown('the *same*'))
  })
})
