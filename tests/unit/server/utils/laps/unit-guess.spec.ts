import { describe, expect, it } from 'vitest'
import { CHANNELS, channelKind } from '../../../../../shared/channels'
import { guessUnit, speedUnitFromPath } from '../../../../../server/utils/laps/unit-guess'

function unitOf(channel: string, values: readonly number[]): string {
  return guessUnit(channelKind(channel)!, Float64Array.from(values)).unit
}

describe('guessUnit', () => {
  it.each([
    ['time', [0, 0.04, 0.08], 's'],
    ['time', [0, 40, 80], 'ms'],
    ['time', [1778321700, 1778321701], 's'],
    ['time', [1778321700000, 1778321700040], 'ms'],
    ['lateral_acceleration', [0, -1.1, 0.9], 'g'],
    ['lateral_acceleration', [0, -10.8, 8.8], 'm/s2'],
    ['throttle', [0, 0.4, 1], '0..1'],
    ['throttle', [0, 40, 100], '%'],
    ['oil_pressure', [1.2, 4.8], 'bar'],
    ['oil_pressure', [20, 68], 'psi'],
    ['oil_pressure', [120, 480], 'kPa'],
    ['oil_temperature', [60, 112], '°C'],
    ['oil_temperature', [140, 234], '°F'],
    ['battery_voltage', [12.4, 13.9], 'V'],
    ['battery_voltage', [12400, 13900], 'mV'],
    ['speed', [120], 'km/h'],
  ])('%s with values %j is in %s', (channel, values, unit) => {
    expect(unitOf(channel, values)).toBe(unit)
  })

  it('gives a unit that the channel knows, also without values', () => {
    for (const kind of CHANNELS) {
      const { unit, because } = guessUnit(kind, Float64Array.from([Number.NaN]))
      expect(kind.units.map(({ unit }) => unit)).toContain(unit)
      expect(because).toBe('the unit is the usual one')
    }
  })
})

describe('speedUnitFromPath', () => {
  /** North-east for 20 s at 10 Hz, from 54.4 N; one degree of the meridian is 111 195 m on the mean sphere. */
  function run(speed: number, speedMps = 25) {
    const timesS = Float64Array.from({ length: 201 }, (_, i) => i / 10)
    const degPerS = speedMps / 111_195 / Math.SQRT2
    return speedUnitFromPath({
      timesS,
      latitudesDeg: timesS.map(timeS => 54.4 + degPerS * timeS),
      longitudesDeg: timesS.map(timeS => -2.9 + degPerS * timeS / Math.cos(54.4 * Math.PI / 180)),
      speeds: timesS.map(() => speed),
    })
  }

  it.each([[25, 'm/s'], [90, 'km/h'], [25 / 0.44704, 'mph'], [25 * 3600 / 1852, 'kn']])('%d is in %s', (speed, unit) => {
    expect(run(speed)).toBe(unit)
  })

  it('says nothing of a car that stands or of a speed that agrees in no unit', () => {
    expect(run(0, 0)).toBeUndefined()
    expect(run(200)).toBeUndefined()
  })
})
