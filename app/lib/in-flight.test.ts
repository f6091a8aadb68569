import { expect, it } from 'vitest'
import { InFlight } from './in-flight'

const held = () => {
  let end = () => {}
  const ended = new Promise<void>((resolve) => (end = resolve))
  return { ended, end }
}

it('lets so many at it for each key and in all, and others when one has ended, also by failing', async () => {
  const gate = new InFlight(2, 3)
  const [a, b, c] = [held(), held(), held()]
  const runs = [gate.run('x', () => a.ended), gate.run('x', () => b.ended), gate.run('y', () => c.ended)]
  await expect(gate.run('x', async () => 1)).rejects.toMatchObject({
    kind: 'rate-limited',
    message: expect.stringContaining('2')
  })
  await expect(gate.run('z', async () => 1)).rejects.toMatchObject({ kind: 'rate-limited' })
  a.end()
  await runs[0]
  await expect(gate.run('x', () => Promise.reject(new Error('broken')))).rejects.toThrow('broken')
  expect(await gate.run('x', async () => 1)).toBe(1)
  b.end()
  c.end()
  await Promise.all(runs)
})
