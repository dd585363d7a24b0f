import { describe, expect, it } from 'vitest'
import { makeEngine } from '../../../../seeds/harrow-fell/engine'
import type { CarState } from '../../../../seeds/harrow-fell/trajectory'

const state = (change: Partial<CarState>): CarState => ({
  stationM: 0, eastM: 0, northM: 0, headingRad: 0, speedMps: 30, longitudinalMps2: 0, lateralMps2: 0, curvaturePerM: 0,
  throttle: 0.8, brakeBar: 0, gear: 3, ...change,
})
const run = (seconds: number, change: Partial<CarState>, oilStartC = 90) => {
  const engine = makeEngine(oilStartC, 17)
  let reading = engine(state(change), 0)
  for (let i = 0; i < seconds * 25; i++) {
    reading = engine(state(change), 0.04)
  }
  return reading
}

describe('makeEngine', () => {
  it('begins at the oil temperature given and warms up under load towards a limit', () => {
    expect(run(0, {}, 70).oilTempC).toBeCloseTo(70, 9)
    expect(run(120, {}, 70).oilTempC).toBeGreaterThan(90)
    // Ten time constants on, another minute adds nothing to speak of.
    expect(Math.abs(run(1200, {}).oilTempC - run(1260, {}).oilTempC)).toBeLessThan(0.1)
  })

  it('idles when the car stands', () => {
    expect(run(5, { speedMps: 0, throttle: 0, gear: 1 }).rpm).toBe(880)
  })

  it('loses oil pressure when hot and in long left-hand bends, not in right-hand ones', () => {
    const cool = run(1, { speedMps: 20 }, 80).oilPressureBar
    expect(run(1, { speedMps: 20 }, 115).oilPressureBar).toBeLessThan(cool - 0.3)
    expect(run(2, { lateralMps2: 11 }).oilPressureBar).toBeLessThan(run(2, { lateralMps2: -11 }).oilPressureBar - 0.8)
    expect(run(2, { lateralMps2: -11 }).oilPressureBar).toBe(run(2, {}).oilPressureBar)
  })
})
