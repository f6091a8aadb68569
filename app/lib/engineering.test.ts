import { describe, expect, it } from 'vitest'
import { inEngineeringUnits } from './engineering'

describe('a quantity in engineering units', () => {
  it.each([
    [4.7e-6, 'F', '4.7 µF'],
    [1e-7, 'F', '100 nF'],
    [1e-12, 'F', '1 pF'],
    [0.00033, 'F', '330 µF'],
    [1, 'F', '1 F'],
    [10000, 'Ω', '10 kΩ'],
    [999.99, 'Ω', '1 kΩ'],
    [999.9, 'Ω', '999.9 Ω'],
    [0.009, 'Ω', '9 mΩ'],
    [1e6, 'Ω', '1 MΩ'],
    [0, 'Ω', '0 Ω'],
    [-0.0025, 'V', '-2.5 mV'],
    [1e-18, 'F', '1e-18 F'],
    [Infinity, 'V', 'Infinity']
  ])('%s %s', (value, unit, text) => {
    expect(inEngineeringUnits(value, unit).replace(/\u00a0/g, ' ')).toBe(text)
  })
})
