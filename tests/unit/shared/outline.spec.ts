import { describe, expect, it } from 'vitest'
import { fitOutline } from '../../../shared/outline'

const square = { x: [0, 400, 400, 0], y: [0, 0, 200, 200] }

describe('fitOutline', () => {
  it('fits the track in with north up and one scale', () => {
    const outline = fitOutline(square, 440, 400, 20)
    expect(outline.height).toBe(240)
    expect(outline.at(0)).toEqual({ x: 20, y: 220 })
    expect(outline.at(2)).toEqual({ x: 420, y: 20 })
    expect(outline.bar).toEqual({ lengthM: 100, size: 100 })
    expect(outline.path).toMatch(/^M20\.0 220\.0L420\.0 220\.0/)
  })

  it('keeps within the greatest height and centres', () => {
    const outline = fitOutline(square, 440, 140, 20)
    expect(outline.height).toBe(140)
    expect(outline.at(0).x + outline.at(1).x).toBe(440)
  })

  it('draws a stroke square to the way driven', () => {
    const along = { x: [0, 10, 20, 30, 40, 50, 60, 70], y: [0, 0, 0, 0, 0, 0, 0, 0] }
    const stroke = fitOutline(along, 110, 100, 20).across(3, 6)
    expect(stroke.x1).toBeCloseTo(stroke.x2, 9)
    expect(Math.abs(stroke.y2 - stroke.y1)).toBeCloseTo(12, 9)
  })
})
