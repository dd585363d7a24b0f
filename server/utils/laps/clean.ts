import type { Track } from './fixes'
import type { ProblemList } from './problems'
import type { Channel, CleanLog, ReadLog } from './types'
import { median } from 'simple-statistics'
import { FLOAT64_CHANNELS, channelKind } from '../../../shared/channels'
import { LapsError } from './errors'
import { distanceM, findFixes, findJumps, interpolateFixes, isUsablePosition } from './fixes'
import { createProblems } from './problems'

const FEWEST_SAMPLES = 10
const MOST_BACKWARD = 0.01
const SHORTEST_GAP_S = 0.5
/** Half of all fixes following each other faster than this is no car, but other columns taken for the position. */
const FASTEST_MPS = 200
/** Times are written to a microsecond at best, so that a gap of exactly the limit is not one by rounding. */
const TIME_ROUNDING_S = 1e-6

/**
 * Makes a log that the rest can trust: time rises strictly, every row has a position, gaps are known. Rows without a
 * time, rows that repeat a time (the first stands) and single rows that step back are left out; fixes that are off the
 * earth, 0, 0, repeated or impossible are replaced by interpolation between their neighbours, never held; rows before
 * the first fix and after the last are left out, with time zero staying at the first row of the file. All of it is
 * reported with the line, apart from what the reader had to report. Other channels are taken over as they are, NaN
 * where missing; those without any value go.
 * @param read as it comes from the reader; it is not changed
 * @throws {LapsError} 'time_runs_back' with the line when more than 1 % of the rows (and more than one) step back,
 *   'no_time' | 'no_position' when none is left or the positions move as no car does, 'too_short' below 10 usable
 *   samples. O(n).
 */
export function cleanLog(read: ReadLog): CleanLog {
  const problems = createProblems()
  const kept = risingRows(read, problems)
  const track: Track = {
    timeS: pick(read.timeS, kept),
    latitudeDeg: pick(read.latitudeDeg, kept),
    longitudeDeg: pick(read.longitudeDeg, kept),
  }
  const lines = Uint32Array.from(kept, row => read.rowNumbers[row]!)
  reportPositions(track, lines, problems)
  const speedMps = read.channels.find(({ name }) => name === 'speed')?.values
  const { rows: fixes, periodS } = findFixes(track, speedMps && pick(speedMps, kept))
  const jumps = new Set(findJumps(track, fixes))
  for (const row of jumps) {
    problems.add('jump', { code: 'position_jump', message: 'The position jumps farther than a car can go and back again; it is left out and interpolated.', row: lines[row]! })
  }
  const good = jumps.size === 0 ? fixes : fixes.filter(row => !jumps.has(row))
  const [first, last] = [good[0], good.at(-1)]
  if (first === undefined || last === undefined) throw new LapsError('no_position', 'No row of the log has a usable position.', lines[0])
  const usable = last - first + 1
  if (usable < FEWEST_SAMPLES) {
    const needed = `at least ${FEWEST_SAMPLES} are needed`
    const rows = usable === 1 ? '1 row has' : `${usable} rows have`
    throw new LapsError('too_short', `Only ${rows} both a time and a position; ${needed}.`, lines[first])
  }
  refuseWildPositions(track, good, lines[first]!)
  reportEnds(lines, first, last, problems)

  const timeS = track.timeS.slice(first, last + 1)
  const rateHz = 1 / median(steps(timeS))
  const positions = interpolateFixes(track, good)
  const fixRateHz = Number.isNaN(periodS) ? rateHz : 1 / periodS
  return {
    rows: read.rows,
    channels: [
      channel('time', timeS, rateHz),
      channel('latitude', positions.latitudeDeg.slice(first, last + 1), fixRateHz),
      channel('longitude', positions.longitudeDeg.slice(first, last + 1), fixRateHz),
      ...otherChannels(read, kept.slice(first, last + 1), rateHz, problems),
    ],
    startedAtS: read.startedAtS,
    rateHz,
    gaps: findGaps(track.timeS, good, periodS),
    problems: problems.list(),
  }
}

function pick(values: Float64Array, rows: Uint32Array): Float64Array {
  const picked = new Float64Array(rows.length)
  for (let i = 0; i < rows.length; i++) picked[i] = values[rows[i]!]!
  return picked
}

function steps(timeS: Float64Array): number[] {
  return Array.from({ length: timeS.length - 1 }, (_, i) => timeS[i + 1]! - timeS[i]!)
}

/** Rows whose times rise strictly; what is left out is reported. */
function risingRows({ rows, timeS, rowNumbers }: ReadLog, problems: ProblemList): Uint32Array {
  const kept = new Uint32Array(rows)
  let count = 0
  let timed = 0
  let backward = 0
  let firstBackward = 0
  const stepBack = (row: number) => {
    if (backward++ === 0) firstBackward = row
    problems.add('step_back', { code: 'time_steps_back', message: 'The time is out of order; the row is left out.', row: rowNumbers[row]! })
  }
  for (let i = 0; i < rows; i++) {
    const time = timeS[i]!
    if (Number.isNaN(time)) {
      problems.add('no_time', { code: 'row_without_time', message: 'The row has no time; it is left out.', row: rowNumbers[i]! })
      continue
    }
    timed++
    const last = count === 0 ? -Infinity : timeS[kept[count - 1]!]!
    if (time === last) {
      problems.add('repeated', { code: 'repeated_time', message: 'The row has the same time as the one before; the first of them is kept.', row: rowNumbers[i]! })
      continue
    }
    if (time < last) {
      const spike = isSpike(timeS, kept, count, i)
      stepBack(spike ? kept[count - 1]! : i)
      if (!spike) continue
      count--
    }
    kept[count++] = i
  }
  if (timed === 0) throw new LapsError('no_time', 'No row of the log has a time.', rowNumbers[0])
  if (backward > Math.max(1, MOST_BACKWARD * timed)) {
    throw new LapsError('time_runs_back', `The time runs backwards in ${backward} of ${timed} rows, first in line ${rowNumbers[firstBackward]}. Laps need a time that rises from row to row.`, rowNumbers[firstBackward])
  }
  return kept.slice(0, count)
}

/**
 * Whether the last kept row is to blame for a step back and not row `i`: its time lies ahead of both this row and the
 * next, which go on rising from the row before it. Else one wild time would cost all rows after it.
 */
function isSpike(timeS: Float64Array, kept: Uint32Array, count: number, i: number): boolean {
  const before = count > 1 ? timeS[kept[count - 2]!]! : -Infinity
  const spike = timeS[kept[count - 1]!]!
  const next = timeS[i + 1] ?? Number.NaN
  return timeS[i]! > before && next > timeS[i]! && next <= spike
}

function reportPositions({ latitudeDeg, longitudeDeg }: Track, lines: Uint32Array, problems: ProblemList): void {
  for (let i = 0; i < lines.length; i++) {
    const [latitude, longitude] = [latitudeDeg[i]!, longitudeDeg[i]!]
    if (Number.isNaN(latitude) || Number.isNaN(longitude) || isUsablePosition(latitude, longitude)) continue
    const code = latitude === 0 && longitude === 0 ? 'position_zero' : 'position_out_of_range'
    const what = code === 'position_zero' ? 'The position is 0, 0, which stands for no fix' : 'The position is not on the earth'
    problems.add(code, { code, message: `${what}; it counts as missing.`, row: lines[i]! })
  }
}

function refuseWildPositions(track: Track, fixes: readonly number[], line: number): void {
  const speedMps = median(fixes.slice(1).map((row, i) => {
    const before = fixes[i]!
    return distanceM(track, before, row) / (track.timeS[row]! - track.timeS[before]!)
  }))
  if (speedMps <= FASTEST_MPS) return
  throw new LapsError('no_position', `The positions move at ${Math.round(speedMps * 3.6)} km/h, which no car does. Check which columns are latitude, longitude and time, and their units.`, line)
}

function reportEnds(lines: Uint32Array, first: number, last: number, problems: ProblemList): void {
  for (let i = 0; i < first; i++) problems.add('before', { code: 'before_first_fix', message: 'There is no usable position yet; the row is left out.', row: lines[i]! })
  for (let i = last + 1; i < lines.length; i++) problems.add('after', { code: 'after_last_fix', message: 'There is no new position any more; the row is left out.', row: lines[i]! })
}

/** Stretches between fixes that are longer than three periods of the receiver and half a second. */
function findGaps(timeS: Float64Array, fixes: readonly number[], periodS: number): CleanLog['gaps'] {
  const limitS = Math.max(Number.isNaN(periodS) ? 0 : 3 * periodS, SHORTEST_GAP_S) + TIME_ROUNDING_S
  const gaps: CleanLog['gaps'] = []
  for (let n = 1; n < fixes.length; n++) {
    const [fromS, toS] = [timeS[fixes[n - 1]!]!, timeS[fixes[n]!]!]
    if (toS - fromS > limitS) gaps.push({ fromS, toS })
  }
  return gaps
}

function channel(name: string, samples: Float64Array, rateHz: number): Channel {
  const { label, unit } = channelKind(name)!
  return { name, label, unit, rateHz, samples }
}

function otherChannels(read: ReadLog, kept: Uint32Array, rateHz: number, problems: ProblemList): Channel[] {
  return read.channels.flatMap(({ name, label, unit, values }): Channel[] => {
    const picked = pick(values, kept)
    if (picked.every(Number.isNaN)) {
      problems.add(`empty ${name}`, { code: 'empty_channel', message: `${label} has no value in any row and is left out.` })
      return []
    }
    return [{ name, label, unit, rateHz, samples: FLOAT64_CHANNELS.has(name) ? picked : Float32Array.from(picked) }]
  })
}
