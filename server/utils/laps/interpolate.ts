/** Last index whose value is not above `at`; -1 where there is none. O(log n). */
export function indexBefore(values: ArrayLike<number>, at: number): number {
  let low = -1
  let high = values.length
  while (high - low > 1) {
    const middle = (low + high) >> 1
    if (values[middle]! <= at) low = middle
    else high = middle
  }
  return low
}

/**
 * Values at other places by straight lines between the known ones, read up to a missing one but never over a wide hole.
 * @param at      strictly rising, length n: station or time
 * @param values  length n, NaN = missing
 * @param wanted  rising, length m
 * @param bridge  widest hole of missing values that is still joined, in the unit of `at`; neighbours always are
 * @returns length m; NaN outside the known values. O(n + m).
 */
export function interpolate(
  at: ArrayLike<number>,
  values: ArrayLike<number>,
  wanted: ArrayLike<number>,
  bridge: number,
): Float64Array {
  const result = new Float64Array(wanted.length).fill(Number.NaN)
  const n = at.length
  const knownFrom = (i: number) => {
    while (i < n && Number.isNaN(values[i]!)) i++
    return i
  }
  let i = knownFrom(0)
  let j = knownFrom(i + 1)
  for (let w = 0; w < wanted.length; w++) {
    while (j < n && at[j]! <= wanted[w]!) {
      i = j
      j = knownFrom(j + 1)
    }
    if (i >= n || at[i]! > wanted[w]!) continue
    if (at[i] === wanted[w]) {
      result[w] = values[i]!
      continue
    }
    if (j >= n || (j > i + 1 && at[j]! - at[i]! > bridge)) continue
    result[w] = values[i]! + (wanted[w]! - at[i]!) / (at[j]! - at[i]!) * (values[j]! - values[i]!)
  }
  return result
}
