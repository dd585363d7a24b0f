/** A stretch of time without a new fix. */
export interface Gap { fromS: number, toS: number }

/** A cubic in powers of u, the constant first. */
export type Cubic = readonly [number, number, number, number]

/** The cubic that has the given values and slopes at u = 0 and u = 1, in powers of u. */
export function hermite(p0: number, m0: number, p1: number, m1: number): Cubic {
  return [p0, m0, 3 * (p1 - p0) - 2 * m0 - m1, 2 * (p0 - p1) + m0 + m1]
}

/** A cubic in powers of u, at u. */
export function cubicAt([c0, c1, c2, c3]: Cubic, u: number): number {
  return ((c3 * u + c2) * u + c1) * u + c0
}

/** Slope of a cubic in powers of u, at u. */
export function cubicSlope([, c1, c2, c3]: Cubic, u: number): number {
  return (3 * c3 * u + 2 * c2) * u + c1
}

/** One byte for each sample: 1 where the stretch to the next sample lies in a gap. */
export function gapAfterSample(timeS: ArrayLike<number>, gaps: readonly Gap[]): Uint8Array {
  const marks = new Uint8Array(timeS.length)
  let i = 0
  for (const gap of [...gaps].sort((p, q) => p.fromS - q.fromS)) {
    while (i + 1 < timeS.length && timeS[i + 1]! <= gap.fromS) i++
    for (let k = i; k + 1 < timeS.length && timeS[k]! < gap.toS; k++) marks[k] = 1
  }
  return marks
}

/** Slope at sample i of the parabola through three samples. */
function slopeOfThree(t: ArrayLike<number>, v: ArrayLike<number>, i: number, j: number, k: number): number {
  const ij = (v[j]! - v[i]!) / (t[j]! - t[i]!)
  const ik = (v[k]! - v[i]!) / (t[k]! - t[i]!)
  return (ij * (t[k]! - t[i]!) - ik * (t[j]! - t[i]!)) / (t[k]! - t[j]!)
}

/**
 * Velocity at every sample: the slope of the parabola through the sample and its two neighbours, whatever their
 * spacing. At the ends and at the edges of a gap the three lie on the near side, for what is beyond says nothing
 * about the velocity here; where there are fewer than three, the straight line through two.
 * @param gapAfter as `gapAfterSample` gives it
 * @returns per second, length n. O(n).
 */
export function threePointSlope(
  timeS: ArrayLike<number>,
  values: ArrayLike<number>,
  gapAfter: Uint8Array,
): Float64Array {
  const n = timeS.length
  const slope = new Float64Array(n)
  for (let i = 0; i < n; i++) {
    const back = i > 0 && !gapAfter[i - 1]
    const ahead = i + 1 < n && !gapAfter[i]
    if (back && ahead) slope[i] = slopeOfThree(timeS, values, i, i - 1, i + 1)
    else if (back && i > 1 && !gapAfter[i - 2]) slope[i] = slopeOfThree(timeS, values, i, i - 1, i - 2)
    else if (ahead && i + 2 < n && !gapAfter[i + 1]) slope[i] = slopeOfThree(timeS, values, i, i + 1, i + 2)
    else if (back || (!ahead && i > 0)) slope[i] = (values[i]! - values[i - 1]!) / (timeS[i]! - timeS[i - 1]!)
    else if (i + 1 < n) slope[i] = (values[i + 1]! - values[i]!) / (timeS[i + 1]! - timeS[i]!)
  }
  return slope
}
