import type { LogProblem } from '../../../shared/schemas/logs'

/** What the reader hands on: one Float64Array a column, all of length `rows`, NaN = missing. */
export interface ReadLog {
  rows: number
  /** Seconds on the log's own clock, zero at the first data row. Not yet cleaned: may repeat or step back. */
  timeS: Float64Array
  /** Line of the file of each row, counted from 1. */
  rowNumbers: Uint32Array
  /** Degrees. */
  latitudeDeg: Float64Array
  longitudeDeg: Float64Array
  /** Every other mapped column, already in the unit of storage (see shared/channels.ts). */
  channels: { name: string, label: string, unit: string, values: Float64Array }[]
  /** Unix seconds of the first data row where the file tells absolute time, else null. */
  startedAtS: number | null
  problems: LogProblem[]
}

/**
 * A channel as it is stored and as everything after cleaning sees it: float64 for time, latitude and longitude, float32
 * for the rest. The laps are cut from these values and no others, so that cutting again from storage is equal bit for
 * bit.
 */
export interface Channel {
  name: string
  label: string
  unit: string
  rateHz: number
  samples: Float64Array | Float32Array
}

export interface CleanLog {
  /** Data rows of the file. */
  rows: number
  /** time, latitude, longitude first; all of one length. Time rises strictly, in seconds, zero = first data row. */
  channels: Channel[]
  startedAtS: number | null
  /** Median rate of the rows, Hz. */
  rateHz: number
  /** Stretches without a new fix longer than max(3 periods, 0.5 s). */
  gaps: { fromS: number, toS: number }[]
  problems: LogProblem[]
}

/** A timing line: two points in degrees. The direction in which it was drawn means nothing. */
export interface TimingLine {
  id: string
  kind: 'start_finish' | 'sector'
  /** 0 for the start/finish line, 1..n for the sector lines in driving order. */
  ordinal: number
  a: { latitudeDeg: number, longitudeDeg: number }
  b: { latitudeDeg: number, longitudeDeg: number }
}

export type DrivingDirection = 'clockwise' | 'anticlockwise'

export interface CutLap {
  /** 0 for the out lap, 1..n for timed laps, n + 1 for the in lap. */
  number: number
  kind: 'out' | 'timed' | 'in'
  startS: number
  timeS: number
  /** One more than there are sector lines; null where a line was missed; `[]` for out and in laps. */
  sectorsS: (number | null)[]
  /** Set where something makes the time doubtful: 'gap_at_line', 'missed_sector'. */
  flags: string[]
}

export interface LineCount {
  id: string
  /** Crossings that count, in driving direction. */
  crossed: number
  /** Crossings left out: wrong way, or again before a third of a lap had been driven. */
  ignored: number
  /** Angle between the path and the line's normal at its crossings, degrees, median; null when never crossed. */
  offSquareDeg: number | null
}

export interface CutResult {
  laps: CutLap[]
  lines: LineCount[]
  warnings: LogProblem[]
}
