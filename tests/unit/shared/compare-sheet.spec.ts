import { describe, expect, it } from 'vitest'
import { sheetOf } from '../../../shared/compare-sheet'
import { plain } from '../../../shared/compare-words'
import { makeFigures, STANDARD_CHOICE } from '../../../shared/figures'
import { someComparison, someLap } from './compare-fixture'

const standard = makeFigures(STANDARD_CHOICE)

describe('sheetOf', () => {
  it('carries no trace', () => {
    const sheet = sheetOf(someComparison(), standard)
    expect(Object.keys(sheet.lap)).not.toContain('speed')
    expect(Object.keys(sheet.against)).not.toContain('lateral')
    expect(sheet.lengthM).toBe(400)
    expect(sheet.totalS).toBe(0.613)
    expect(sheet.startM).toBe(0)
  })

  it('writes the finding of each trace', () => {
    const lap = someLap({
      speed: [40, 25, 20, 30, 40],
      longitudinal: [1, -9.80665, -2, 3, 2],
      lateral: [0, -8, 4.903325, -9, 0],
    })
    expect(sheetOf(someComparison({ lap }), standard).titles).toEqual({
      speed: 'most apart at 100 m, 18 km/h slower',
      difference: '+0.61 at 400 m, +0.613 at the line',
      longitudinal: 'hardest braking 1.00 against 0.92',
      lateral: 'most to the left 0.50 against 0.31, to the right 0.92 against 0.92',
    })
  })

  it('writes them in the reader’s units and language', () => {
    const { titles, finding } = sheetOf(someComparison({ lap: someLap({ speed: [40, 25, 20, 30, 40] }), sectorLinesM: [] }), makeFigures({ units: 'imperial', numberLanguage: 'de-DE' }))
    // 5 m/s are 11.18 mph of 0.44704 m/s; 100, 200 and 400 m are 328.1, 656.2 and 1312.3 ft of 0.3048 m.
    expect(titles.speed).toBe('most apart at 328 ft, 11 mph slower')
    expect(titles.difference).toBe('+0,61 at 1312 ft, +0,613 at the line')
    expect(plain(finding.lead)).toBe('Lap 7 (1:31,482) is 0,613 s slower than lap 4 of outing 1. Most was lost between 328 ft and 656 ft: 0,400 s.')
  })

  it('says when a trace is not there', () => {
    const nothing = [null, null, null, null, null]
    expect(sheetOf(someComparison({ lap: someLap({ lateral: nothing }) }), standard).titles.lateral).toBe('not in both logs')
  })

  it('keeps both ends of a long outline and thins it', () => {
    const n = 3105
    const line = Array.from({ length: n }, (_, i) => i)
    const { path } = sheetOf(someComparison({ stationM: line, pathM: { x: line, y: line } }), standard)
    expect(path.stationM.length).toBeLessThan(700)
    expect([path.stationM[0], path.stationM.at(-1)]).toEqual([0, 3104])
  })
})
