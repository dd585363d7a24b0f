import { describe, expect, it } from 'vitest'
import { TRACE_GRID, traceLeft, traceShare } from '../../../shared/traces'

describe('traceShare', () => {
  const box = { left: 100, width: 1000 + TRACE_GRID.left + TRACE_GRID.right }

  it('runs from the axis to the far edge of the plot', () => {
    expect(traceShare(100 + TRACE_GRID.left, box)).toBe(0)
    expect(traceShare(600 + TRACE_GRID.left, box)).toBe(0.5)
    expect(traceShare(1100 + TRACE_GRID.left, box)).toBe(1)
  })

  it('holds at the ends', () => {
    expect([traceShare(0, box), traceShare(9999, box)]).toEqual([0, 1])
  })
})

describe('traceLeft', () => {
  it('is the same place without measuring', () => {
    expect(traceLeft(0.25)).toBe(`calc(${TRACE_GRID.left}px + (100% - ${TRACE_GRID.left + TRACE_GRID.right}px) * 0.25000)`)
  })
})
