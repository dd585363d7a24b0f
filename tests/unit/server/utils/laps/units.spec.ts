import { describe, expect, it } from 'vitest'
import { CHANNELS } from '../../../../../shared/channels'
import { headerParts, knownUnit, suffixUnits, words } from '../../../../../server/utils/laps/units'

describe('knownUnit', () => {
  it.each([
    ['km/h', 'km/h'], ['[KPH]', 'km/h'], ['km / h', 'km/h'], ['mps', 'm/s'], ['m/s^2', 'm/s2'], ['G', 'g'], ['deg/s', '°/s'],
    ['ºC', '°C'], ['Deg C', '°C'], ['kPa', 'kPa'], ['PSI', 'psi'], ['rpm', '1/min'], ['knots', 'kn'], ['mV', 'mV'],
  ])('%s is %s', (text, unit) => {
    expect(knownUnit(text)).toBe(unit)
  })

  it('knows no others', () => {
    expect(knownUnit('furlong')).toBeUndefined()
    expect(knownUnit('')).toBeUndefined()
  })

  it('knows every unit that a channel is read in', () => {
    for (const { units } of CHANNELS) for (const { unit } of units) if (unit !== '') expect(knownUnit(unit)).toBe(unit)
  })
})

describe('headers', () => {
  it('come apart at the bracket', () => {
    expect(headerParts('Speed (km/h)')).toEqual({ name: 'Speed', unitText: 'km/h' })
    expect(headerParts(' speed [mph] ')).toEqual({ name: 'speed', unitText: 'mph' })
    expect(headerParts('Temp (oil) [°C]')).toEqual({ name: 'Temp (oil)', unitText: '°C' })
    expect(headerParts('speed_mps')).toEqual({ name: 'speed_mps', unitText: null })
    expect(headerParts('(km/h)')).toEqual({ name: '(km/h)', unitText: null })
  })

  it('come apart into words', () => {
    expect(words('GPSSpeed_kmh')).toEqual(['gps', 'speed', 'kmh'])
    expect(words('oilTemp')).toEqual(['oil', 'temp'])
    expect(words('Öl-Druck, vorn')).toEqual(['ol', 'druck', 'vorn'])
  })

  it('may end in a unit of up to three words', () => {
    expect(suffixUnits(['acc', 'x', 'g'])).toEqual([{ name: ['acc', 'x'], unit: 'g' }])
    expect(suffixUnits(['yaw', 'deg', 's'])[0]).toEqual({ name: ['yaw'], unit: '°/s' })
    expect(suffixUnits(['speed', 'km', 'h'])[0]).toEqual({ name: ['speed'], unit: 'km/h' })
    expect(suffixUnits(['rpm'])).toEqual([])
  })
})
