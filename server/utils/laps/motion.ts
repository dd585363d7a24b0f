import { LapsError } from './errors'

/** Half the width of the smoothing window, seconds. */
const HALF_WINDOW_S = 0.25
/** Below this speed a path has no direction that could be told from noise. */
const CRAWL_MPS = 1

export interface Motion {
  /** As logged, else the length of the fitted velocity. */
  speedMps: Float64Array
  /** Positive in a left-hand bend; NaN below 1 m/s. */
  curvature1pm: Float64Array
  /** Positive when speeding up. */
  longitudinalMps2: Float64Array
  /** Positive in a left-hand bend; zero below 1 m/s. */
  lateralMps2: Float64Array
}

/** Value, slope and second derivative of the fitted parabola at offset zero, as sums over weights. */
export interface QuadraticWeights { value: Float64Array, slope: Float64Array, second: Float64Array }

/**
 * The weights with which samples at the given offsets add up to the value, slope and second derivative at offset zero
 * of the parabola that fits them best (least squares). On even samples these are the coefficients of Savitzky and
 * Golay for degree 2; here the samples may lie anywhere.
 * @param offsets at least three different ones, in any unit (the slope is per that unit)
 * @see A. Savitzky, M. J. E. Golay, Anal. Chem. 36 (1964), tables I-VIII. O(n).
 */
export function quadraticWeights(offsets: ArrayLike<number>): QuadraticWeights {
  const n = offsets.length
  const weights = { value: new Float64Array(n), slope: new Float64Array(n), second: new Float64Array(n) }
  fillWeights(offsets, n, weights)
  return weights
}

/** The weights of the first n offsets, into arrays of at least that length. */
function fillWeights(offsets: ArrayLike<number>, n: number, weights: QuadraticWeights): void {
  let scale = 0
  for (let k = 0; k < n; k++) scale = Math.max(scale, Math.abs(offsets[k]!))
  let s1 = 0
  let s2 = 0
  let s3 = 0
  let s4 = 0
  for (let k = 0; k < n; k++) {
    const u = offsets[k]! / scale
    s1 += u
    s2 += u * u
    s3 += u * u * u
    s4 += u * u * u * u
  }
  // Inverse of the symmetric normal matrix [n s1 s2; s1 s2 s3; s2 s3 s4], by cofactors.
  const c00 = s2 * s4 - s3 * s3
  const c01 = s2 * s3 - s1 * s4
  const c02 = s1 * s3 - s2 * s2
  const c11 = n * s4 - s2 * s2
  const c12 = s1 * s2 - n * s3
  const c22 = n * s2 - s1 * s1
  const det = n * c00 + s1 * c01 + s2 * c02
  for (let k = 0; k < n; k++) {
    const u = offsets[k]! / scale
    weights.value[k] = (c00 + c01 * u + c02 * u * u) / det
    weights.slope[k] = (c01 + c11 * u + c12 * u * u) / det / scale
    weights.second[k] = 2 * (c02 + c12 * u + c22 * u * u) / det / scale / scale
  }
}

interface Derivatives { slope: Float64Array, second: Float64Array }

/** Which samples a fit at sample i rests on: those within the window, at least three, the nearest in time first. */
function windowAround(timeS: ArrayLike<number>, usable: ArrayLike<number>, i: number, out: number[]): void {
  out.length = 0
  if (!Number.isFinite(usable[i]!)) return
  out.push(i)
  const t = timeS[i]!
  let before = i - 1
  let after = i + 1
  const n = timeS.length
  for (;;) {
    while (before >= 0 && !Number.isFinite(usable[before]!)) before--
    while (after < n && !Number.isFinite(usable[after]!)) after++
    const back = before >= 0 ? t - timeS[before]! : Infinity
    const ahead = after < n ? timeS[after]! - t : Infinity
    const next = Math.min(back, ahead)
    // A little slack, so that rounding of the clock does not make the window flicker between two sizes.
    if (next === Infinity || (next > HALF_WINDOW_S * 1.001 && out.length >= 3)) return
    out.push(back <= ahead ? before-- : after++)
  }
}

/**
 * Slope and second derivative of columns that miss the same samples; NaN there, and where fewer than three are known.
 */
function derivatives(timeS: ArrayLike<number>, columns: ArrayLike<number>[]): Derivatives[] {
  const n = timeS.length
  const unknown = () => new Float64Array(n).fill(Number.NaN)
  const results = columns.map(() => ({ slope: unknown(), second: unknown() }))
  const used: number[] = []
  // One set of arrays for all windows: a new one for each sample cost more than the arithmetic.
  let room = 0
  let offsets = new Float64Array(room)
  let weights = quadraticWeights(offsets)
  for (let i = 0; i < n; i++) {
    windowAround(timeS, columns[0]!, i, used)
    const count = used.length
    if (count < 3) continue
    if (count > room) {
      room = 2 * count
      offsets = new Float64Array(room)
      weights = quadraticWeights(offsets)
    }
    for (let k = 0; k < count; k++) offsets[k] = timeS[used[k]!]! - timeS[i]!
    fillWeights(offsets, count, weights)
    for (let c = 0; c < columns.length; c++) {
      const column = columns[c]!
      let slope = 0
      let second = 0
      for (let k = 0; k < count; k++) {
        slope += weights.slope[k]! * column[used[k]!]!
        second += weights.second[k]! * column[used[k]!]!
      }
      results[c]!.slope[i] = slope
      results[c]!.second[i] = second
    }
  }
  return results
}

/**
 * Speed, curvature and accelerations of a path.
 *
 * At every sample a parabola is fitted to the samples within 0.25 s either way (to the three nearest where there are
 * fewer), and its derivatives are taken: exact for constant acceleration on a straight; on a circle driven at w rad/s
 * short by about (w h)^2 / 10 for speed and (w h)^2 / 14 for the second derivative, with h the half window (at 25 Hz
 * and 1 rad/s less than 1 %; at 1 Hz h is 1 s). At ends and gaps the window is one-sided and the noise greater.
 *
 * Logged speed (the receiver's own) is used as it is where given. Curvature = (x'y'' - y'x'') / (x'^2 + y'^2)^1.5,
 * lateral acceleration = v^2 times curvature, longitudinal acceleration = the fitted slope of the speed, so that a
 * derived speed is smoothed twice.
 *
 * @param timeS strictly rising, length n, seconds
 * @param xM length n, metres, NaN = missing
 * @param yM length n, metres, missing where xM is
 * @param speedMps length n, m/s, NaN = missing, or null where none was logged
 * @returns arrays of length n; NaN where the position (for longitudinal: the speed) is missing or fewer than three
 *   are known
 * @throws {LapsError} 'length_mismatch'
 * @see Savitzky and Golay (1964), as `quadraticWeights`. O(n k), k samples in the window.
 */
export function deriveMotion(
  timeS: ArrayLike<number>,
  xM: ArrayLike<number>,
  yM: ArrayLike<number>,
  speedMps: ArrayLike<number> | null,
): Motion {
  const n = timeS.length
  if (xM.length !== n || yM.length !== n || (speedMps && speedMps.length !== n)) {
    throw new LapsError('length_mismatch', 'time, position and speed differ in length')
  }
  const [x, y] = derivatives(timeS, [xM, yM]) as [Derivatives, Derivatives]
  const speed = speedMps ? Float64Array.from(speedMps) : new Float64Array(n)
  const curvature1pm = new Float64Array(n)
  const lateralMps2 = new Float64Array(n)
  for (let i = 0; i < n; i++) {
    const vx = x.slope[i]!
    const vy = y.slope[i]!
    const fitted = Math.hypot(vx, vy)
    if (!speedMps) speed[i] = fitted
    const crawling = fitted < CRAWL_MPS
    curvature1pm[i] = crawling ? Number.NaN : (vx * y.second[i]! - vy * x.second[i]!) / fitted ** 3
    lateralMps2[i] = crawling ? 0 : speed[i]! ** 2 * curvature1pm[i]!
  }
  const longitudinalMps2 = derivatives(timeS, [speed])[0]!.slope
  return { speedMps: speed, curvature1pm, longitudinalMps2, lateralMps2 }
}
