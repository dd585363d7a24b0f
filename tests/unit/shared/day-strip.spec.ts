import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { makeFigures, STANDARD_CHOICE } from '../../../shared/figures'
import { markLabels, stripHeight, stripLabels, stripPoints, stripSentence, tickLabels, type StripLabel } from '../../../shared/day-strip'
import { lapAxis, stripScale } from '../../../shared/lap-axis'
import type { LapFigure } from '../../../shared/laps'

const standard = makeFigures(STANDARD_CHOICE)

function lap(timeS: number, more: Partial<LapFigure> = {}): LapFigure {
  return { kind: 'timed', timeS, sectorsS: [], flags: [], excluded: false, excludedReason: '', ...more }
}

const out = (timeS: number, reason: string) => lap(timeS, { excluded: true, excludedReason: reason })
const LAPS = [lap(124, { kind: 'out' }), lap(92.4), lap(91.6), out(93.4, 'traffic, corner 8'), lap(91.2), lap(131, { kind: 'in' })]

function scaleOf(laps: LapFigure[], width: number) {
  const timesS = (plain: boolean) => laps.filter(each => (each.kind === 'timed' && !each.excluded) === plain)
    .map(each => each.timeS)
  return stripScale(lapAxis(timesS(true), timesS(false), [])!, width, width < 400)
}

/** Ends of a label's text, with 7.2 px a letter. */
function ends(label: StripLabel): [number, number] {
  const length = label.text.length * 7.2
  if (label.anchor === 'start') return [label.x, label.x + length]
  return label.anchor === 'end' ? [label.x - length, label.x] : [label.x - length / 2, label.x + length / 2]
}

describe('stripPoints', () => {
  it('runs downwards in driving order within the strip', () => {
    const points = stripPoints(LAPS, scaleOf(LAPS, 520))
    const ys = points.map(point => point.y)
    expect(ys).toEqual([...ys].sort((a, b) => a - b))
    expect(ys.at(-1)).toBeLessThan(stripHeight(LAPS.length))
    expect(points[3]).toMatchObject({ standing: 'excluded', reason: 'traffic, corner 8' })
  })
})

describe('stripLabels', () => {
  it('writes the reason beside the lap', () => {
    const scale = scaleOf(LAPS, 520)
    const points = stripPoints(LAPS, scale)
    const [label] = stripLabels(points, scale)
    expect(label?.text).toBe('traffic, corner 8')
    expect(label?.y).toBe(points[3]!.y + 4)
  })

  it('never leaves the strip and never runs into another label, whatever was typed', () => {
    const excluded = fc.tuple(fc.double({ min: 88, max: 99, noNaN: true }), fc.string({ maxLength: 60 }))
    const some = fc.array(excluded, { minLength: 1, maxLength: 12 })
    fc.assert(fc.property(some, fc.constantFrom(358, 520, 720), (given, width) => {
      const laps = [lap(90), ...given.map(([timeS, reason]) => out(timeS, reason))]
      const scale = scaleOf(laps, width)
      const labels = stripLabels(stripPoints(laps, scale), scale)
      for (const [i, label] of labels.entries()) {
        const [from, to] = ends(label)
        expect(from).toBeGreaterThanOrEqual(0)
        expect(to).toBeLessThanOrEqual(width)
        for (const other of labels.slice(i + 1)) {
          const [otherFrom, otherTo] = ends(other)
          expect(Math.abs(other.y - label.y) > 13 || to < otherFrom || from > otherTo).toBe(true)
        }
      }
    }))
  })
})

describe('labels of the axis', () => {
  const axis = lapAxis([90, 91, 92], [], [])!

  it('keeps the names of the marks on the sheet', () => {
    const scale = stripScale(axis, 358, true)
    const marks = [{ key: 'sum' as const, timeS: 90, label: 'sum of best sectors', text: '1:30.000' }, { key: 'median' as const, timeS: 92, label: 'median', text: '1:32.000' }]
    const labels = markLabels(marks, scale)
    expect(labels.map(label => label.anchor)).toEqual(['start', 'end'])
    for (const label of labels) expect(ends(label)[1]).toBeLessThanOrEqual(358)
  })

  it('writes tenths only where the ticks are that close, and stays on the sheet', () => {
    const scale = stripScale(axis, 520, false)
    expect(tickLabels([90, 91], 1, scale, standard).map(label => label.text)).toEqual(['1:30', '1:31'])
    expect(tickLabels([90, 90.5], 0.5, scale, standard).map(label => label.text)).toEqual(['1:30.0', '1:30.5'])
    const [first] = tickLabels([axis.fromS], 1, scale, standard)
    expect(ends(first!)[0]).toBeGreaterThanOrEqual(0)
  })
})

describe('stripSentence', () => {
  it('says what the strip shows', () => {
    expect(stripSentence(1, LAPS, standard)).toBe('Laps of outing 1 in driving order: 2:04.000 (out lap), 1:32.400, 1:31.600, 1:33.400 (traffic, corner 8), 1:31.200, 2:11.000 (in lap).')
  })
})
