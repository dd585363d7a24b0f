import type { NumberMarks } from './number-language'
import { MISSING } from './utils/format'

/** Figures as text and text as figures. What is missing (null, undefined, NaN, infinite) is an en dash. */
export type Maybe = number | null | undefined

const MINUS = '\u2212'

/** Above what converting there and back does to a figure (some 1e-13 of it), far below what anybody types. */
const TYPED_TOLERANCE = 1e-12
const MOST_DECIMALS = 6

export function isThere(value: Maybe): value is number {
  return typeof value === 'number' && Number.isFinite(value)
}

/**
 * A plain figure with a fixed number of digits and a real minus sign (U+2212). What rounds to nothing has no sign.
 * Four digits stand together, more are grouped by three.
 * @param grouped whether to group at all: not in boxes to write in
 * @see BIPM, The International System of Units, 9th ed. (2019), 5.4.4: with four digits it is customary not to group
 */
export function writeNumber(value: Maybe, digits: number, marks: NumberMarks, grouped = true): string {
  if (!isThere(value)) return MISSING
  const [whole = '', fraction] = Math.abs(value).toFixed(digits).split('.')
  const head = grouped && whole.length > 4 ? whole.replace(/\B(?=(\d{3})+$)/g, marks.group) : whole
  const text = fraction === undefined ? head : head + marks.decimal + fraction
  return value < 0 && /[1-9]/.test(text) ? MINUS + text : text
}

/** The same with its sign: `+0.613`, `−0.070`, and `0.000` without one. */
export function writeSigned(value: Maybe, digits: number, marks: NumberMarks, grouped = true): string {
  const text = writeNumber(value, digits, marks, grouped)
  return isThere(value) && value > 0 && /[1-9]/.test(text) ? `+${text}` : text
}

/**
 * A lap or sector time: minutes, seconds and `digits` decimals, `1:31.482`. Rounded before it is taken apart, so that
 * it never reads 1:60.000. Minutes are not gathered into hours.
 * @param seconds duration, s
 */
export function writeLapTime(seconds: Maybe, digits: number, marks: NumberMarks): string {
  if (!isThere(seconds)) return MISSING
  const scale = 10 ** digits
  const total = Math.round(Math.abs(seconds) * scale)
  const minutes = Math.floor(total / (60 * scale))
  const rest = total - minutes * 60 * scale
  const whole = Math.floor(rest / scale)
  const fraction = digits > 0 ? marks.decimal + String(rest - whole * scale).padStart(digits, '0') : ''
  return `${seconds < 0 && total > 0 ? MINUS : ''}${minutes}:${String(whole).padStart(2, '0')}${fraction}`
}

/**
 * Decimals of a figure that was typed, at most six.
 * @returns null for a figure that is no short decimal, as most are that were typed in another unit
 */
export function ownDecimals(value: number): number | null {
  const tolerance = TYPED_TOLERANCE * Math.max(1, Math.abs(value))
  for (let digits = 0; digits <= MOST_DECIMALS; digits++) {
    if (Math.abs(value - Number(value.toFixed(digits))) <= tolerance) return digits
  }
  return null
}

/** Whether a text is a figure whose groups of three are parted by one mark: `12,345` or `1.234.567`. */
const grouped = (text: string, mark: string) => new RegExp(`^[+-]?\\d{1,3}(?:\\${mark}\\d{3})+$`).test(text)

/**
 * A figure as a person types it: decimal comma or point, any minus sign, spaces between digits. A single mark is always
 * the decimal mark; of two different ones the last is, and the other must part groups of three.
 * @returns null for an empty text, NaN for one that is no figure
 */
export function readNumber(typed: string): number | null {
  const plain = typed.trim().replace(/[\u2212\u2013]/g, '-').replace(/(\d)[\s\u2019'](?=\d{3}(?!\d))/g, '$1')
  if (plain === '') return null
  const last = Math.max(plain.lastIndexOf('.'), plain.lastIndexOf(','))
  const [whole, fraction] = last < 0 ? [plain, ''] : [plain.slice(0, last), plain.slice(last + 1)]
  const other = plain[last] === '.' ? ',' : '.'
  const joined = grouped(whole, other) ? whole.replaceAll(other, '') : whole
  const text = last < 0 ? joined : `${joined}.${fraction}`
  return /^[+-]?(?:\d+\.?\d*|\.\d+)$/.test(text) ? Number(text) : Number.NaN
}
