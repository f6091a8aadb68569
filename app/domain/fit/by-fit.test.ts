import { expect, it } from 'vitest'
import { byFit } from './by-fit'

it('puts what fits first, then what has more reports, then by name', () => {
  const board = (name: string, claim: Parameters<typeof byFit>[0]['claim'], reports = 0) => ({ name, claim, reports })
  const boards = [
    board('E', 'does-not-fit', 9),
    board('D', 'untested'),
    board('C', 'fits-with-care'),
    board('B', 'fits', 3),
    board('A', 'fits', 3),
    board('F', 'fits', 40)
  ]
  expect(boards.sort(byFit).map((b) => b.name)).toEqual(['F', 'A', 'B', 'C', 'D', 'E'])
})
