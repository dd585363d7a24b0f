import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import {
  bestLap, bestSectors, countedLaps, lapFigures, lapStandings, leftOutReason, median, middleHalf, quantile,
  shownDifferenceS, shownSectors, sumOfBestSectors, type LapFigure,
} from '../../../shared/laps'

function lap(timeS: number, more: Partial<LapFigure> = {}): LapFigure {
  return { kind: 'timed', timeS, sectorsS: [timeS], flags: [], excluded: false, excludedReason: '', ...more }
}

describe('lapStandings', () => {
  it('counts timed laps within 107 % of the best, and says why the others do not', () => {
    const laps = [
      lap(124.2, { kind: 'out', sectorsS: [] }),
      lap(91.2),
      lap(93.4, { excluded: true, excludedReason: 'traffic, corner 8' }),
      lap(92, { flags: ['gap_at_line'] }),
      lap(90),
      lap(96.3),
      lap(96.301),
      lap(131, { kind: 'in', sectorsS: [] }),
    ]
    const standings = lapStandings(laps)
    // 1.07 * 90 is 96.3 exactly in decimal; the lap that is equal to it counts, a millisecond more does not.
    expect(standings).toEqual(['out', 'counted', 'excluded', 'gap', 'counted', 'counted', 'slow', 'in'])
    expect(laps.map((each, i) => leftOutReason(each, standings[i]!))).toEqual(
      ['', '', 'traffic, corner 8', 'no fix at a line', '', '', 'over 107 % of the best', ''],
    )
  })

  it('takes the 107 % from the best lap that counts, not from an excluded or doubtful one', () => {
    const cut = lap(60, { excluded: true, excludedReason: 'cut the course' })
    const doubtful = lap(61, { flags: ['gap_at_line'] })
    expect(lapStandings([cut, doubtful, lap(90), lap(95)])).toEqual(['excluded', 'gap', 'counted', 'counted'])
  })

  it('keeps a lap that missed a sector line: its time is not in doubt', () => {
    expect(lapStandings([lap(90, { flags: ['missed_sector'], sectorsS: [null, null, 31] })])).toEqual(['counted'])
  })

  it('leave out what a log added earlier has already, even where it was the fastest', () => {
    const laps = [lap(90), lap(89, { flags: ['repeated'] }), lap(91, { flags: ['gap_at_line', 'repeated'] }), lap(96)]
    expect(lapStandings(laps)).toEqual(['counted', 'repeated', 'repeated', 'counted'])
    expect(leftOutReason(laps[1]!, 'repeated')).toBe('the log added first counts')
  })

  it('has nothing to say of no laps', () => {
    expect(lapStandings([])).toEqual([])
    expect(bestLap([])).toBeNull()
  })

  it('always counts the best of the laps that are neither excluded nor doubtful', () => {
    fc.assert(fc.property(fc.array(fc.double({ min: 20, max: 600, noNaN: true }), { minLength: 1 }), (times) => {
      const counted = countedLaps(times.map(time => lap(time)))
      expect(bestLap(counted)?.timeS).toBe(Math.min(...times))
    }))
  })
})

describe('quantile, type 7', () => {
  it('agrees with an independent implementation', () => {
    // Python 3 standard library: statistics.quantiles(range(1, 11), n=4, method='inclusive') -> [3.25, 5.5, 7.75].
    const values = [10, 1, 9, 2, 8, 3, 7, 4, 6, 5]
    expect([0.25, 0.5, 0.75].map(p => quantile(values, p))).toEqual([3.25, 5.5, 7.75])
    expect(middleHalf(values)).toBe(4.5)
    expect(values[0]).toBe(10)
  })

  it('is the value itself of one, and missing of none', () => {
    expect(median([91.5])).toBe(91.5)
    expect(middleHalf([91.5])).toBe(0)
    expect(median([])).toBeNaN()
  })

  it('stays within the sample and rises with p', () => {
    const samples = fc.array(fc.double({ min: -1e6, max: 1e6, noNaN: true }), { minLength: 1 })
    const share = fc.double({ min: 0, max: 1, noNaN: true })
    fc.assert(fc.property(samples, share, share, (values, p, q) => {
      const [a, b] = [quantile(values, Math.min(p, q)), quantile(values, Math.max(p, q))]
      // Interpolation rounds in the last place: 1e-9 of a sample that reaches 1e6 is a few units in that place.
      expect(a).toBeLessThanOrEqual(b + 1e-9)
      expect(a).toBeGreaterThanOrEqual(Math.min(...values) - 1e-9)
      expect(b).toBeLessThanOrEqual(Math.max(...values) + 1e-9)
    }))
  })
})

describe('sectors', () => {
  it('shows sectors that add up to the shown lap', () => {
    // Rounded one by one these are 30.000 + 30.000 + 30.000 = 90.000, but the lap is 90.001.
    expect(shownSectors({ sectorsS: [30.0004, 30.0004, 30.0004] })).toEqual([30, 30.001, 30])
    const sectors = fc.array(fc.double({ min: 1, max: 100, noNaN: true }), { minLength: 1, maxLength: 20 })
    fc.assert(fc.property(sectors, (sectorsS) => {
      const sum = shownSectors({ sectorsS }).reduce<number>((total, sector) => total + Math.round(sector! * 1000), 0)
      expect(sum).toBe(Math.round(sectorsS.reduce((total, sector) => total + sector, 0) * 1000))
    }))
  })

  it('leaves a missed sector blank and carries on behind it', () => {
    expect(shownSectors({ sectorsS: [30.0004, null, 30.0004] })).toEqual([30, null, 30])
  })

  it('adds the best of each sector', () => {
    const laps = [{ sectorsS: [30, 31, 32] }, { sectorsS: [29, null, 33] }, { sectorsS: [31, 30.5, 31.5] }]
    expect(bestSectors(laps)).toEqual([29, 30.5, 31.5])
    expect(sumOfBestSectors(laps)).toBe(91)
  })

  it('has no sum without sector lines, without laps, or with a sector that nobody has', () => {
    expect(sumOfBestSectors([{ sectorsS: [90] }])).toBeNull()
    expect(sumOfBestSectors([])).toBeNull()
    expect(sumOfBestSectors([{ sectorsS: [30, null] }])).toBeNull()
  })
})

describe('shownDifferenceS', () => {
  it('differs as the shown times do', () => {
    expect(shownDifferenceS(1.00049, 1.00051)).toBe(-0.001)
    expect(shownDifferenceS(1.0006, 1.0014)).toBe(0)
  })
})

describe('lapFigures', () => {
  it('judges each outing by its own best and then puts the laps together', () => {
    // 97 s is 107.8 % of 90 s, but the best of its own outing.
    const figures = lapFigures([[lap(90), lap(91)], [lap(97), lap(98)]])
    expect(figures.counted.map(each => each.timeS)).toEqual([90, 91, 97, 98])
    expect(figures.best?.timeS).toBe(90)
    expect(figures.medianS).toBe(94)
  })

  it('leaves an excluded lap out of the sum of best sectors', () => {
    const laps = [lap(90, { sectorsS: [45, 45] }), lap(88, { sectorsS: [40, 48], excluded: true, excludedReason: 'cut corner 2' })]
    expect(lapFigures([laps]).sumOfBestS).toBe(90)
  })
})
