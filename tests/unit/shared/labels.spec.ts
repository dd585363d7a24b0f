import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { firstFree, labelPlace, overlap, type Box } from '../../../shared/labels'

const at = (left: number, top: number, size = 10): Box => ({ left, top, right: left + size, bottom: top + size })
const place = fc.integer({ min: 0, max: 100 })
const box = fc.tuple(place, place, fc.integer({ min: 1, max: 40 }))
  .map(([left, top, size]) => at(left, top, size))

describe('overlap', () => {
  it('is so where two rectangles share an area, not where they touch', () => {
    expect(overlap(at(0, 0), at(9, 9))).toBe(true)
    expect(overlap(at(0, 0), at(10, 0))).toBe(false)
    expect(overlap(at(0, 0), at(0, 11))).toBe(false)
  })

  it('does not depend on which is asked first', () => {
    fc.assert(fc.property(box, box, (a, b) => overlap(a, b) === overlap(b, a)))
  })
})

describe('firstFree', () => {
  it('takes the first place on which nothing stands', () => {
    expect(firstFree([{ box: at(0, 0) }, { box: at(20, 0) }], [at(5, 5)]).box).toEqual(at(20, 0))
  })

  it('prefers a place within the picture to an earlier one that reaches out of it', () => {
    const picture = { left: 0, top: 0, right: 50, bottom: 50 }
    expect(firstFree([{ box: at(45, 0) }, { box: at(20, 0) }], [], picture).box).toEqual(at(20, 0))
  })

  it('gives the first of all when every place is taken', () => {
    expect(firstFree([{ box: at(0, 0) }, { box: at(1, 1) }], [at(0, 0, 40)]).box).toEqual(at(0, 0))
  })

  it('covers nothing as long as some place covers nothing', () => {
    const some = fc.array(box, { minLength: 1, maxLength: 6 })
    fc.assert(fc.property(some, fc.array(box, { maxLength: 6 }), (places, taken) => {
      const found = firstFree(places.map(one => ({ box: one })), taken)
      const possible = places.some(one => !taken.some(other => overlap(one, other)))
      expect(taken.some(other => overlap(found.box, other))).toBe(!possible)
    }))
  })
})

describe('labelPlace', () => {
  it('stands beside the point and clear of it, on the side it leads to', () => {
    const right = labelPlace({ x: 100, y: 50 }, { x: 1, y: 0 }, 'S1 ends', 16)
    expect([right.anchor, right.x, right.box.left]).toEqual(['start', 116, 116])
    // Seven figures of 12 px in a face whose figures are 0.6 of their size wide.
    expect(right.box.right).toBeCloseTo(116 + 7 * 7.2, 9)
    const left = labelPlace({ x: 100, y: 50 }, { x: -1, y: 0 }, 'S1 ends', 16)
    expect([left.anchor, left.box.right]).toEqual(['end', 84])
  })

  it('stands in the middle above or below a point', () => {
    const above = labelPlace({ x: 100, y: 50 }, { x: 0, y: -1 }, 'start', 16)
    expect([above.anchor, above.x]).toEqual(['middle', 100])
    expect(above.box.bottom).toBeLessThan(50 - 10)
    expect(labelPlace({ x: 100, y: 50 }, { x: 0, y: 1 }, 'start', 16).box.top).toBeGreaterThan(50 + 10)
  })

  it('keeps out of a dot around the point, whichever way it leads', () => {
    fc.assert(fc.property(fc.double({ min: 0, max: 2 * Math.PI, noNaN: true }), (angle) => {
      const { box: room } = labelPlace({ x: 0, y: 0 }, { x: Math.cos(angle), y: Math.sin(angle) }, 'S1 ends', 16)
      const nearest = Math.hypot(Math.max(room.left, 0, -room.right), Math.max(room.top, 0, -room.bottom))
      // The dot has a radius of 11, and the box holds 2 px of air around the letters.
      expect(nearest).toBeGreaterThan(9)
    }))
  })
})
