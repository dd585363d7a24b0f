import { describe, expect, it } from 'vitest'
import { measuredWords, outsideOf } from '../../../shared/compare-differences'
import { someLap } from './compare-fixture'

const lap = someLap()
const keys = { lap: 'lap 7', against: 'lap 4' }

describe('outsideOf', () => {
  it('tells what differs, what is the same and what nobody noted', () => {
    const against = someLap({ fuelStartL: null, driver: { id: 'b', name: 'Bo Testcase' }, conditions: { ...lap.conditions, trackC: 19.5 } })
    expect(outsideOf(lap, against)).toEqual({
      differs: [
        { label: 'Driver', unit: '', lap: 'Nell Placeholder', against: 'Bo Testcase' },
        { label: 'Track', unit: '°C', lap: '34', against: '19.5' },
        { label: 'Fuel at the start', unit: 'l', lap: '30', against: 'not noted' },
      ],
      same: ['car', 'track surface', 'air', 'wind', 'wind from', 'passenger'],
      unknown: ['humidity'],
    })
  })

  it('finds nothing between a lap and itself', () => {
    expect(outsideOf(lap, lap).differs).toEqual([])
  })
})

describe('measuredWords', () => {
  it('says from what the traces came', () => {
    const derived = someLap({ rateHz: 10, source: { ...lap.source, speed: 'derived' } })
    expect(measuredWords(lap, derived, keys)).toEqual([
      'The log of lap 7 has 25 samples a second, that of lap 4 10; crossings lie between samples.',
      'Speed is as logged in lap 7, derived from position and time in lap 4.',
      'Longitudinal g is as logged.',
      'Lateral g is derived from position and time.',
    ])
    expect(measuredWords(lap, lap, keys)[0]).toContain('Both logs have 25')
  })
})
