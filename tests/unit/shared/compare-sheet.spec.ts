import { describe, expect, it } from 'vitest'
import { sheetOf } from '../../../shared/compare-sheet'
import { someComparison, someLap } from './compare-fixture'

describe('sheetOf', () => {
  it('carries no trace', () => {
    const sheet = sheetOf(someComparison())
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
    expect(sheetOf(someComparison({ lap })).titles).toEqual({
      speed: 'most apart at 100 m, 18 km/h slower',
      difference: '+0.61 at 400 m, +0.613 at the line',
      longitudinal: 'hardest braking 1.00 against 0.92',
      lateral: 'most to the left 0.50 against 0.31, to the right 0.92 against 0.92',
    })
  })

  it('says when a trace is not there', () => {
    const nothing = [null, null, null, null, null]
    expect(sheetOf(someComparison({ lap: someLap({ lateral: nothing }) })).titles.lateral).toBe('not in both logs')
  })

  it('keeps both ends of a long outline and thins it', () => {
    const n = 3105
    const line = Array.from({ length: n }, (_, i) => i)
    const { path } = sheetOf(someComparison({ stationM: line, pathM: { x: line, y: line } }))
    expect(path.stationM.length).toBeLessThan(700)
    expect([path.stationM[0], path.stationM.at(-1)]).toEqual([0, 3104])
  })
})
