import { execFileSync } from 'node:child_process'
import { expect, it } from 'vitest'

const allowed = [
  'app',
  'public',
  'db',
  'storage-fake',
  'tests',
  'content',
  'package.json',
  'package-lock.json',
  'tsconfig.json',
  'vite.config.ts',
  'react-router.config.ts',
  'eslint.config.js',
  'README.md',
  'DEVELOPERS.md'
]

it('the top level holds the names it may, and all of them', () => {
  const tracked = execFileSync('git', ['ls-files', '-z'], { encoding: 'utf8' }).split('\0').filter(Boolean)
  const names = [...new Set(tracked.map((file) => file.split('/')[0]!))].filter((name) => !name.startsWith('.'))
  expect(names.sort()).toEqual([...allowed].sort())
})
