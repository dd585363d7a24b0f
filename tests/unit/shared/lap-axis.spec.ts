import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { axisGrid, lapAxis, stripScale } from '../../../shared/lap-axis'

const COUNTED = [92.41, 91.655, 91.204, 90.869, 91.118, 91.29, 91.9, 91.52]

describe('lapAxis', () => {
  it('runs over the counted laps on round numbers and parks the out laps', () => {
    const axis = lapAxis(COUNTED, [124.2, 131, 93.402], [90.412])!
    expect(axis.ticksS).toEqual([91, 92, 93])
    expect(axis.majorS).toBe(1)
    expect(axis.fromS).toBeLessThan(90.412)
    expect(axis.toS).toBeGreaterThan(93.402)
    expect(axis.toS).toBeLessThan(94)
    expect(axis.parked).toEqual({ fromS: 124.2, toS: 131 })
  })

  it('does not let one slow counted lap press the others together', () => {
    const axis = lapAxis([90, 90.1, 90.2, 90.3, 90.4, 96], [], [])!
    // Outer fence: third quartile 90.375 plus three times the middle half of 0.25 is 91.125.
    expect(axis.toS).toBeLessThan(91.5)
    expect(axis.parked).toEqual({ fromS: 96, toS: 96 })
  })

  it('has no break without slow laps and no axis without laps', () => {
    expect(lapAxis([90, 91], [], [])?.parked).toBeNull()
    expect(lapAxis([], [], [])).toBeNull()
  })

  it('gives a single lap an axis wide enough to be read', () => {
    const axis = lapAxis([90], [], [])!
    expect(axis.toS - axis.fromS).toBeGreaterThanOrEqual(0.5)
    expect(axis.ticksS.length).toBeGreaterThanOrEqual(2)
  })

  it('puts every counted lap on the axis or behind its end, with 1 to 6 labels inside', () => {
    const lapTimes = fc.array(fc.double({ min: 20, max: 600, noNaN: true }), { minLength: 1, maxLength: 30 })
    fc.assert(fc.property(lapTimes, (times) => {
      const axis = lapAxis(times, [], [])!
      expect(Math.min(...times)).toBeGreaterThanOrEqual(axis.fromS)
      expect(axis.ticksS.length).toBeGreaterThanOrEqual(1)
      expect(axis.ticksS.length).toBeLessThanOrEqual(6)
      const slow = times.filter(time => time > axis.toS)
      expect(axis.parked === null).toBe(slow.length === 0)
    }))
  })
})

describe('axisGrid', () => {
  it('has small squares between the large ones, and labels on large ones', () => {
    const axis = lapAxis(COUNTED, [], [])!
    const { smallS, largeS } = axisGrid(axis)
    for (const tick of axis.ticksS) expect(largeS).toContain(tick)
    expect(smallS.length).toBeGreaterThan(largeS.length)
    expect(smallS.some(value => largeS.includes(value))).toBe(false)
  })
})

describe('stripScale', () => {
  const axis = lapAxis(COUNTED, [124.2, 131], [])!

  it('keeps the order of times, also over the break', () => {
    const scale = stripScale(axis, 520, false)
    const xs = [axis.fromS, 91, 92, axis.toS, 124.2, 128, 131].map(scale.x)
    expect(xs).toEqual([...xs].sort((a, b) => a - b))
    expect(scale.x(124.2)).toBeGreaterThan(scale.breakX!)
    expect(scale.x(131)).toBeLessThanOrEqual(520)
  })

  it('holds a time before the axis at its edge', () => {
    const scale = stripScale(axis, 358, true)
    expect(scale.x(20)).toBe(scale.x0)
  })

  it('uses the whole width when nothing is parked', () => {
    const scale = stripScale(lapAxis([90, 91], [], [])!, 520, false)
    expect(scale.breakX).toBeNull()
    expect(scale.x1).toBe(514)
  })
})
