import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { lapPath, placeOnPath } from '../../../../../server/utils/laps/place'
import { figureOfEight, oval, pointAt, times } from '../../../../support/synthetic-track'
import type { Track } from '../../../../support/synthetic-track'

/**
 * A lap from station 0 to station 0, with two seconds before and after it, and `asideM(s)` to the right of the
 * middle.
 */
function lapOf(way: Track, speedMps: number, rateHz: number, asideM: (s: number) => number = () => 0) {
  const lapTimeS = way.lengthM / speedMps
  const timeS = times(0, lapTimeS + 4, rateHz)
  const points = timeS.map((t) => {
    const s = speedMps * (t - 2)
    const { x, y, headingRad } = pointAt(way, s)
    const aside = asideM(((s % way.lengthM) + way.lengthM) % way.lengthM)
    return { x: x + aside * Math.sin(headingRad), y: y - aside * Math.cos(headingRad) }
  })
  return lapPath(timeS, points.map(({ x }) => x), points.map(({ y }) => y), 2, lapTimeS)
}

const OVAL = oval(400, 60)

describe('lapPath', () => {
  it.each([[25, 0.05], [10, 0.05], [1, 2]])('at %i Hz is as long as the track within %f m', (rateHz, toleranceM) => {
    // Chords of 2 m on 60 m radius are short by (2 / 60)^2 / 24 of the bends: 0.02 m. At 1 Hz the curve between samples
    // 30 m apart cuts the start and end of each bend by some decimetres.
    const path = lapOf(OVAL, 30, rateHz)
    expect(Math.abs(path.stationM.at(-1)! - OVAL.lengthM)).toBeLessThan(toleranceM)
    expect(path.timeS[0]).toBe(2)
    expect(path.timeS.at(-1)).toBe(2 + OVAL.lengthM / 30)
  })

  it('begins and ends exactly on the curve at the lap\'s instants, in steps of no more than about 2 m', () => {
    const path = lapOf(OVAL, 30, 10)
    expect(path.xM[0]).toBeCloseTo(0, 9)
    expect(path.xM.at(-1)).toBeCloseTo(0, 6)
    for (let i = 1; i < path.timeS.length; i++) {
      expect(path.timeS[i]).toBeGreaterThan(path.timeS[i - 1]!)
      // The curve is a little longer than the chord by which it is divided.
      expect(path.stationM[i]! - path.stationM[i - 1]!).toBeLessThan(2.1)
    }
  })

  it('refuses a lap that the samples do not cover', () => {
    const few = [0, 1, 2]
    expect(() => lapPath(few, few, few, 0.5, 2)).toThrow(expect.objectContaining({ code: 'lap_not_covered' }))
    expect(() => lapPath(few, few, few, -0.5, 1)).toThrow(expect.objectContaining({ code: 'lap_not_covered' }))
    expect(() => lapPath([], [], [], 0, 1)).toThrow(expect.objectContaining({ code: 'lap_not_covered' }))
  })
})

describe('a lap that is too long', () => {
  const tooLong = expect.objectContaining({ code: 'lap_too_long' })
  const timeS = times(0, 40, 1)
  const still = timeS.map(() => 0)

  it('is refused above 200 km before points are laid along it', () => {
    expect(() => lapPath(timeS, timeS.map(t => 190_000 * (t % 2)), still, 1, 38)).toThrow(tooLong)
    expect(() => lapPath(timeS, timeS.map(t => 1e12 * t), still, 1, 38)).toThrow(tooLong)
    // 5 km a second, for 39 s and for 41 s in all.
    const far = timeS.map(t => 5000 * t)
    expect(lapPath(timeS, far, still, 0.5, 39).stationM.at(-1)).toBeCloseTo(195_000, 3)
    expect(() => lapPath([...timeS, 41], [...far, 205_000], [...still, 0], 0, 41)).toThrow(tooLong)
  })

  it('counts no more of a stretch than lies within it', () => {
    const path = lapPath([0, 1, 2, 3], [-1e6, 0, 1000, 2000], [0, 0, 0, 0], 1, 1.5)
    expect(path.timeS.at(-1)).toBe(2.5)
  })

  it('is refused where the curve swings out between samples, with chords that are short', () => {
    // 1 km in a thousandth of a second, then 1000 s of standing: a slope of 1e6 m/s at the sample between them.
    const swinging = [0, 0, 1000, 1000, 1000]
    expect(() => lapPath([0, 1, 1.001, 1001, 1002], swinging, [0, 0, 0, 0, 0], 0.5, 1001)).toThrow(tooLong)
  })
})

describe('placeOnPath', () => {
  it('a lap on its own path is where it is', () => {
    const path = lapOf(OVAL, 30, 10)
    const stationM = placeOnPath(path, path)
    stationM.forEach((s, i) => expect(s).toBeCloseTo(path.stationM[i]!, 9))
  })

  it('a lap 5 m outside has the station of the foot of its perpendicular', () => {
    const reference = lapOf(OVAL, 30, 25)
    const outside = lapOf(OVAL, 27, 25, () => 5)
    const stationM = placeOnPath(reference, outside)
    stationM.forEach((s, i) => {
      const truth = 27 * (outside.timeS[i]! - 2)
      // Chords of 1.2 m in the reference: 0.02 m over the lap; the kink where a bend begins: centimetres.
      expect(Math.abs(s - truth)).toBeLessThan(0.1)
    })
  })

  it('is rising, 0 at the start and the length at the end, whatever was driven', () => {
    const between = (min: number, max: number) => fc.double({ min, max, noNaN: true })
    const wander = fc.tuple(between(-12, 12), between(0.001, 0.05), fc.integer({ min: 1, max: 25 }), between(10, 50))
    const reference = lapOf(OVAL, 30, 10)
    fc.assert(fc.property(wander, ([wide, often, rateHz, speed]) => {
      const stationM = placeOnPath(reference, lapOf(OVAL, speed, rateHz, s => wide * Math.sin(often * s)))
      expect(stationM[0]).toBe(0)
      expect(stationM.at(-1)).toBe(reference.stationM.at(-1))
      for (let i = 1; i < stationM.length; i++) expect(stationM[i]).toBeGreaterThanOrEqual(stationM[i - 1]!)
    }), { numRuns: 50 })
  })

  it('stands still while a car rolls back', () => {
    const reference = lapOf(OVAL, 30, 10)
    // From 50 m to 60 m, back to 54 m, and on.
    const ways = [...times(0, 60, 1), ...times(0, 6, 1).map(d => 60 - d), ...times(55, 120, 1)]
    const path = lapPath(times(0, ways.length - 1, 1), ways, ways.map(() => 0), 3, ways.length - 6)
    const stationM = placeOnPath(reference, path)
    for (let i = 1; i < stationM.length; i++) expect(stationM[i]).toBeGreaterThanOrEqual(stationM[i - 1]!)
    const back = path.timeS.findIndex(t => t >= 67)
    // The curve through the samples turns within a decimetre or two of the last one.
    expect(path.xM[back]).toBeCloseTo(54, 0)
    expect(Math.abs(stationM[back]! - 60)).toBeLessThan(0.2)
  })

  it('does not mistake a straight 12 m away for its own', () => {
    const narrow = oval(400, 6)
    const reference = lapOf(narrow, 25, 10)
    // 7 m inside on the straights: nearer to the other straight than to its own.
    const lap = lapOf(narrow, 24, 10, s => s > 20 && s < 180 ? -7 * Math.sin((s - 20) / 160 * Math.PI) : 0)
    placeOnPath(reference, lap).forEach((s, i) => expect(Math.abs(s - 24 * (lap.timeS[i]! - 2))).toBeLessThan(1.5))
  })

  it('does not turn off where a figure of eight crosses itself', () => {
    const eight = figureOfEight(40)
    const reference = lapOf(eight, 20, 10)
    const lap = lapOf(eight, 18, 10, s => 2 * Math.sin(s / 50))
    placeOnPath(reference, lap).forEach((s, i) => expect(Math.abs(s - 18 * (lap.timeS[i]! - 2))).toBeLessThan(3))
  })

  it('finds back after an excursion of 60 m', () => {
    const reference = lapOf(OVAL, 30, 10)
    const lap = lapOf(OVAL, 28, 10, s => s > 450 && s < 750 ? 60 * Math.sin((s - 450) / 300 * Math.PI) : 0)
    placeOnPath(reference, lap).forEach((s, i) => {
      const truth = 28 * (lap.timeS[i]! - 2)
      if (truth < 440 || truth > 800) expect(Math.abs(s - truth)).toBeLessThan(1)
    })
  })

  it('does not take long over a lap that never comes near the reference', () => {
    const timeS = times(0, 400, 1)
    const far = timeS.map(t => 450 * t)
    const along = (asideM: number) => lapPath(timeS, far, timeS.map(() => asideM), 0, 400)
    const [reference, aside] = [along(0), along(500)]
    const before = process.cpuUsage()
    const stationM = placeOnPath(reference, aside)
    const { user, system } = process.cpuUsage(before)
    expect(stationM.at(-2)).toBe(0)
    expect(stationM.at(-1)).toBe(reference.stationM.at(-1))
    // 180 km: a search at every point takes half a minute, this a quarter of a second.
    expect((user + system) / 1e6).toBeLessThan(3)
  })

  it('finds back after a short cut of 120 m that leaves out 388 m', () => {
    const reference = lapOf(OVAL, 30, 10)
    // From the southern straight right across to the northern one: 120 m instead of 2 x 100 m and the bend of 188 m.
    const knots: [number, number][] = [[-40, 0], [100, 0], [100, 120], [-200, 120]]
    const timeS: number[] = []
    const xM: number[] = []
    const yM: number[] = []
    for (let k = 1; k < knots.length; k++) {
      const [x0, y0] = knots[k - 1]!
      const [x1, y1] = knots[k]!
      const steps = Math.round(Math.hypot(x1 - x0, y1 - y0) / 2)
      for (let i = 0; i < steps; i++) {
        timeS.push(timeS.length * 0.1)
        xM.push(x0 + (x1 - x0) * i / steps)
        yM.push(y0 + (y1 - y0) * i / steps)
      }
    }
    const part = lapPath(timeS, xM, yM, 2, timeS.at(-1)! - 2.5)
    const stationM = placeOnPath(reference, part)
    // On the northern straight, 200 m + the bend + (200 - x) along.
    const i = part.xM.findIndex((x, k) => part.yM[k]! > 119 && x < -50)
    expect(stationM[i]).toBeCloseTo(200 + Math.PI * 60 + 200 - part.xM[i]!, 0)
  })
})
