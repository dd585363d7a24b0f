/** Value and derivatives of a curve at a place. */
export interface SplinePoint {
  value: number
  first: number
  second: number
}

export type Spline = (x: number) => SplinePoint

/**
 * Natural cubic spline through evenly spaced knots: twice continuously differentiable, straight at both ends, constant
 * slope beyond them.
 * @param from  place of the first knot
 * @param step  distance between knots, above zero
 * @param knots at least three values
 * @see de Boor, A Practical Guide to Splines, chapter IV. O(n) to make, O(1) to read.
 */
export function naturalSpline(from: number, step: number, knots: ArrayLike<number>): Spline {
  const last = knots.length - 1
  const bends = secondDerivatives(step, knots)
  return (x) => {
    const at = Math.min(Math.max((x - from) / step, 0), last)
    const i = Math.min(Math.floor(at), last - 1)
    const b = at - i
    const a = 1 - b
    const [y0, y1, m0, m1] = [knots[i]!, knots[i + 1]!, bends[i]!, bends[i + 1]!]
    const first = (y1 - y0) / step + step / 6 * ((3 * b * b - 1) * m1 - (3 * a * a - 1) * m0)
    const beyond = (x - from) - at * step
    return {
      value: a * y0 + b * y1 + step * step / 6 * ((a * a * a - a) * m0 + (b * b * b - b) * m1) + first * beyond,
      first,
      second: beyond === 0 ? a * m0 + b * m1 : 0,
    }
  }
}

/** The tridiagonal system m[i-1] + 4 m[i] + m[i+1] = 6 (y[i-1] - 2 y[i] + y[i+1]) / h2 with m = 0 at both ends. */
function secondDerivatives(step: number, knots: ArrayLike<number>): Float64Array {
  const n = knots.length
  const result = new Float64Array(n)
  const ratio = new Float64Array(n)
  for (let i = 1; i < n - 1; i++) {
    const pivot = 4 - ratio[i - 1]!
    ratio[i] = 1 / pivot
    const bend = 6 * (knots[i - 1]! - 2 * knots[i]! + knots[i + 1]!) / (step * step)
    result[i] = (bend - result[i - 1]!) / pivot
  }
  for (let i = n - 2; i > 0; i--) {
    result[i] = result[i]! - ratio[i]! * result[i + 1]!
  }
  return result
}
