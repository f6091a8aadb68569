import { describe, expect, it } from 'vitest'
import { unknownFacts } from '~/domain/bundle/bundle-check.types'
import { declaredBesideMeasured } from './declared-beside-measured'

const declared = { layers: 4, thicknessMm: 0.8, copperUm: 35, finish: 'ENIG', mask: 'green', legend: null, stencil: 'top' }
const row = (rows: ReturnType<typeof declaredBesideMeasured>, fact: string) => rows.find((r) => r.fact === fact)

describe('declaredBesideMeasured', () => {
  it('puts what agrees side by side', () => {
    const facts = { ...unknownFacts(), width: 38, height: 14, copperLayers: 4, minTrack: 0.2 }
    const rows = declaredBesideMeasured(declared, facts, new Set())
    expect(row(rows, 'Copper layers')).toEqual({ fact: 'Copper layers', declared: '4', measured: '4' })
    expect(row(rows, 'Size, mm')?.measured).toBe('38.0 × 14.0')
    expect(row(rows, 'Narrowest track, mm')?.measured).toBe('0.20')
    expect(row(rows, 'Legend')?.declared).toBeUndefined()
  })
  it('points at the finding where the layers or the thickness differ', () => {
    const rows = declaredBesideMeasured(declared, { ...unknownFacts(), copperLayers: 2 }, new Set(['thickness-conflict']))
    expect(row(rows, 'Copper layers')?.differs).toBe('layer-count')
    expect(row(rows, 'Thickness, mm')?.differs).toBe('thickness-conflict')
  })
  it('calls a stroke a stroke where the files do not say what is a track', () => {
    const rows = declaredBesideMeasured(declared, { ...unknownFacts(), smallestStroke: 0.15 }, new Set())
    expect(row(rows, 'Smallest stroke on copper, mm')?.measured).toBe('0.15')
    expect(row(rows, 'Narrowest track, mm')).toBeUndefined()
  })
  it('shows only what is declared before a check', () => {
    expect(declaredBesideMeasured(declared, null, new Set()).every((r) => r.measured === undefined)).toBe(true)
  })
})
