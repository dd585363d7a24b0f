import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { makeFigures, STANDARD_CHOICE } from '../../../shared/figures'
import { NUMBER_LANGUAGE_TAGS } from '../../../shared/number-language'
import { parseShown, QUANTITIES, quantityOfUnit, shownUnit, toShown, UNITS, type QuantityName } from '../../../shared/quantities'

const NAMES = Object.keys(QUANTITIES) as QuantityName[]

describe('the factors', () => {
  // NIST SP 811 (2008), appendix B.8; exact ones in bold there: [quantity, units, shown, stored, half a last digit].
  it.each([
    ['speed', 'imperial', 1, 0.44704, 0],
    ['speed', 'metric', 1, 0.2777778, 5e-8],
    ['wind', 'imperial', 1, 0.44704, 0],
    ['distance', 'imperial', 1, 0.3048, 0],
    ['width', 'imperial', 1, 0.3048, 0],
    ['length', 'imperial', 1, 25.4, 0],
    ['pressure', 'metric', 1, 100, 0],
    ['pressure', 'imperial', 1, 6.894757, 5e-7],
    ['volume', 'imperial', 1, 3.785412, 5e-7],
    ['mass', 'imperial', 1, 0.4535924, 5e-8],
    ['springRate', 'imperial', 1, 0.1751268, 5e-8],
    ['torque', 'imperial', 1, 1.355818, 5e-7],
    ['acceleration', 'metric', 1, 9.80665, 0],
    // Freezing and boiling point of water, and the one figure that both scales share.
    ['temperature', 'imperial', 32, 0, 1e-12],
    ['temperature', 'imperial', 212, 100, 1e-12],
    ['temperature', 'imperial', -40, -40, 1e-12],
    ['temperatureDifference', 'imperial', 9, 5, 1e-12],
  ] as const)('%s, %s: %d is %d stored', (quantity, units, shown, stored, within) => {
    const { factor, offset = 0 } = shownUnit(quantity, units) as { factor: number, offset?: number }
    expect(Math.abs(shown * factor + offset - stored)).toBeLessThanOrEqual(within)
  })

  it('has two places that move 10 degrees Celsius move by 18 Fahrenheit, without a zero point', () => {
    expect(makeFigures({ ...STANDARD_CHOICE, units: 'imperial' }).temperatureDifference(10)).toBe('18 °F')
    expect(makeFigures({ ...STANDARD_CHOICE, units: 'imperial' }).temperature(10, 0)).toBe('50 °F')
  })
})

describe('what is typed', () => {
  const typing = fc.record({
    quantity: fc.constantFrom(...NAMES),
    units: fc.constantFrom(...UNITS),
    numberLanguage: fc.constantFrom(...NUMBER_LANGUAGE_TAGS),
    // Up to four decimals, of the size of anything on a sheet.
    thousandths: fc.integer({ min: -99_990_000, max: 99_990_000 }),
    decimals: fc.integer({ min: 0, max: 4 }),
    mark: fc.constantFrom('.', ','),
  })

  it('comes back as it was typed, in every quantity, unit and language', () => {
    fc.assert(fc.property(typing, ({ quantity, units, numberLanguage, thousandths, decimals, mark }) => {
      const value = Number((thousandths / 10_000).toFixed(decimals))
      const stored = parseShown(String(value).replace('.', mark), shownUnit(quantity, units))!
      // As it lies in the database and on the wire: JSON.
      const back = JSON.parse(JSON.stringify(stored)) as number
      const { least = 0 } = shownUnit(quantity, units) as { least?: number }
      const own = String(Math.abs(value)).split('.')[1]?.length ?? 0
      expect(makeFigures({ units, numberLanguage }).typed(quantity, back))
        .toBe(makeFigures({ units, numberLanguage }).number(value, Math.max(least, own)))
    }), { numRuns: 2000 })
  })

  it('is stored without the dust of the conversion', () => {
    expect(parseShown('1.1', shownUnit('pressure', 'metric'))).toBe(110)
    expect(parseShown('2,1', shownUnit('pressure', 'metric'))).toBe(210)
    expect(parseShown('', shownUnit('mass', 'metric'))).toBeNull()
    expect(parseShown('heavy', shownUnit('mass', 'metric'))).toBeNaN()
  })

  it('goes there and back between the units', () => {
    const figure = fc.double({ min: -1e5, max: 1e5, noNaN: true })
    fc.assert(fc.property(fc.constantFrom(...NAMES), figure, (quantity, stored) => {
      for (const units of UNITS) {
        const unit = shownUnit(quantity, units)
        const { offset = 0 } = unit as { offset?: number }
        // Two roundings in doubles, of figures no larger than these.
        const roundingError = 4e-15 * (Math.abs(stored) + Math.abs(offset) + 1)
        expect(Math.abs(toShown(stored, unit) * unit.factor + offset - stored)).toBeLessThanOrEqual(roundingError)
      }
    }))
  })
})

describe('quantityOfUnit', () => {
  it('knows the units of answers, with the words behind them', () => {
    expect(quantityOfUnit('bar')).toEqual({ quantity: 'pressure', words: '', factor: 100 })
    expect(quantityOfUnit('kPa')).toEqual({ quantity: 'pressure', words: '', factor: 1 })
    expect(quantityOfUnit('mm out')).toEqual({ quantity: 'length', words: ' out', factor: 1 })
    expect(quantityOfUnit('clicks')).toBeNull()
    expect(quantityOfUnit('')).toBeNull()
  })
})
