import { describe, expect, it } from 'vitest'
import { makeFigures, STANDARD_CHOICE } from '../../../shared/figures'
import { emptySheet } from '../../../shared/schemas/setups'
import { SETUP_FIELDS, settingOf, sheetDifferences } from '../../../shared/setup-fields'
import { toStored } from '../../../shared/quantities'
import { MISSING } from '../../../shared/utils/format'

const standard = makeFigures(STANDARD_CHOICE)
const german = makeFigures({ units: 'imperial', numberLanguage: 'de-DE' })
const MISSING_VALUES = [null, undefined, Number.NaN, Infinity, -Infinity]

describe('figures', () => {
  it('are written with the marks of the language', () => {
    expect([standard.lapTime(91.482), german.lapTime(91.482)]).toEqual(['1:31.482', '1:31,482'])
    expect([standard.difference(-0.07), german.difference(-0.07)]).toEqual(['\u22120.070', '\u22120,070'])
    expect([standard.percent(45.5, 1), german.percent(45.5, 1)]).toEqual(['45.5 %', '45,5 %'])
    expect([standard.number(12345), german.number(12345)]).toEqual(['12,345', '12.345'])
  })

  it('are written in the units of the reader', () => {
    // 40 m/s are 144 km/h, and 89.48 mph of 0.44704 m/s (NIST SP 811, B.8).
    expect([standard.speed(40), german.speed(40)]).toEqual(['144 km/h', '89 mph'])
    expect([standard.distance(1240), german.distance(1240)]).toEqual(['1240 m', '4068 ft'])
    expect([standard.pressure(180), german.pressure(180)]).toEqual(['1.80 bar', '26,1 psi'])
    expect([standard.g(-10.7873), german.g(-10.7873)]).toEqual(['\u22121.10', '\u22121,10'])
    expect(standard.figure('speed', 20.05, 1)).toBe('72.2')
    expect(standard.signed('acceleration', 4.903325)).toBe('+0.50')
    expect(standard.typedWithUnit('angle', -3.1)).toBe('\u22123.1°')
  })

  it('write what is missing as an en dash, without a unit', () => {
    const { number, difference, percent, size, lapTime, speed, g } = standard
    for (const write of [number, difference, percent, size, lapTime, speed, g]) {
      expect(MISSING_VALUES.map(value => write(value))).toEqual(MISSING_VALUES.map(() => MISSING))
    }
    expect(standard.typedWithUnit('mass', null)).toBe(MISSING)
    expect([standard.date('soon'), standard.time(null, 'UTC'), standard.timeInZone('soon', 'UTC')]).toEqual([MISSING, MISSING, MISSING])
  })

  it.each([
    [0, '0 B'], [812, '812 B'], [999.4, '999 B'], [999.5, '1.0 kB'], [3200, '3.2 kB'], [999_949, '999.9 kB'],
    [999_950, '1.0 MB'], [18_400_000, '18.4 MB'], [2.5e15, '2500.0 TB'],
  ])('write %d bytes as %s', (bytes, text) => {
    expect(standard.size(bytes)).toBe(text)
    expect(german.size(bytes)).toBe(text.replace('.', ','))
  })
})

describe('times', () => {
  it('are those of the clocks at the circuit, summer and winter', () => {
    expect(standard.time('2026-09-12T12:20:00Z', 'Europe/London')).toBe('13:20')
    expect(standard.time('2026-12-12T12:20:00Z', 'Europe/London')).toBe('12:20')
    expect(standard.time('2026-09-12T23:20:00Z', 'Europe/London')).toBe('00:20')
    expect(standard.timeInZone('2026-09-12T12:20:00Z', 'Europe/London')).toBe('13:20 BST')
  })

  it('have the zone with them all through a day on which the clocks are changed', () => {
    expect(standard.time('2026-10-25T00:30:00Z', 'Europe/London')).toBe('01:30 BST')
    expect(standard.time('2026-10-25T01:30:00Z', 'Europe/London')).toBe('01:30 GMT')
    expect(standard.time('2026-10-25T15:30:00Z', 'Europe/London')).toBe('15:30 GMT')
    expect(standard.time('2026-10-24T15:30:00Z', 'Europe/London')).toBe('16:30')
    expect(standard.time('2026-10-26T15:30:00Z', 'Europe/London')).toBe('15:30')
    expect(standard.time('2026-03-29T13:00:00Z', 'Europe/Berlin')).toBe('15:00 CEST')
  })
})

describe('settings', () => {
  it.each([
    [1.8, 'bar', '1.80'], [1.805, 'bar', '1.805'], [32, 'N/mm', '32'], [-3.1, '°', '\u22123.1'], [0, 'kg', '0'],
    [0.1 + 0.2, 'mm', '0.3'], ['track 2', '', 'track 2'], ['', '', 'not set'], [null, 'mm', 'not set'],
    [undefined, 'mm', 'not set'], [Number.NaN, 'mm', MISSING], [7, 'clicks', '7'], [62.5, '% front', '62.5'],
  ])('are written as they were typed: %s %s as %s', (value, unit, text) => {
    expect(standard.setting(value, unit)).toBe(text)
  })

  it('have the plus where the sign says which way', () => {
    expect([0.5, 0, -0.8, 'none', null].map(value => standard.setting(value, 'mm', true))).toEqual(['+0.5', '0', '\u22120.8', 'none', 'not set'])
  })

  it('are read in the unit of the reader, whatever they were typed in', () => {
    expect(['bar', 'mm out', '% front', 'clicks', ''].map(unit => german.settingUnit(unit))).toEqual(['psi', 'in out', '% front', 'clicks', ''])
    // 32 N/mm are 182.7 lbf/in of 0.1751268 N/mm (NIST SP 811, B.8).
    expect(german.setting(32, 'N/mm')).toBe('182,7')
  })

  it('come back as they were typed through the sheet, the list of changes and the screen', () => {
    const psi = german.unitOf('pressure')
    const before = emptySheet()
    const after = emptySheet()
    before.corners.fl.coldKpa = toStored(26.55, psi)
    after.corners.fl.coldKpa = toStored(27.25, psi)
    const field = SETUP_FIELDS.find(one => one.path === 'corners.fl.coldKpa')!
    expect(german.setting(settingOf(before, field), field.unit)).toBe('26,55')
    const [change] = sheetDifferences(before, after)
    expect([german.setting(change!.a, change!.unit), german.setting(change!.b, change!.unit)]).toEqual(['26,55', '27,25'])
    expect(standard.setting(change!.a, change!.unit)).toBe('1.83')
  })
})
