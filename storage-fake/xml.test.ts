import { describe, expect, it } from 'vitest'
import { childrenOf, escapeXml, parseXml, textOf, xmlDocument } from './xml'

describe('xml', () => {
  it('reads what it writes, markup and control characters included', () => {
    const key = 'a & <b> "c" \'d\' \u0001 \r\n ä 𝄞'
    const root = parseXml(xmlDocument('Delete', { Object: [{ Key: key }, { Key: 'second' }], Quiet: true }))
    expect(childrenOf(root, 'Delete', 'Object').map((one) => textOf(one, 'Key'))).toEqual([key, 'second'])
    expect(textOf(root, 'Quiet')).toBe('true')
    expect(textOf(root, 'Absent')).toBeUndefined()
  })

  it('leaves out what is undefined and escapes text', () => {
    expect(xmlDocument('A', { B: undefined, C: '<' }, false)).toBe('<?xml version="1.0" encoding="UTF-8"?>\n<A><C>&lt;</C></A>')
    expect(escapeXml('a&b\u0000')).toBe('a&amp;b&#0;')
  })

  it('reads attributes, empty elements and references', () => {
    const root = parseXml('<?xml version="1.0"?> <A xmlns="urn:x" b=\'1\'>\n<C/><D>&#65;&#x42;&quot;</D></A>\n')
    expect(root.children.map((one) => [one.name, one.text])).toEqual([
      ['C', ''],
      ['D', 'AB"']
    ])
  })

  it.each([
    ['nothing', ''],
    ['text only', 'hello'],
    ['an open element', '<A><B></A>'],
    ['crossed elements', '<A><B></A></B>'],
    ['two roots', '<A/><B/>'],
    ['text after the root', '<A/>x'],
    ['a document type', '<!DOCTYPE a [<!ENTITY x "y">]><A>&x;</A>'],
    ['an unknown entity', '<A>&x;</A>'],
    ['a bare ampersand', '<A>a & b</A>'],
    ['a reference to nothing', '<A>&#0;</A>'],
    ['a reference to a surrogate', '<A>&#xd800;</A>'],
    ['CDATA', '<A><![CDATA[x]]></A>'],
    ['too deep', '<A>'.repeat(9) + '</A>'.repeat(9)]
  ])('refuses %s', (_name, source) => {
    expect(() => parseXml(source)).toThrow('not well-formed')
  })

  it('refuses another root than was asked for', () => {
    expect(() => childrenOf(parseXml('<A/>'), 'Delete', 'Object')).toThrow('not well-formed')
  })
})
