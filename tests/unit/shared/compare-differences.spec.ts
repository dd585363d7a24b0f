import { describe, expect, it } from 'vitest'
import { measuredWords, outsideOf } from '../../../shared/compare-differences'
import { makeFigures, STANDARD_CHOICE } from '../../../shared/figures'
import { someLap } from './compare-fixture'

const standard = makeFigures(STANDARD_CHOICE)
const lap = someLap()
const keys = { lap: 'lap 7', against: 'lap 4' }

describe('outsideOf', () => {
  it('tells what differs, what is the same and what nobody noted', () => {
    const against = someLap({ fuelStartL: null, driver: { id: 'b', name: 'Bo Testcase' }, conditions: { ...lap.conditions, trackC: 19.5 } })
    expect(outsideOf(lap, against, standard)).toEqual({
      differs: [
        { label: 'Driver', unit: '', lap: 'Nell Placeholder', against: 'Bo Testcase' },
        { label: 'Track', unit: '°C', lap: '34', against: '19.5' },
        { label: 'Fuel at the start', unit: 'l', lap: '30', against: 'not noted' },
      ],
      same: ['car', 'track surface', 'air', 'wind', 'wind from', 'passenger'],
      unknown: ['humidity'],
    })
  })

  it('tells it in the reader’s units and language', () => {
    const against = someLap({ fuelStartL: 28.5, conditions: { ...lap.conditions, trackC: 19.5, windMps: 5 } })
    const imperial = makeFigures({ units: 'imperial', numberLanguage: 'de-DE' })
    // 34 and 19.5 degC, 3 and 5 m/s (0.44704 m/s a mile per hour), 30 and 28.5 l (3.785411784 l a US gallon).
    expect(outsideOf(lap, against, imperial).differs).toEqual([
      { label: 'Track', unit: '°F', lap: '93,2', against: '67,1' },
      { label: 'Wind', unit: 'mph', lap: '6,7', against: '11,2' },
      { label: 'Fuel at the start', unit: 'US gal', lap: '7,93', against: '7,53' },
    ])
  })

  it('finds nothing between a lap and itself', () => {
    expect(outsideOf(lap, lap, standard).differs).toEqual([])
  })
})

describe('measuredWords', () => {
  it('says from what the traces came', () => {
    const derived = someLap({ rateHz: 10, source: { ...lap.source, speed: 'derived' } })
    expect(measuredWords(lap, derived, keys, standard)).toEqual([
      'The log of lap 7 has 25 samples a second, that of lap 4 10; crossings lie between samples.',
      'Speed is as logged in lap 7, derived from position and time in lap 4.',
      'Longitudinal g is as logged.',
      'Lateral g is derived from position and time.',
    ])
    expect(measuredWords(lap, lap, keys, standard)[0]).toContain('Both logs have 25')
  })
})
