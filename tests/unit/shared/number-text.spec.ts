import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { NUMBER_LANGUAGES, NUMBER_LANGUAGE_TAGS, writeDate } from '../../../shared/number-language'
import { ownDecimals, readNumber, writeLapTime, writeNumber, writeSigned } from '../../../shared/number-text'
import { MISSING } from '../../../shared/utils/format'

const GB = NUMBER_LANGUAGES['en-GB']
const DE = NUMBER_LANGUAGES['de-DE']
const MISSING_VALUES = [null, undefined, Number.NaN, Infinity, -Infinity]

describe('writeLapTime', () => {
  it.each([
    [91.482, 3, '1:31.482'],
    [0, 3, '0:00.000'],
    [9.5, 3, '0:09.500'],
    [59.9994, 3, '0:59.999'],
    [59.9996, 3, '1:00.000'],
    [119.9999, 3, '2:00.000'],
    [59.996, 2, '1:00.00'],
    [90.869, 1, '1:30.9'],
    [89.6, 0, '1:30'],
    [3725.25, 3, '62:05.250'],
    [-1.5, 3, '\u22120:01.500'],
    [-0.0001, 3, '0:00.000'],
  ])('writes %d s with %d digits as %s', (seconds, digits, text) => {
    expect(writeLapTime(seconds, digits, GB)).toBe(text)
    expect(writeLapTime(seconds, digits, DE)).toBe(text.replace('.', ','))
  })

  it('writes what is missing as an en dash', () => {
    expect(MISSING_VALUES.map(value => writeLapTime(value, 3, GB))).toEqual(MISSING_VALUES.map(() => MISSING))
  })

  it('never shows 60 seconds and reads back to the time it was given', () => {
    const duration = fc.double({ min: 0, max: 7200, noNaN: true })
    fc.assert(fc.property(duration, fc.integer({ min: 0, max: 3 }), (seconds, digits) => {
      const [minutes, rest] = writeLapTime(seconds, digits, GB).split(':') as [string, string]
      expect(Number(rest)).toBeLessThan(60)
      expect(rest).toMatch(digits ? new RegExp(`^\\d\\d\\.\\d{${digits}}$`) : /^\d\d$/)
      // Rounding may take half a unit of the last digit; 1e-9 s is far above the error of adding the parts in doubles.
      expect(Math.abs(Number(minutes) * 60 + Number(rest) - seconds)).toBeLessThanOrEqual(0.5 * 10 ** -digits + 1e-9)
    }))
  })
})

describe('writeSigned', () => {
  it.each([
    [0.613, 3, '+0.613'],
    [-0.07, 3, '\u22120.070'],
    [0, 3, '0.000'],
    [-0, 3, '0.000'],
    [0.0004, 3, '0.000'],
    [-0.0004, 3, '0.000'],
    [12.345, 1, '+12.3'],
    [-12345.6, 1, '\u221212,345.6'],
  ])('writes %d with %d digits as %s', (value, digits, text) => {
    expect(writeSigned(value, digits, GB)).toBe(text)
  })

  it('gives opposite differences the same figure and opposite signs', () => {
    fc.assert(fc.property(fc.double({ min: -1e6, max: 1e6, noNaN: true }), (value) => {
      const [one, other] = [writeSigned(value, 3, DE), writeSigned(-value, 3, DE)]
      expect(one.replace(/^[+\u2212]/, '')).toBe(other.replace(/^[+\u2212]/, ''))
      expect(one.startsWith('+')).toBe(other.startsWith('\u2212'))
    }))
  })
})

describe('writeNumber', () => {
  it('has no sign for a figure that rounds to nothing', () => {
    expect(writeNumber(-0.04, 1, GB)).toBe('0.0')
    expect(writeNumber(-0.06, 1, GB)).toBe('\u22120.1')
  })

  // The CLDR of the runtime, which this project did not write. Its grouping of four digits is not ours.
  it.each(NUMBER_LANGUAGE_TAGS)('writes figures of five digits and more as CLDR does in %s', (language) => {
    const large = fc.double({ min: 10_000, max: 1e12, noNaN: true })
    fc.assert(fc.property(large, fc.integer({ min: 0, max: 3 }), (value, digits) => {
      // Both round the same decimal figure, so that halves cannot be taken differently.
      const rounded = Number(value.toFixed(digits))
      const fixed = { minimumFractionDigits: digits, maximumFractionDigits: digits }
      const expected = new Intl.NumberFormat(language, fixed).format(rounded)
      // Versions of CLDR differ in the Swiss apostrophe: straight or curved.
      expect(writeNumber(rounded, digits, NUMBER_LANGUAGES[language])).toBe(expected.replaceAll('\'', '\u2019'))
    }))
  })

  it('leaves four digits together, and all of them where they are to be typed', () => {
    expect(writeNumber(3104, 0, DE)).toBe('3104')
    expect(writeNumber(12_345.5, 1, DE)).toBe('12.345,5')
    expect(writeNumber(12_345.5, 1, DE, false)).toBe('12345,5')
  })
})

describe('readNumber', () => {
  it.each([
    ['34', 34], ['5,4', 5.4], ['5.4', 5.4], [' 7 ', 7], ['.5', 0.5], [',5', 0.5], ['+0.5', 0.5], ['-3.1', -3.1],
    ['\u22123.1', -3.1], ['', null], ['abc', Number.NaN], ['1.2.3', Number.NaN], ['1e5', Number.NaN], ['-', Number.NaN],
    ['1,234', 1.234], ['12,345.6', 12345.6], ['12.345,6', 12345.6], ['1.234.567,8', 1234567.8], ['12\u202F345,6', 12345.6],
    ['12\u2019345.6', 12345.6], ['1,23.4', Number.NaN], ['12 34', Number.NaN],
  ])('reads %j as %d', (typed, value) => {
    expect(readNumber(typed)).toBe(value)
  })

  it('reads what is written, whatever the language', () => {
    const language = fc.constantFrom(...NUMBER_LANGUAGE_TAGS)
    const figure = fc.integer({ min: -1e9, max: 1e9 })
    fc.assert(fc.property(language, figure, fc.integer({ min: 1, max: 2 }), (tag, hundredths, digits) => {
      const value = Number((hundredths / 100).toFixed(digits))
      expect(readNumber(writeNumber(value, digits, NUMBER_LANGUAGES[tag]))! + 0).toBe(value + 0)
    }))
  })
})

describe('ownDecimals', () => {
  it.each([[2, 0], [2.5, 1], [0.1 + 0.2, 1], [-0.0125, 4], [1 / 3, null], [1234.123456, 6], [0.1234567, null]])('finds in %d %s', (value, digits) => {
    expect(ownDecimals(value)).toBe(digits)
  })
})

describe('writeDate', () => {
  it('names the day of the week', () => {
    // 12 September 2026 is a Saturday by any calendar; 29 February 2024 was a Thursday.
    expect(writeDate('2026-09-12', 'en-GB')).toBe('Sat 12 Sep 2026')
    expect(writeDate('2026-09-12', 'en-US')).toBe('Sat Sep 12, 2026')
    expect(writeDate('2024-02-29T10:00:00Z', 'de-DE')).toBe('Thu 29.02.2024')
  })

  it.each(['de-DE', 'de-CH', 'fr-FR', 'nl-NL', 'sv-SE'] as const)('orders its figures as CLDR does in %s', (language) => {
    const date = fc.date({ min: new Date('1990-01-01'), max: new Date('2060-01-01'), noInvalidDate: true })
    const format = new Intl.DateTimeFormat(language, { day: '2-digit', month: '2-digit', year: 'numeric', timeZone: 'UTC' })
    fc.assert(fc.property(date, (day) => {
      expect(writeDate(day.toISOString(), language)!.slice(4)).toBe(format.format(day))
    }))
  })

  it.each([null, undefined, '', 'soon', '2026-02-30', '2026-13-01'])('refuses %s', (date) => {
    expect(writeDate(date, 'en-GB')).toBeNull()
  })
})
