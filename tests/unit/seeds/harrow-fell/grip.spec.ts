import { describe, expect, it } from 'vitest'
import { setupGrip } from '../../../../seeds/harrow-fell/grip'
import { SETUPS, setupNumber } from '../../../../seeds/harrow-fell/sheets'

const [first, second, third] = SETUPS.map(setup => setup.sheet)

describe('setupGrip', () => {
  it('is 1 for the baseline itself', () => {
    expect(setupGrip(first!, first!)).toEqual({ slow: 1, fast: 1, traction: 1, braking: 1 })
  })

  it('moves by less than two per cent between the revisions of the plan, and each differs', () => {
    const slow = [second!, third!].map(sheet => setupGrip(sheet, first!).slow)
    expect(slow[0]).toBeGreaterThan(1.002)
    expect(slow[1]).toBeGreaterThan(slow[0]! + 0.001)
    expect(slow[1]).toBeLessThan(1.02)
  })

  it('answers to a stiffer front bar with less front grip', () => {
    const stiffer = { ...first!, axles: { ...first!.axles, front: { barMm: 25 } } }
    expect(setupGrip(stiffer, first!).slow).toBeLessThan(0.995)
  })

  it('loses fast bends to a rear that carries too much of the roll', () => {
    const nervous = { ...third!, axles: { ...third!.axles, rear: { barMm: 24 } } }
    const grip = setupGrip(nervous, first!)
    expect(grip.fast).toBeLessThan(grip.slow)
  })
})

describe('setupNumber', () => {
  it('finds a revision and refuses one that is not planned', () => {
    expect(setupNumber(2).basedOn).toBe(1)
    expect(() => setupNumber(9)).toThrow(RangeError)
  })
})
