const NUMBER = /^[+-]?(?:\d+(?:\.\d*)?|\.\d+)(?:e[+-]?\d+)?$/i
const POINT_NUMBER = /^[+-]?\d*\.\d+$/
const COMMA_NUMBER = /^[+-]?\d*,\d+$/
const MISSING: ReadonlySet<string> = new Set(['', '-', '--', 'nan', 'n/a', 'na', '#n/a', 'null', 'none'])

/** Powers of ten that a float64 holds exactly. */
const TENS = Float64Array.from({ length: 23 }, (_, i) => Number(`1e${i}`))
/** Integers below this are exact in a float64. */
const EXACT = 2 ** 53

export type DecimalMark = '.' | ','

/** True for a cell that says that there is no value: empty, `-`, `NaN`, `n/a` and the like. */
export function isMissing(text: string): boolean {
  return text.length < 5 && MISSING.has(text.trim().toLowerCase())
}

/**
 * The number in a cell, correctly rounded: the same float64 as `Number(text)`.
 * @returns NaN for a missing value, undefined for text that is no number (also `Infinity` and hexadecimal)
 */
export function cellNumber(text: string, mark: DecimalMark): number | undefined {
  const trimmed = text.trim()
  if (MISSING.has(trimmed.toLowerCase())) return Number.NaN
  const pointed = mark === ',' ? trimmed.replace(',', '.') : trimmed
  if (!NUMBER.test(pointed)) return undefined
  const value = Number(pointed)
  return Number.isFinite(value) ? value : undefined
}

/**
 * Whether the file writes 1,5 for one and a half. Only asked where the comma is not the delimiter, and answered with
 * yes when values have a comma and none has a point, so that 1,234 next to 5.5 is never taken for a fraction.
 */
export function decimalMark(values: Iterable<string>, delimiter: string): DecimalMark {
  if (delimiter === ',') return '.'
  let commas = false
  for (const value of values) {
    if (POINT_NUMBER.test(value.trim())) return '.'
    commas ||= COMMA_NUMBER.test(value.trim())
  }
  return commas ? ',' : '.'
}

/**
 * Reads a plain decimal number straight from bytes, or NaN when the cell is anything else and `cellNumber` must look at
 * it. The digits make an integer m < 2^53 and k <= 22 of them follow the mark; m and 10^k are exact, so one division
 * rounds once and the result is the correctly rounded one.
 * @param mark byte of the decimal mark
 * @see W. D. Clinger, How to read floating point numbers accurately, PLDI 1990 (its fast path). O(length).
 */
export function plainNumber(bytes: Uint8Array, start: number, end: number, mark: number): number {
  let at = start
  while (at < end && bytes[at] === 32) at++
  const negative = bytes[at] === 45
  if (negative) at++
  let digits = 0
  let mantissa = 0
  let fraction = -1
  for (; at < end; at++) {
    const byte = bytes[at]!
    if (byte >= 48 && byte <= 57) {
      mantissa = mantissa * 10 + (byte - 48)
      digits++
    }
    else if (byte === mark && fraction < 0) fraction = digits
    else break
  }
  while (at < end && bytes[at] === 32) at++
  if (at < end || digits === 0 || digits > 16 || mantissa >= EXACT) return Number.NaN
  const value = fraction < 0 ? mantissa : mantissa / TENS[digits - fraction]!
  return negative ? -value : value
}
