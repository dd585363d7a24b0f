import { median } from 'simple-statistics'

/** Metres in a degree of latitude on a sphere as large as the earth, good to 0.5 %. */
export const EARTH_M_PER_DEG = 111_195
const TEN_G_MPS2 = 98.0665
/** Below this a car stands, and a position that stays the same is a measurement and not a repeat. */
const STANDING_MPS = 0.5
/** Scatter of a receiver that is no jump: this much, and six times what this log shows. Common practice, no source. */
const SCATTER_M = 2
const SCATTERS = 6
/** How many fixes in a row can be off together and still be told from a real change of place. */
const LONGEST_JUMP = 10

/** True for a place on the earth; 0, 0 is what receivers write that have no fix. */
export function isUsablePosition(latitudeDeg: number, longitudeDeg: number): boolean {
  return Math.abs(latitudeDeg) <= 90 && Math.abs(longitudeDeg) <= 180 && (latitudeDeg !== 0 || longitudeDeg !== 0)
}

/** The difference of two longitudes the short way round, -180 to 180. */
export function longitudeStepDeg(fromDeg: number, toDeg: number): number {
  const stepDeg = toDeg - fromDeg
  return stepDeg > 180 ? stepDeg - 360 : stepDeg < -180 ? stepDeg + 360 : stepDeg
}

/** A track of positions, all arrays of one length; time rises strictly. */
export interface Track {
  timeS: Float64Array
  latitudeDeg: Float64Array
  longitudeDeg: Float64Array
}

/**
 * Metres between two rows of a track, on a plane scaled at the first of them: good to 0.5 %, which is enough to tell a
 * jump from driving and is used for nothing else.
 */
export function distanceM({ latitudeDeg, longitudeDeg }: Track, a: number, b: number): number {
  const northDeg = latitudeDeg[b]! - latitudeDeg[a]!
  const eastDeg = longitudeStepDeg(longitudeDeg[a]!, longitudeDeg[b]!) * Math.cos(latitudeDeg[a]! * Math.PI / 180)
  return Math.hypot(northDeg, eastDeg) * EARTH_M_PER_DEG
}

export interface Fixes {
  /** Rows at which the position is known: a new fix, or a car that stands. Rising. */
  rows: number[]
  /** Median time between new fixes, seconds; NaN with fewer than two. */
  periodS: number
}

/**
 * Finds the rows with a fix of their own. A slow receiver in a fast file repeats its last fix; a fix is new when
 * latitude or longitude changes. Where the position stays the same the car may also stand, and then it is known in
 * every row: it stands where its speed is below 0.5 m/s, or, without a speed, where the next new fix is so near that
 * the mean speed since the last one is below 0.5 m/s. Repeats after the last new fix are dropped without a speed.
 * @param speedMps same length as the track, NaN = unknown; undefined where the log has no speed
 */
export function findFixes(track: Track, speedMps: Float64Array | undefined): Fixes {
  const { timeS, latitudeDeg, longitudeDeg } = track
  const rows: number[] = []
  const stepsS: number[] = []
  let repeats: number[] = []
  let last = -1
  for (let i = 0; i < timeS.length; i++) {
    if (!isUsablePosition(latitudeDeg[i]!, longitudeDeg[i]!)) continue
    if (last >= 0 && latitudeDeg[i] === latitudeDeg[last] && longitudeDeg[i] === longitudeDeg[last]) {
      repeats.push(i)
      continue
    }
    if (last >= 0) {
      const stepS = timeS[i]! - timeS[last]!
      if (repeats.length > 0) {
        for (const row of standingRows(repeats, speedMps, distanceM(track, last, i) / stepS)) rows.push(row)
        repeats = []
      }
      stepsS.push(stepS)
    }
    rows.push(i)
    last = i
  }
  for (const row of standingRows(repeats, speedMps, Infinity)) rows.push(row)
  return { rows, periodS: stepsS.length > 0 ? median(stepsS) : Number.NaN }
}

function standingRows(repeats: readonly number[], speedMps: Float64Array | undefined, meanSpeedMps: number): number[] {
  return repeats.filter((row) => {
    const known = speedMps?.[row] ?? Number.NaN
    return (Number.isNaN(known) ? meanSpeedMps : known) < STANDING_MPS
  })
}

/**
 * Finds fixes that no car could have reached. Walking from the last good fix, a fix is a jump when the speed to it
 * differs from the speed before it by more than 10 g could change it in that time, and one of the next ten fixes can
 * be reached without it. Where none can, the place did change for good (the receiver found itself again) and the fix
 * stays. What scatter and the resolution of the file explain (2 m, six times the median distance of a fix from the
 * straight between its neighbours, two steps of latitude) is no jump.
 * @param rows rows with a fix, rising
 * @returns the rows that are jumps, rising. O(n).
 */
export function findJumps(track: Track, rows: readonly number[]): number[] {
  if (rows.length < 4) return []
  const toleranceM = SCATTER_M + SCATTERS * scatterM(track, rows) + 2 * resolutionM(track, rows)
  const speed = (a: number, b: number) => distanceM(track, a, b) / (track.timeS[b]! - track.timeS[a]!)
  const explained = (a: number, b: number, beforeMps: number) => {
    const stepS = track.timeS[b]! - track.timeS[a]!
    return Math.abs(speed(a, b) - beforeMps) * stepS <= TEN_G_MPS2 * stepS * stepS + toleranceM
  }
  const firstSpeeds = rows.slice(1, 10).map((row, i) => speed(rows[i]!, row))
  let beforeMps = median(firstSpeeds)
  let good = 0
  const jumps: number[] = []
  for (let i = 1; i < rows.length; i++) {
    if (!explained(rows[good]!, rows[i]!, beforeMps)) {
      const next = nextExplained(rows, good, i, row => explained(rows[good]!, row, beforeMps))
      if (next === undefined && good === 0) {
        jumps.push(rows[0]!)
        good = i
        continue
      }
      if (next === undefined) {
        // A change of place for good: go on from here at the speed before it.
        good = i
        continue
      }
      jumps.push(...rows.slice(i, next))
      i = next
    }
    beforeMps = speed(rows[good]!, rows[i]!)
    good = i
  }
  return jumps
}

function nextExplained(
  rows: readonly number[], good: number, from: number, explained: (row: number) => boolean,
): number | undefined {
  const to = Math.min(rows.length, from + LONGEST_JUMP + 1)
  for (let i = from + 1; i < to; i++) if (explained(rows[i]!)) return i
  // At the end of the file nothing follows that could speak for the fix.
  return to === rows.length && rows.length - from <= 2 && good > 0 ? rows.length : undefined
}

/** Median distance of a fix from the straight between its neighbours. */
function scatterM(track: Track, rows: readonly number[]): number {
  const { timeS, latitudeDeg, longitudeDeg } = track
  return median(rows.slice(1, -1).map((row, n) => {
    const [before, after] = [rows[n]!, rows[n + 2]!]
    const share = (timeS[row]! - timeS[before]!) / (timeS[after]! - timeS[before]!)
    const northDeg = latitudeDeg[row]! - latitudeDeg[before]! - share * (latitudeDeg[after]! - latitudeDeg[before]!)
    const eastDeg = longitudeStepDeg(longitudeDeg[before]!, longitudeDeg[row]!)
      - share * longitudeStepDeg(longitudeDeg[before]!, longitudeDeg[after]!)
    return Math.hypot(northDeg, eastDeg * Math.cos(latitudeDeg[row]! * Math.PI / 180)) * EARTH_M_PER_DEG
  }))
}

/** The smallest step of latitude in the file, metres: how coarse its positions are written. */
function resolutionM({ latitudeDeg }: Track, rows: readonly number[]): number {
  let smallest = Infinity
  for (let i = 1; i < rows.length; i++) {
    const step = Math.abs(latitudeDeg[rows[i]!]! - latitudeDeg[rows[i - 1]!]!)
    if (step > 0 && step < smallest) smallest = step
  }
  return smallest === Infinity ? 0 : smallest * EARTH_M_PER_DEG
}

/**
 * Fills the positions between fixes by straight interpolation in time, the short way over the 180th meridian. Positions
 * at fixes stay bit for bit what they were; rows before the first and after the last fix come out as NaN.
 * @param rows rows with a fix, rising
 */
export function interpolateFixes(track: Track, rows: readonly number[]): Pick<Track, 'latitudeDeg' | 'longitudeDeg'> {
  const { timeS, latitudeDeg, longitudeDeg } = track
  const filledLatitudeDeg = new Float64Array(timeS.length).fill(Number.NaN)
  const filledLongitudeDeg = new Float64Array(timeS.length).fill(Number.NaN)
  for (const [n, row] of rows.entries()) {
    filledLatitudeDeg[row] = latitudeDeg[row]!
    filledLongitudeDeg[row] = longitudeDeg[row]!
    if (n === 0) continue
    const from = rows[n - 1]!
    const northDeg = latitudeDeg[row]! - latitudeDeg[from]!
    const eastDeg = longitudeStepDeg(longitudeDeg[from]!, longitudeDeg[row]!)
    for (let i = from + 1; i < row; i++) {
      const share = (timeS[i]! - timeS[from]!) / (timeS[row]! - timeS[from]!)
      filledLatitudeDeg[i] = latitudeDeg[from]! + share * northDeg
      const longitude = longitudeDeg[from]! + share * eastDeg
      filledLongitudeDeg[i] = longitude > 180 ? longitude - 360 : longitude < -180 ? longitude + 360 : longitude
    }
  }
  return { latitudeDeg: filledLatitudeDeg, longitudeDeg: filledLongitudeDeg }
}
