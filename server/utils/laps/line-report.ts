import { median } from 'simple-statistics'
import type { LogProblem } from '../../../shared/schemas/logs'
import { indexBefore } from './interpolate'
import { passings } from './passes'
import type { LineUse } from './passes'
import type { CutLap, LineCount, TimingLine } from './types'

/** Beyond this the place on the line tells on the time: 1 m aside is 0.6 m along (common practice, no source). */
const FAR_OFF_SQUARE_DEG = 30
/** Passings of a line for each lap from which it is said to be crossed twice. */
const TWICE = 1.6

function nameOf(line: TimingLine): string {
  return line.kind === 'start_finish' ? 'the start/finish line' : `sector line ${line.ordinal}`
}

function offSquare(use: LineUse): number | null {
  const angles = use.counting.map(pass => pass.offSquareDeg).filter(angle => !Number.isNaN(angle))
  return angles.length > 0 ? median(angles) : null
}

/** Is a sector line crossed in most laps, but not where its number says? */
function outOfOrder(use: LineUse, sector: number, timed: readonly CutLap[]): boolean {
  const countingS = use.counting.map(pass => pass.timeS)
  const crossed = timed.filter(lap => countingS[indexBefore(countingS, lap.startS) + 1]! < lap.startS + lap.timeS)
  const missed = crossed.filter(lap => lap.sectorsS[sector] === null && lap.sectorsS[sector + 1] === null)
  return crossed.length > 0 && 2 * missed.length > crossed.length
}

function warningsOf(use: LineUse, sector: number | null, timed: readonly CutLap[]): LogProblem[] {
  const name = nameOf(use.line)
  if (use.all.length === 0) {
    return [{ code: 'line_never_crossed', message: `This log never crosses ${name}; check that it lies across the track.` }]
  }
  const warnings: LogProblem[] = []
  const from = timed[0]?.startS ?? Number.NaN
  const last = timed.at(-1)
  const to = last ? last.startS + last.timeS : Number.NaN
  // The instant that ends the last lap counts, the one that begins the first does not: one a lap for a good line.
  const each = passings(use.all).filter(pass => pass.timeS > from && pass.timeS <= to + 1e-9).length / timed.length
  if (each >= TWICE) {
    const times = Math.round(each) === 2 ? 'twice' : `${Math.round(each)} times`
    warnings.push({
      code: 'line_crossed_twice',
      message: `The car crosses ${name} about ${times} a lap; what counts is where it passes nearest to the line's middle. Draw it shorter.`,
    })
  }
  const angle = offSquare(use)
  if (angle !== null && angle > FAR_OFF_SQUARE_DEG) {
    warnings.push({
      code: 'line_off_square',
      message: `The car crosses ${name} ${Math.round(angle)} degrees off square; turn the line so that it lies straight across the track.`,
    })
  }
  if (sector !== null && outOfOrder(use, sector, timed)) {
    warnings.push({
      code: 'line_out_of_order',
      message: `The car crosses ${name} in most laps, but not after the line before it; number the sector lines in driving order.`,
    })
  }
  return warnings
}

/**
 * What a person should know about their lines: how often each was crossed, and what looks wrong.
 * @param lines    in the order in which they are reported
 * @param sectors  in driving order
 * @param wrongWay the log was driven only against the layout's direction, so that nothing counts. O(crossings).
 */
export function lineReport(
  lines: readonly TimingLine[],
  start: LineUse,
  sectors: readonly LineUse[],
  laps: readonly CutLap[],
  wrongWay: boolean,
): { lines: LineCount[], warnings: LogProblem[] } {
  const uses = [start, ...sectors]
  const timed = laps.filter(lap => lap.kind === 'timed')
  const counts = lines.flatMap((line) => {
    const use = uses.find(candidate => candidate.line === line)
    if (!use) return []
    const crossed = use.counting.length
    return [{ id: line.id, crossed, ignored: use.all.length - crossed, offSquareDeg: offSquare(use) }]
  })
  const warnings = uses.flatMap((use, k) => warningsOf(use, k === 0 ? null : k - 1, timed))
  if (wrongWay) {
    warnings.unshift({
      code: 'wrong_direction',
      message: 'This log was driven against the direction of the layout, so it has no timed laps; choose the other direction or another layout.',
    })
  }
  return { lines: counts, warnings }
}
