import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import {
  asSentence, carKind, countInWords, formatBar, formatCount, formatDate, formatDifference, formatG, formatKmh,
  formatLapTime, formatNumber, formatSetting, formatSize, formatTime, MISSING, numberInWords,
} from '../../../../shared/utils/format'

const MISSING_VALUES = [null, undefined, Number.NaN, Infinity, -Infinity]

describe('formatLapTime', () => {
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
    expect(formatLapTime(seconds, digits)).toBe(text)
  })

  it('writes what is missing as an en dash', () => {
    expect(MISSING_VALUES.map(value => formatLapTime(value))).toEqual(MISSING_VALUES.map(() => MISSING))
  })

  it('never shows 60 seconds and reads back to the time it was given', () => {
    const duration = fc.double({ min: 0, max: 7200, noNaN: true })
    fc.assert(fc.property(duration, fc.integer({ min: 0, max: 3 }), (seconds, digits) => {
      const [minutes, rest] = formatLapTime(seconds, digits).split(':') as [string, string]
      expect(Number(rest)).toBeLessThan(60)
      expect(rest).toMatch(digits ? new RegExp(`^\\d\\d\\.\\d{${digits}}$`) : /^\d\d$/)
      // Rounding may take half a unit of the last digit; 1e-9 s is far above the error of adding the parts in doubles.
      expect(Math.abs(Number(minutes) * 60 + Number(rest) - seconds)).toBeLessThanOrEqual(0.5 * 10 ** -digits + 1e-9)
    }))
  })
})

describe('formatDifference', () => {
  it.each([
    [0.613, 3, '+0.613'],
    [-0.07, 3, '\u22120.070'],
    [0, 3, '0.000'],
    [-0, 3, '0.000'],
    [0.0004, 3, '0.000'],
    [-0.0004, 3, '0.000'],
    [12.345, 1, '+12.3'],
  ])('writes %d with %d digits as %s', (value, digits, text) => {
    expect(formatDifference(value, digits)).toBe(text)
  })

  it('gives opposite differences the same figure and opposite signs', () => {
    fc.assert(fc.property(fc.double({ min: -1e6, max: 1e6, noNaN: true }), (value) => {
      const [one, other] = [formatDifference(value), formatDifference(-value)]
      expect(one.replace(/^[+\u2212]/, '')).toBe(other.replace(/^[+\u2212]/, ''))
      expect(one.startsWith('+')).toBe(other.startsWith('\u2212'))
    }))
  })
})

describe('quantities', () => {
  it('writes speeds in km/h', () => {
    expect(formatKmh(40)).toBe('144')
    expect(formatKmh(20.05, 1)).toBe('72.2')
  })

  it('writes accelerations in standard gravities of 9.80665 m/s2 (NIST SP 811, appendix B.8)', () => {
    expect(formatG(9.80665)).toBe('1.00')
    expect(formatG(-10.7873)).toBe('\u22121.10')
  })

  it('writes pressures in bar of 100 kPa (NIST SP 811, appendix B.8)', () => {
    expect(formatBar(180)).toBe('1.80')
    expect(formatBar(null)).toBe(MISSING)
  })

  it('has no sign for a figure that rounds to nothing', () => {
    expect(formatNumber(-0.04, 1)).toBe('0.0')
    expect(formatNumber(-0.06, 1)).toBe('\u22120.1')
  })

  it.each([
    [0, '0 B'],
    [812, '812 B'],
    [999.4, '999 B'],
    [999.5, '1.0 kB'],
    [3200, '3.2 kB'],
    [999_949, '999.9 kB'],
    [999_950, '1.0 MB'],
    [18_400_000, '18.4 MB'],
    [2.5e15, '2500.0 TB'],
  ])('writes %d bytes as %s', (bytes, text) => {
    expect(formatSize(bytes)).toBe(text)
  })

  it('counts in words', () => {
    expect([0, 1, 2].map(n => formatCount(n, 'lap'))).toEqual(['0 laps', '1 lap', '2 laps'])
    expect(formatCount(2, 'entry', 'entries')).toBe('2 entries')
    expect([0, 1, 12, 13].map(n => countInWords(n, 'lap'))).toEqual(['no laps', 'one lap', 'twelve laps', '13 laps'])
    expect([0, 12, 13].map(numberInWords)).toEqual(['no', 'twelve', '13'])
    expect(asSentence(countInWords(3, 'outing'))).toBe('Three outings')
    expect(asSentence('')).toBe('')
  })
})

describe('dates and times', () => {
  it('names the day of the week', () => {
    // 12 September 2026 is a Saturday by any calendar; 29 February 2024 was a Thursday.
    expect(formatDate('2026-09-12')).toBe('Sat 12 Sep 2026')
    expect(formatDate('2024-02-29')).toBe('Thu 29 Feb 2024')
  })

  it.each([null, undefined, '', 'soon', '2026-02-30', '2026-13-01'])('writes %s as missing', (date) => {
    expect(formatDate(date)).toBe(MISSING)
  })

  it('writes the clock of the zone it is given, summer and winter', () => {
    expect(formatTime('2026-09-12T12:20:00Z', 'Europe/London')).toBe('13:20')
    expect(formatTime('2026-12-12T12:20:00Z', 'Europe/London')).toBe('12:20')
    expect(formatTime('2026-09-12T23:20:00Z', 'Europe/London')).toBe('00:20')
    expect(formatTime('not a time', 'Europe/London')).toBe(MISSING)
  })
})

describe('formatSetting', () => {
  it.each([
    [1.8, 'bar', '1.80'],
    [1.805, 'bar', '1.805'],
    [32, 'N/mm', '32'],
    [-3.1, '°', '\u22123.1'],
    [0, 'kg', '0'],
    [0.1 + 0.2, 'mm', '0.3'],
    ['track 2', '', 'track 2'],
    ['', '', 'not set'],
    [null, 'mm', 'not set'],
    [undefined, 'mm', 'not set'],
    [Number.NaN, 'mm', MISSING],
  ])('writes %s %s as %s', (value, unit, text) => {
    expect(formatSetting(value, unit)).toBe(text)
  })

  it('writes the plus where the sign says which way', () => {
    expect([0.5, 0, -0.8, 'none', null].map(value => formatSetting(value, 'mm', true))).toEqual(['+0.5', '0', '\u22120.8', 'none', 'not set'])
  })
})

describe('carKind', () => {
  it('writes what is known', () => {
    expect(carKind({ number: '47', year: 2006, kind: 'hatchback' })).toBe('No. 47, 2006 hatchback')
    expect(carKind({ number: '', year: null, kind: 'saloon' })).toBe('saloon')
    expect(carKind({ number: '47', year: null, kind: '' })).toBe('No. 47')
    expect(carKind({ number: '', year: null, kind: '' })).toBe(MISSING)
  })
})
