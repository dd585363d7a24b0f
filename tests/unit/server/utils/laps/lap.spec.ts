import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { cutLaps } from '../../../../../server/utils/laps/lap'
import { makePlane } from '../../../../../shared/plane'
import {
  asLog, drive, figureOfEight, HARROW_FELL, lineAcross, oval, pointAt, reversed, times, timingLine, track,
} from '../../../../support/synthetic-track'
import type { CutResult } from '../../../../../server/utils/laps/types'
import type { PlanePoint, Track } from '../../../../support/synthetic-track'

const OVAL = oval(400, 60)
/** Brakes and speeds up through bends and straights alike; comes back to 45 m/s. */
const LIVELY = drive([
  { lengthM: OVAL.lengthM * 0.2, accelMps2: -4 },
  { lengthM: OVAL.lengthM * 0.3, accelMps2: 8 / 3 },
  { lengthM: OVAL.lengthM * 0.2, accelMps2: -2 },
  { lengthM: OVAL.lengthM * 0.3, accelMps2: 4 / 3 },
], 45)
const STEADY = drive([{ lengthM: OVAL.lengthM, accelMps2: 0 }], 30)

type Drive = ReturnType<typeof drive>

function driven(way: Track, by: Drive, rateHz: number, fromM: number, laps: number, plane = HARROW_FELL) {
  const timeS = times(0, by.timeAt(fromM + laps * way.lengthM) - by.timeAt(fromM), rateHz)
  return asLog(timeS, timeS.map(t => pointAt(way, by.stationAt(t + by.timeAt(fromM)))), plane)
}

const none = { direction: null } as const
const timedOf = ({ laps }: CutResult) => laps.filter(({ kind }) => kind === 'timed')
const linesAt = (way: Track, stations: number[], plane = HARROW_FELL) =>
  stations.map((station, k) => timingLine(k, lineAcross(way, station), plane))
const between = (min: number, max: number) => fc.double({ min, max, noNaN: true })

describe('cutLaps against closed-form truth', () => {
  const stations = [37, 0.27 * OVAL.lengthM, 0.62 * OVAL.lengthM]
  const lines = stations.map((station, k) => timingLine(k, lineAcross(OVAL, station)))
  const fromM = 800

  // 1 ms at 25 Hz is promised. In bends the curve is off by micrometres, and these lines lie no nearer than a sample to
  // where an acceleration or a bend begins. 1 Hz: 0.6 m for 1 g, here half a g at 30 m/s, plus 5 cm in bends.
  it.each([[25, 0.0002], [10, 0.0005], [1, 0.05]])('laps and sectors of a lively lap at %i Hz within %f s', (rateHz, toleranceS) => {
    const { laps, warnings } = cutLaps(driven(OVAL, LIVELY, rateHz, fromM, 5.3), lines, none)
    expect(warnings).toEqual([])
    expect(laps.map(({ number, kind }) => `${number} ${kind}`)).toEqual(
      ['0 out', '1 timed', '2 timed', '3 timed', '4 timed', '5 in'])
    const marks = [...stations, OVAL.lengthM + stations[0]!].map(station => LIVELY.timeAt(station))
    for (const lap of laps.filter(({ kind }) => kind === 'timed')) {
      const startS = LIVELY.timeAt(stations[0]! + lap.number * OVAL.lengthM) - LIVELY.timeAt(fromM)
      expect(Math.abs(lap.startS - startS)).toBeLessThan(toleranceS)
      expect(Math.abs(lap.timeS - LIVELY.lapTimeS)).toBeLessThan(toleranceS)
      const offS = lap.sectorsS.map((sectorS, k) => Math.abs(sectorS! - (marks[k + 1]! - marks[k]!)))
      expect(Math.max(...offS)).toBeLessThan(toleranceS)
    }
  })

  it.each([[25, 0.1], [10, 0.3], [1, 50]])('wherever the line is drawn, at %i Hz no lap is off by more than %f ms', (rateHz, mostMs) => {
    // Worst over 40 lines, some of them where braking or a bend begins: 0.044, 0.109 and 19.5 ms, so about twice that.
    let worstMs = 0
    for (let k = 0; k < 40; k++) {
      const from = fromM + 0.37 * k
      const lines = linesAt(OVAL, [OVAL.lengthM * k / 40])
      const timed = timedOf(cutLaps(driven(OVAL, LIVELY, rateHz, from, 4), lines, none))
      expect(timed.length).toBeGreaterThanOrEqual(2)
      for (const lap of timed) worstMs = Math.max(worstMs, 1000 * Math.abs(lap.timeS - LIVELY.lapTimeS))
    }
    expect(worstMs).toBeLessThan(mostMs)
    expect(worstMs).toBeGreaterThan(0)
  })

  it('at constant speed lap times are the length over the speed, to a microsecond at 25 Hz on straights', () => {
    const { laps } = cutLaps(driven(OVAL, STEADY, 25, 900, 4.5), [timingLine(0, lineAcross(OVAL, 37))], none)
    // What is left is the plane's 4e-9 of a step and rounding of degrees.
    for (const lap of laps.filter(({ kind }) => kind === 'timed')) expect(lap.timeS).toBeCloseTo(OVAL.lengthM / 30, 6)
  })

  it('laps follow one another from the first sample to the last, and sectors add up', () => {
    fc.assert(fc.property(fc.integer({ min: 1, max: 25 }), between(0, 1100), between(0.1, 5), (rateHz, from, count) => {
      const log = driven(OVAL, LIVELY, rateHz, from, count)
      fc.pre(log.timeS.length > 1)
      const { laps } = cutLaps(log, lines, none)
      expect(laps[0]!.startS).toBe(log.timeS[0])
      const last = laps.at(-1)!
      // One rounding each.
      expect(last.startS + last.timeS).toBeCloseTo(log.timeS.at(-1)!, 9)
      laps.slice(1).forEach((lap, k) => expect(lap.startS).toBeCloseTo(laps[k]!.startS + laps[k]!.timeS, 9))
      for (const lap of laps.filter(({ kind }) => kind === 'timed')) {
        expect(lap.sectorsS).toHaveLength(3)
        const sumS = lap.sectorsS.reduce<number>((sum, sectorS) => sum + (sectorS ?? Number.NaN), 0)
        if (!lap.flags.includes('missed_sector')) expect(sumS).toBeCloseTo(lap.timeS, 9)
      }
    }), { numRuns: 40 })
  })
})

describe('what must not change laps', () => {
  const ends = [lineAcross(OVAL, 37), lineAcross(OVAL, 300), lineAcross(OVAL, 700)]
  const lines = ends.map((end, k) => timingLine(k, end))
  const log = driven(OVAL, LIVELY, 10, 800, 3.4)
  const cut = cutLaps(log, lines, none)

  it('the way a line was drawn: equal bit for bit', () => {
    const swapped = lines.map(line => ({ ...line, a: line.b, b: line.a }))
    expect(cutLaps(log, swapped, none)).toEqual(cut)
    expect(cut.laps.filter(({ kind }) => kind === 'timed')).toHaveLength(3)
  })

  it('the order of the lines', () => {
    expect(cutLaps(log, [...lines].reverse(), none).laps).toEqual(cut.laps)
  })

  it('the clock: every start moves, no duration does', () => {
    fc.assert(fc.property(fc.double({ min: -1e5, max: 1e5, noNaN: true }), (shiftS) => {
      const shifted = cutLaps({ ...log, timeS: log.timeS.map(t => t + shiftS) }, lines, none)
      expect(shifted.laps).toHaveLength(cut.laps.length)
      shifted.laps.forEach((lap, k) => {
        // A clock of 1e5 s is rounded to 1e-11.
        expect(lap.startS - shiftS).toBeCloseTo(cut.laps[k]!.startS, 8)
        expect(lap.timeS).toBeCloseTo(cut.laps[k]!.timeS, 8)
      })
    }), { numRuns: 20 })
  })

  it('where on earth, and how the track lies', () => {
    const longitudes = fc.oneof(fc.constant(180), fc.constant(-179.999), between(-180, 180))
    const anywhere = fc.tuple(between(-75, 75), longitudes, between(0, 6.28))
    fc.assert(fc.property(anywhere, ([latitudeDeg, longitudeDeg, turn]) => {
      const plane = makePlane(latitudeDeg, longitudeDeg)
      const turned = track(OVAL.pieces, 300, -200, turn)
      const there = driven(turned, LIVELY, 10, 800, 3.4, plane)
      const moved = cutLaps(there, linesAt(turned, [37, 300, 700], plane), none)
      expect(moved.laps).toHaveLength(cut.laps.length)
      moved.laps.forEach((lap, k) => {
        // Between the two planes lengths differ by up to 5e-8 within 1 km, and so does what little there is of
        // curvature.
        expect(lap.timeS).toBeCloseTo(cut.laps[k]!.timeS, 5)
        lap.sectorsS.forEach((sectorS, s) => expect(sectorS!).toBeCloseTo(cut.laps[k]!.sectorsS[s]!, 5))
      })
    }), { numRuns: 25 })
  })
})

describe('the 180th meridian', () => {
  it('runs along the track and through the line', () => {
    const plane = makePlane(-17, 180)
    const north = track(OVAL.pieces, 0, 0, Math.PI / 2)
    const [line] = linesAt(north, [37], plane)
    expect(Math.sign(line!.a.longitudeDeg)).toBe(-Math.sign(line!.b.longitudeDeg))
    // A plane on the far side of the earth would show the track from below, clockwise.
    const timed = timedOf(cutLaps(driven(north, STEADY, 10, 800, 3.4, plane), [line!], { direction: 'anticlockwise' }))
    expect(timed).toHaveLength(3)
    for (const lap of timed) expect(lap.timeS).toBeCloseTo(STEADY.lapTimeS, 5)
  })
})

describe('directions', () => {
  const line = timingLine(0, lineAcross(OVAL, 37))
  const back = driven(reversed(OVAL), STEADY, 10, 500, 3.7)

  it('a log driven the way of the layout counts, the other way does not and says so', () => {
    expect(timedOf(cutLaps(back, [line], { direction: 'clockwise' }))).toHaveLength(3)
    const wrong = cutLaps(back, [line], { direction: 'anticlockwise' })
    expect(wrong.laps).toEqual([{ number: 0, kind: 'out', startS: 0, timeS: back.timeS.at(-1), sectorsS: [], flags: [] }])
    expect(wrong.warnings.map(({ code }) => code)).toEqual(['wrong_direction'])
    expect(wrong.lines).toEqual([{ id: 'line-0', crossed: 0, ignored: 4, offSquareDeg: null }])
  })

  it('without a direction either way counts', () => {
    expect(cutLaps(back, [line], none).laps.filter(({ kind }) => kind === 'timed')).toHaveLength(3)
  })
})

describe('tracks that come close to themselves', () => {
  it('a line that also cuts the other straight counts where it was meant', () => {
    const narrow = oval(400, 10)
    const log = driven(narrow, drive([{ lengthM: narrow.lengthM, accelMps2: 0 }], 25), 10, 150, 4.2)
    // From 6 m outside the southern straight to 4 m beyond the northern one, 20 m away: the middle is nearer to the
    // south.
    const long = timingLine(0, lineAcross(narrow, 20, 23, 6 + 9))
    const { laps, lines, warnings } = cutLaps(log, [long], none)
    const timed = laps.filter(({ kind }) => kind === 'timed')
    expect(timed).toHaveLength(3)
    for (const lap of timed) expect(lap.timeS).toBeCloseTo(narrow.lengthM / 25, 4)
    expect(timed[0]!.startS).toBeCloseTo((narrow.lengthM - 150 + 20) / 25, 4)
    expect(lines[0]).toMatchObject({ crossed: 4, ignored: 4 })
    expect(warnings.map(({ code }) => code)).toEqual(['line_crossed_twice'])
  })

  it('a short line between close parallel straights counts one of them, without a warning', () => {
    const narrow = oval(400, 6)
    const log = driven(narrow, drive([{ lengthM: narrow.lengthM, accelMps2: 0 }], 25), 10, 150, 4.2)
    const { laps, warnings } = cutLaps(log, [timingLine(0, lineAcross(narrow, 20, 6, 6))], none)
    expect(laps.filter(({ kind }) => kind === 'timed')).toHaveLength(3)
    expect(warnings).toEqual([])
  })

  it('a figure of eight with lines on both loops', () => {
    const eight = figureOfEight(60)
    const log = driven(eight, drive([{ lengthM: eight.lengthM, accelMps2: 0 }], 20), 25, 600, 3.7)
    const lines = [100, 300, 500].map((station, k) => timingLine(k, lineAcross(eight, station, 8, 8)))
    for (const direction of [null, 'clockwise', 'anticlockwise'] as const) {
      const { laps, warnings } = cutLaps(log, lines, { direction })
      const timed = laps.filter(({ kind }) => kind === 'timed')
      expect(warnings).toEqual([])
      expect(timed).toHaveLength(3)
      // Bends of 0.33 rad/s at 25 Hz: microseconds.
      for (const lap of timed) {
        expect(lap.timeS).toBeCloseTo(eight.lengthM / 20, 4)
        expect(lap.sectorsS[0]).toBeCloseTo(200 / 20, 4)
        expect(lap.sectorsS[1]).toBeCloseTo(200 / 20, 4)
      }
    }
  })
})

describe('waiting and rolling back', () => {
  /** Two laps, then onto the line for half a minute, with metres of sway and noise, then two more. */
  function withWait(stopM: number, swayM: number) {
    const perLapS = OVAL.lengthM / 30
    const stopS = 0.5 * perLapS + 2 * perLapS + stopM / 30
    const timeS = times(0, 4.9 * perLapS + 30, 10)
    const points = timeS.map((t): PlanePoint => {
      const from = OVAL.lengthM / 2
      if (t <= stopS) return pointAt(OVAL, from + 30 * t)
      if (t >= stopS + 30) return pointAt(OVAL, from + 30 * (t - 30))
      const backM = swayM * (1 - Math.cos((t - stopS) / 30 * 2 * Math.PI))
      return pointAt(OVAL, from + 30 * stopS - backM + 0.3 * Math.sin(129.898 * t))
    })
    return cutLaps(asLog(timeS, points), [timingLine(0, lineAcross(OVAL, OVAL.lengthM))], none)
  }

  it.each([[0, 0], [0.2, 0.5], [3, 4]])('stopping %f m beyond the line and swaying %f m counts once', (stopM, swayM) => {
    const { laps, lines, warnings } = withWait(stopM, swayM)
    const timed = laps.filter(({ kind }) => kind === 'timed')
    expect(timed).toHaveLength(4)
    expect(lines[0]!.crossed).toBe(5)
    expect(lines[0]!.ignored).toBeGreaterThan(1)
    expect(warnings).toEqual([])
    // The lap after the wait holds it, whichever of the first crossings stands.
    expect(timed[2]!.timeS).toBeGreaterThan(OVAL.lengthM / 30 + 25)
    expect(timed[3]!.timeS).toBeCloseTo(OVAL.lengthM / 30, 4)
  })
})

describe('sectors', () => {
  it('a missed line makes both its neighbours unknown and leaves the lap its time', () => {
    const lines = linesAt(OVAL, [37, 300, 600, 900])
    const timeS = times(0, 4.2 * STEADY.lapTimeS, 25)
    // In the second timed lap the car passes 15 m outside line 2.
    const points = timeS.map((t) => {
      const s = 30 * t + 800
      const on = s - 2 * OVAL.lengthM - 500
      const aside = on > 0 && on < 200 ? 15 * Math.sin(on / 200 * Math.PI) : 0
      const { x, y, headingRad } = pointAt(OVAL, s)
      return { x: x + aside * Math.sin(headingRad), y: y - aside * Math.cos(headingRad) }
    })
    const { laps, lines: counts, warnings } = cutLaps(asLog(timeS, points), lines, none)
    const timed = laps.filter(({ kind }) => kind === 'timed')
    expect(timed.map(({ sectorsS }) => sectorsS.map(s => s === null))).toEqual([
      [false, false, false, false], [false, true, true, false], [false, false, false, false]])
    expect(timed.map(({ flags }) => flags)).toEqual([[], ['missed_sector'], []])
    expect(timed[1]!.sectorsS[0]).toBeCloseTo((300 - 37) / 30, 3)
    expect(timed[1]!.sectorsS[3]).toBeCloseTo((OVAL.lengthM + 37 - 900) / 30, 3)
    expect(counts.map(({ crossed }) => crossed)).toEqual([4, 4, 3, 5])
    expect(warnings).toEqual([])
  })

  it('out and in laps have none', () => {
    const { laps } = cutLaps(driven(OVAL, STEADY, 10, 800, 2.5), linesAt(OVAL, [37, 300]), none)
    expect(laps.filter(({ kind }) => kind !== 'timed').map(({ sectorsS }) => sectorsS)).toEqual([[], []])
  })
})

describe('gaps', () => {
  const line = timingLine(0, lineAcross(OVAL, 37))
  function holed(points: (t: number) => PlanePoint, keepRows: boolean) {
    const at = (2 * OVAL.lengthM + 37 - 800) / 30
    const gap = { fromS: Math.floor((at - 1) * 10) / 10, toS: Math.floor((at + 1.2) * 10) / 10 }
    const outside = (t: number) => t <= gap.fromS + 1e-9 || t >= gap.toS - 1e-9
    const timeS = times(0, 4.2 * STEADY.lapTimeS, 10).filter(t => keepRows || outside(t))
    return cutLaps(asLog(timeS, timeS.map(points), HARROW_FELL, [gap]), [line], none)
  }

  it('a crossing in a gap that both sides agree with counts, and both laps are marked', () => {
    const { laps } = holed(t => pointAt(OVAL, 30 * t + 800), false)
    const timed = laps.filter(({ kind }) => kind === 'timed')
    expect(timed.map(({ flags }) => flags)).toEqual([['gap_at_line'], ['gap_at_line'], []])
    expect(timed[0]!.timeS).toBeCloseTo(STEADY.lapTimeS, 3)
  })

  it('rows that were filled in inside the gap do not count as positions', () => {
    // They lie 30 m off the track, so a path through them would not cross the line.
    const gapMid = (2 * OVAL.lengthM + 37 - 800) / 30
    const { laps } = holed((t) => {
      const point = pointAt(OVAL, 30 * t + 800)
      return Math.abs(t - gapMid) < 0.9 ? { ...point, y: point.y - 30 } : point
    }, true)
    expect(laps.filter(({ kind }) => kind === 'timed').map(({ flags }) => flags)).toEqual([['gap_at_line'], ['gap_at_line'], []])
  })

  it('a crossing that the sides do not agree with is not used, and the lap says why', () => {
    // In 2.2 s the car came 466 m further: nobody drives that fast. The crossing after lap 1 is lost, laps 1 and 2
    // are one.
    const gapMid = (2 * OVAL.lengthM + 37 - 800) / 30
    const { laps } = holed(t => pointAt(OVAL, 30 * t + 800 + (t > gapMid ? 400 : 0)), false)
    const timed = laps.filter(({ kind }) => kind === 'timed')
    expect(timed.map(({ flags }) => flags)).toEqual([['gap_at_line'], [], []])
  })

  it('missing positions are passed over', () => {
    const log = driven(OVAL, STEADY, 10, 800, 4.2)
    const whole = cutLaps(log, [line], none)
    const latitudeDeg = log.latitudeDeg.map((value, i) => i % 7 === 3 ? Number.NaN : value)
    const { laps } = cutLaps({ ...log, latitudeDeg }, [line], none)
    expect(laps).toHaveLength(whole.laps.length)
    laps.forEach((lap, k) => expect(lap.timeS).toBeCloseTo(whole.laps[k]!.timeS, 3))
  })
})

describe('what is refused, and what is only said', () => {
  const log = driven(OVAL, STEADY, 10, 800, 3.2)

  it('refuses to cut without a start/finish line', () => {
    expect(() => cutLaps(log, [timingLine(1, lineAcross(OVAL, 300))], none)).toThrow(expect.objectContaining({ code: 'no_start_line' }))
  })

  it('refuses a line of one point, columns of different length and a log without positions', () => {
    const line = timingLine(0, lineAcross(OVAL, 37))
    expect(() => cutLaps(log, [{ ...line, b: line.a }], none)).toThrow(expect.objectContaining({ code: 'line_without_length' }))
    expect(() => cutLaps({ ...log, timeS: log.timeS.slice(1) }, [line], none)).toThrow(expect.objectContaining({ code: 'length_mismatch' }))
    expect(() => cutLaps({ ...log, latitudeDeg: log.latitudeDeg.map(() => Number.NaN) }, [line], none)).toThrow(expect.objectContaining({ code: 'no_position' }))
  })

  it('refuses a line that is crossed thousands of times', () => {
    const crossing = (count: number) => {
      const timeS = times(0, count, 1)
      return asLog(timeS, timeS.map(t => ({ x: t % 2 ? 200 : -200, y: 0 })))
    }
    const line = timingLine(0, { a: { x: 0, y: -10 }, b: { x: 0, y: 10 } })
    expect(() => cutLaps(crossing(2001), [line], none)).toThrow(expect.objectContaining({ code: 'line_crossed_too_often' }))
    expect(cutLaps(crossing(2000), [line], none).lines[0]!.crossed).toBe(1000)
  })

  it('a line that is never crossed makes one out lap', () => {
    const { laps, warnings } = cutLaps(log, [timingLine(0, { a: { x: 0, y: 40 }, b: { x: 0, y: 60 } })], none)
    expect(laps).toHaveLength(1)
    expect(laps[0]).toMatchObject({ kind: 'out', number: 0, startS: 0 })
    expect(warnings.map(({ code }) => code)).toEqual(['line_never_crossed'])
  })

  it('does not change what it was given', () => {
    const lines = Object.freeze([timingLine(1, lineAcross(OVAL, 300)), timingLine(0, lineAcross(OVAL, 37))])
    const before = structuredClone(log)
    cutLaps(log, lines, none)
    expect(log).toEqual(before)
  })
})

describe('cost', () => {
  it('720 000 samples (2 h at 100 Hz) with four lines', () => {
    const timeS = times(0, 7200, 100)
    const log = asLog(timeS, timeS.map(t => pointAt(OVAL, 30 * t)))
    const lines = [37, 300, 600, 900].map((station, k) => timingLine(k, lineAcross(OVAL, station)))
    const began = process.cpuUsage()
    const { laps } = cutLaps(log, lines, none)
    const { user, system } = process.cpuUsage(began)
    const tookMs = (user + system) / 1000
    expect(laps.filter(({ kind }) => kind === 'timed')).toHaveLength(Math.floor((7200 * 30 - 37) / OVAL.lengthM))
    // Time of the processor, which does not depend on who else is at work: about 0.6 s; what is left is for slower
    // machines.
    expect(tookMs).toBeLessThan(2000)
    console.info(`cutLaps: 720 000 samples, 4 lines, ${tookMs.toFixed(0)} ms of processor time`)
  }, 30_000)
})
