import { describe, expect, it } from 'vitest'
import { DomainError } from '~/lib/domain-error'
import { maxRows } from './compute-survival.schema'
import { readSurvivalCsv } from './read-survival-csv'

const rows = (text: string) => readSurvivalCsv(text).rows

function refusal(text: string): string[] {
  try {
    readSurvivalCsv(text)
  } catch (error) {
    if (error instanceof DomainError) return error.errors.map(({ message }) => message)
    throw error
  }
  return []
}

describe('read', () => {
  it.each<[string, string, object[]]>([
    [
      'two columns without headings',
      '5,1\n7,0',
      [
        { time: 5, event: 1 },
        { time: 7, event: 0 }
      ]
    ],
    [
      'headings in any order',
      'Failed;Time (weeks)\nyes;5\nNo;7',
      [
        { time: 5, event: 1 },
        { time: 7, event: 0 }
      ]
    ],
    [
      'a decimal comma with semicolons',
      'time;event\n5,5;1\n1,250;0',
      [
        { time: 5.5, event: 1 },
        { time: 1.25, event: 0 }
      ]
    ],
    ['a decimal comma with tabs', '5,5\t1', [{ time: 5.5, event: 1 }]],
    [
      'decimal points',
      'time,event\n.5,1\n1e2,0',
      [
        { time: 0.5, event: 1 },
        { time: 100, event: 0 }
      ]
    ],
    [
      'causes by name',
      'days,cause\n5,"joint, cracked"\n6,0',
      [
        { time: 5, event: 'joint, cracked' },
        { time: 6, event: 0 }
      ]
    ],
    [
      'intervals, open ones in three ways',
      'lower,upper\n8,12\n8,\n8,NA\n8,Inf\n,4',
      [
        { lower: 8, upper: 12 },
        { lower: 8, upper: null },
        { lower: 8, upper: null },
        { lower: 8, upper: null },
        { lower: 0, upper: 4 }
      ]
    ],
    [
      'ends with an event that agrees',
      'left,right,status\n8,12,1\n8,,0',
      [
        { lower: 8, upper: 12 },
        { lower: 8, upper: null }
      ]
    ],
    [
      'times and intervals in one table',
      'time,event,lower,upper\n5,1,,\n,,8,12',
      [
        { time: 5, event: 1 },
        { lower: 8, upper: 12 }
      ]
    ],
    [
      'entry, group and weight',
      'entry,time,event,batch,count\n2,5,1,A,3\n,6,0,B,1',
      [
        { entry: 2, time: 5, event: 1, group: 'A', weight: 3 },
        { time: 6, event: 0, group: 'B', weight: 1 }
      ]
    ],
    [
      'a mark, Windows line ends, empty lines and empty cells at the end',
      '\ufefftime,event,,\r\n\r\n5,1,,\r\n,,,\r\n',
      [{ time: 5, event: 1 }]
    ]
  ])('%s', (_, text, expected) => expect(rows(text)).toEqual(expected))

  it('says what it left out, and on which line each row stood', () => {
    const { columns, lines, hasHeadings } = readSurvivalCsv('serial,time,event\nX1,5,1\n\nX2,7,0\n')
    expect(columns.leftOut).toEqual(['serial'])
    expect(lines).toEqual([2, 4])
    expect(hasHeadings).toBe(true)
  })

  it('gives markup in a name back as it is', () => {
    expect(rows('time,event,group\n5,1,<script>alert(1)</script>')[0]!.group).toBe('<script>alert(1)</script>')
  })
})

describe('refused, with the line', () => {
  it.each<[string, string, RegExp]>([
    ['nothing', ' \n\n', /There is no row/],
    ['headings alone', 'time,event\n', /^line 1: There are headings and no row/],
    ['three columns without headings', '5,1,A', /^line 1: There are no headings, and 3 columns/],
    ['no event', 'time,batch\n5,A', /^line 1: No heading names the event/],
    ['no time', 'event,batch\n1,A', /^line 1: No heading names the time/],
    ['half an interval', 'lower,event\n1,1', /^line 1: There is a lower end and no upper/],
    ['two events', 'time,event,status\n5,1,1', /^line 1: “event” and “status” both look like the event/],
    ['a column that says the opposite', 'time,censored\n5,1', /^line 1: “censored” can mean failed or not failed/],
    ['a time in words', 'time,event\n5,1\nsoon,1', /^line 3: The time “soon” is not a number/],
    ['an endless time', 'time,event\nInf,1', /^line 2: The time “Inf” is not a number/],
    ['a number past all bounds', 'time,event\n1e999,1', /^line 2: The time “1e999” is too large/],
    ['no time in a row', 'time,event\n,1', /^line 2: The time is empty/],
    ['no event in a row', 'time,event\n5,', /^line 2: The event is empty/],
    ['a numbered cause', 'time,event\n5,1\n5,2', /^line 3: The event “2” is neither/],
    [
      'a word that means working',
      'time,event\n5,censored',
      /^line 2: The event “censored” reads like a unit that had not failed/
    ],
    ['a decimal comma among commas', 'time,event\n5,5,1', /^line 2: There are 3 cells, and 2 columns\. With a decimal comma/],
    ['a cell too few', 'time,event,group\n5,1', /^line 2: There are 2 cells, and 3 columns/],
    ['a sign that may part thousands', 'time;event\n1,234;1', /^line 2: The time “1,234” can be read as 1.234 or as 1234/],
    ['comma and point', 'time;event\n1,5;1\n1.5;0', /^line 3: The time “1.5” has a point, and a number before it a comma/],
    ['a thousands sign beside a fraction', 'time;event\n1.234;1\n1,5;0', /^line 2: The time “1.234” can be read/],
    ['tabs and semicolons', 'time;event\tgroup\n5;1\tA', /tabs and semicolons/],
    ['a quotation mark left open', 'time,event\n5,"joint', /^line \d+: .*quotation mark/],
    ['ends and event that disagree', 'lower,upper,event\n5,,1', /^line 2: The upper end says that no failure was seen/],
    ['a time and an interval', 'time,event,lower,upper\n5,1,1,2', /^line 2: There is a time and an interval/],
    ['an empty group', 'time,event,group\n5,1,', /^line 2: The group is empty/]
  ])('%s', (_, text, message) => expect(refusal(text)).toEqual([expect.stringMatching(message)]))

  it('at most twenty lines of a table full of mistakes', () => {
    expect(refusal(`time,event\n${'x,1\n'.repeat(5000)}`)).toHaveLength(20)
  })

  it('more rows than are computed', () => {
    expect(() => readSurvivalCsv(`time,event\n${'5,1\n'.repeat(maxRows + 5)}`)).toThrow(
      expect.objectContaining({ kind: 'too-large' })
    )
  })
})
