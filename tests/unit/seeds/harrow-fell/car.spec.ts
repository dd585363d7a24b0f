import { describe, expect, it } from 'vitest'
import { CAR, dragMps2, driveMps2, GRAVITY_MPS2, nextGear, rpmAt, TOP_GEAR } from '../../../../seeds/harrow-fell/car'

describe('the hatchback', () => {
  it('pushes no harder than its power allows, nor than its front tyres take', () => {
    for (let v = 1; v < 60; v++) {
      const push = driveMps2(v, 3, 1200, 1, 1)
      expect(push * 1200 * Math.max(v, 3)).toBeLessThanOrEqual(CAR.wheelPowerW)
      expect(push).toBeLessThanOrEqual(CAR.traction * GRAVITY_MPS2)
    }
    expect(driveMps2(10, 1, 1200, 1, 0)).toBe(0)
  })

  it('drags with the square of its speed over a rolling resistance, and not at all at rest', () => {
    const air = (v: number) => dragMps2(v, 1000) - CAR.rollingN / 1000
    expect(air(40) / air(20)).toBeCloseTo(4, 9)
    expect(dragMps2(0, 1000)).toBe(0)
  })

  it('shifts up at the top of each gear and never hunts between two', () => {
    let gear = 1
    let changes = 0
    for (let v = 0; v < 55; v += 0.1) {
      const next = nextGear(v, gear)
      changes += next === gear ? 0 : 1
      // Having changed, the same speed asks for no other gear.
      expect(nextGear(v, next)).toBe(next)
      gear = next
      expect(rpmAt(v, gear)).toBeLessThan(CAR.shiftUpRpm + 350)
    }
    expect(gear).toBe(TOP_GEAR)
    expect(changes).toBe(TOP_GEAR - 1)
  })
})
