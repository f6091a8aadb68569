import { describe, expect, it } from 'vitest'
import { readDeclaredDetails } from './declared-details'

const read = (query: string) => readDeclaredDetails(new URLSearchParams(query))

describe('readDeclaredDetails', () => {
  it('reads what is given, and takes nothing for nothing', () => {
    expect(read('')).toEqual({ ok: true, value: {} })
    expect(read('layers=4&thickness=0.8')).toEqual({ ok: true, value: { declaredLayers: 4, thicknessMm: 0.8 } })
    expect(read('thickness=10&layers=64')).toEqual({ ok: true, value: { declaredLayers: 64, thicknessMm: 10 } })
  })

  it.each([
    ['layers=', 'layers'],
    ['layers=0', 'layers'],
    ['layers=65', 'layers'],
    ['layers=2.5', 'layers'],
    ['layers=0x4', 'layers'],
    ['layers=1e1', 'layers'],
    ['layers=-4', 'layers'],
    ['layers=4%00', 'layers'],
    ['layers=99999999999999999999', 'layers'],
    ['layers=4&layers=4', 'layers'],
    ['thickness=0', 'thickness'],
    ['thickness=10.01', 'thickness'],
    ['thickness=NaN', 'thickness'],
    ['thickness=Infinity', 'thickness'],
    ['thickness=1,6', 'thickness'],
    ['layer=4', 'layer'],
    ['toString=1', 'toString'],
    ['__proto__=1', '__proto__']
  ])('refuses %s at its path', (query, path) => {
    expect(read(query)).toMatchObject({ ok: false, errors: [{ path, message: expect.any(String) }] })
  })

  it('tells all that is wrong at once, and not without end', () => {
    expect(read('layers=x&thickness=y')).toMatchObject({ errors: [{ path: 'layers' }, { path: 'thickness' }] })
    const many = read(Array.from({ length: 500 }, (_, i) => `p${i}`).join('&'))
    expect(!many.ok && many.errors.length).toBe(20)
  })
})
