import { describe, expect, it } from 'vitest'
import geodesic from 'geographiclib-geodesic'
import { SHORT_LOOP, shortLoopCsv, shortLoopLap } from '../../../../seeds/harrow-fell/short-loop'

const rows = shortLoopCsv().trimEnd().split('\n').slice(1).map(line => line.split(','))

describe('shortLoopCsv', () => {
  it('is small, at ten rows a second, in miles an hour', () => {
    expect(rows.length).toBeLessThan(400)
    expect(rows.slice(0, 2).map(row => row[0])).toEqual(['2026-05-09T10:15:00.000Z', '2026-05-09T10:15:00.100Z'])
    expect(new Set(rows.map(row => row[3]))).toEqual(new Set(['25.0']))
  })

  it('moves as far between rows as its speed says, by geodesics', () => {
    const stepM = SHORT_LOOP.speedMps / SHORT_LOOP.rateHz
    rows.slice(1).forEach((row, i) => {
      const [a, b] = [rows[i]!, row]
      const g = geodesic.Geodesic.WGS84.Inverse(Number(a[1]), Number(a[2]), Number(b[1]), Number(b[2]))
      // On the bend a chord of 1.1 m is short by h^3 / 24 R^2 = 0.3 mm; eight decimals round by up to 0.6 mm at each
      // end.
      expect(Math.abs(g.s12! - stepM)).toBeLessThan(1.8e-3)
    })
  })

  it('passes its origin every lap, 14.32 s apart', () => {
    const { lengthM, timeS } = shortLoopLap()
    expect(lengthM).toBeCloseTo(72 + 28 * Math.PI, 9)
    const passes = rows.flatMap((row, i) => {
      const [before, now] = [Number(rows[Math.max(0, i - 1)]![2]), Number(row[2])]
      const north = Number(row[1]) > SHORT_LOOP.origin.latitudeDeg - 1e-5
      const origin = SHORT_LOOP.origin.longitudeDeg
      const passed = north && before < origin && now >= origin
      return passed ? [(i - 1 + (origin - before) / (now - before)) / SHORT_LOOP.rateHz] : []
    })
    expect(passes).toHaveLength(SHORT_LOOP.laps + 1)
    // Straight line at steady speed: only the rounding of the text, 1 mm over 11 m/s.
    passes.slice(1).forEach((t, i) => expect(Math.abs(t - passes[i]! - timeS)).toBeLessThan(2e-4))
    expect(timeS).toBeCloseTo(14.313, 3)
  })
})
