import type { StripScale } from './lap-axis'
import { lapStandings, leftOutReason, type LapFigure, type LapStanding } from './laps'
import type { Figures } from './figures'

/** One lap on the strip of its outing. Laps run downwards in driving order. */
export interface StripPoint {
  x: number
  y: number
  timeS: number
  standing: LapStanding
  /** Why a timed lap does not count; empty for the others. */
  reason: string
}

export interface StripLabel { x: number, y: number, anchor: 'start' | 'middle' | 'end', text: string }

/** A reason beside its lap, with the room it takes from left to right. */
export interface ReasonLabel extends StripLabel { from: number, to: number }

/** A time marked on the axis of all strips. */
export interface StripMark { key: 'sum' | 'best' | 'median', timeS: number, label: string, text: string }

const TOP = 12
/** Distance from lap to lap, downwards. */
const STEP = 9
/** Advance of a letter of the mono face at 12 px. */
const LETTER = 7.2
/** Fewer letters than this say nothing; the outing's own page has the whole reason. */
const LEAST_LETTERS = 6

export function stripHeight(lapCount: number): number {
  return 16 + Math.max(lapCount, 2) * STEP
}

export function stripPoints(laps: readonly LapFigure[], scale: StripScale): StripPoint[] {
  const standings = lapStandings(laps)
  return laps.map((lap, i) => ({
    x: tenth(scale.x(lap.timeS)),
    y: TOP + i * STEP,
    timeS: lap.timeS,
    standing: standings[i]!,
    reason: leftOutReason(lap, standings[i]!),
  }))
}

function tenth(value: number): number {
  return Math.round(value * 10) / 10
}

/**
 * Reasons beside the laps that are left out, each on the side where it covers fewer laps, cut to the room there is. A
 * reason that would run into another one is dropped: nothing on the strip is to be misread.
 */
export function stripLabels(points: readonly StripPoint[], scale: Pick<StripScale, 'width'>): ReasonLabel[] {
  const placed: ReasonLabel[] = []
  for (const point of points) {
    if (!point.reason) continue
    const sides = (['start', 'end'] as const).map(anchor => side(point, anchor, points, scale.width))
      .filter(option => option !== null)
      .filter(option => placed.every(other => isClear(option.label, other)))
      .sort((a, b) => a.cost - b.cost)
    if (sides[0]) placed.push(sides[0].label)
  }
  return placed
}

function isClear(a: ReasonLabel, b: ReasonLabel): boolean {
  return Math.abs(a.y - b.y) > 13 || a.to < b.from - 4 || a.from > b.to + 4
}

function side(point: StripPoint, anchor: 'start' | 'end', points: readonly StripPoint[], width: number) {
  const room = Math.floor((anchor === 'start' ? width - point.x - 11 : point.x - 11) / LETTER)
  const text = point.reason.length <= room ? point.reason : `${point.reason.slice(0, room - 1).trimEnd()}…`
  if (text.length > room || room < Math.min(LEAST_LETTERS, point.reason.length)) return null
  const x = anchor === 'start' ? point.x + 9 : point.x - 9
  const [from, to] = anchor === 'start' ? [x, x + text.length * LETTER] : [x - text.length * LETTER, x]
  const beside = points.filter(other => other !== point && Math.abs(other.y - point.y) <= STEP)
  const covered = beside.filter(other => other.x > from - 5 && other.x < to + 5).length
  const cost = covered * 10 + (text === point.reason ? 0 : 5) + (anchor === 'end' ? 1 : 0)
  return { label: { x, y: point.y + 4, anchor, text, from, to }, cost }
}

/** The marks' names above the axis, one below the other, turned inwards where they would leave the sheet. */
export function markLabels(marks: readonly StripMark[], scale: StripScale): (StripLabel & { mark: StripMark })[] {
  return marks.map((mark, i) => {
    const x = scale.x(mark.timeS)
    const length = (mark.label.length + 1 + mark.text.length) * LETTER
    const fits = x + 6 + length <= scale.width
    return { mark, x: tenth(fits ? x + 6 : x - 6), y: 12 + i * 16, anchor: fits ? 'start' : 'end', text: `${mark.label} ${mark.text}` }
  })
}

/** Labels of the axis' ticks, kept within the sheet at its ends. */
export function tickLabels(
  ticksS: readonly number[], majorS: number, scale: StripScale, figures: Figures,
): StripLabel[] {
  return ticksS.map((tickS) => {
    const text = figures.lapTime(tickS, majorS < 1 ? 1 : 0)
    const [x, half] = [scale.x(tickS), text.length * LETTER / 2]
    const anchor = x - half < 0 ? 'start' : x + half > scale.width ? 'end' : 'middle'
    return { x: tenth(anchor === 'start' ? 0 : anchor === 'end' ? scale.width : x), y: 72, anchor, text }
  })
}

/** The strip in words, for those who cannot see it. */
export function stripSentence(outingNumber: number, laps: readonly LapFigure[], figures: Figures): string {
  const standings = lapStandings(laps)
  const words = laps.map((lap, i) => {
    const standing = standings[i]!
    const why = standing === 'counted' ? '' : ` (${leftOutReason(lap, standing) || `${standing} lap`})`
    return `${figures.lapTime(lap.timeS)}${why}`
  })
  return `Laps of outing ${outingNumber} in driving order: ${words.join(', ')}.`
}
