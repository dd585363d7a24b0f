/**
 * How Lapwright writes quantities. Digits and names are put together here and not by Intl wherever Intl's answer
 * depends on the version of its tables: server and browser must write the same, or the page would change as it loads.
 * Everything missing (null, undefined, NaN, infinite) is written as an en dash.
 */

/** Stands where a figure is missing. */
export const MISSING = '–'

const MINUS = '\u2212'
const STANDARD_GRAVITY_MPS2 = 9.80665
const KPA_PER_BAR = 100
const DAYS = ['Sun', 'Mon', 'Tue', 'Wed', 'Thu', 'Fri', 'Sat']
const MONTHS = ['Jan', 'Feb', 'Mar', 'Apr', 'May', 'Jun', 'Jul', 'Aug', 'Sep', 'Oct', 'Nov', 'Dec']

type Maybe = number | null | undefined

function isThere(value: Maybe): value is number {
  return typeof value === 'number' && Number.isFinite(value)
}

/**
 * A plain figure with a fixed number of digits and a real minus sign (U+2212). What rounds to nothing has no sign.
 * @param value in the unit in which it is shown
 */
export function formatNumber(value: Maybe, digits = 0): string {
  if (!isThere(value)) return MISSING
  const text = Math.abs(value).toFixed(digits)
  return value < 0 && Number(text) !== 0 ? MINUS + text : text
}

/**
 * A lap or sector time: minutes, seconds and `digits` decimals, `1:31.482`. Rounded before it is taken apart, so that
 * it never reads 1:60.000. Minutes are not gathered into hours.
 * @param seconds duration, s
 */
export function formatLapTime(seconds: Maybe, digits = 3): string {
  if (!isThere(seconds)) return MISSING
  const scale = 10 ** digits
  const total = Math.round(Math.abs(seconds) * scale)
  const minutes = Math.floor(total / (60 * scale))
  const rest = total - minutes * 60 * scale
  const whole = Math.floor(rest / scale)
  const fraction = digits > 0 ? `.${String(rest - whole * scale).padStart(digits, '0')}` : ''
  return `${seconds < 0 && total > 0 ? MINUS : ''}${minutes}:${String(whole).padStart(2, '0')}${fraction}`
}

/**
 * A difference with its sign: `+0.613`, `−0.070`, and `0.000` without one.
 * @param seconds signed difference, s (or any other quantity that is compared)
 */
export function formatDifference(seconds: Maybe, digits = 3): string {
  if (!isThere(seconds)) return MISSING
  const text = formatNumber(seconds, digits)
  return seconds > 0 && Number(text) !== 0 ? `+${text}` : text
}

/** @param speedMps speed, m/s. Written in km/h, without the unit. */
export function formatKmh(speedMps: Maybe, digits = 0): string {
  return isThere(speedMps) ? formatNumber(speedMps * 3.6, digits) : MISSING
}

/** @param accelMps2 acceleration, m/s2. Written in multiples of standard gravity (9.80665 m/s2), without the unit. */
export function formatG(accelMps2: Maybe, digits = 2): string {
  return isThere(accelMps2) ? formatNumber(accelMps2 / STANDARD_GRAVITY_MPS2, digits) : MISSING
}

/** @param pressureKpa pressure above ambient, kPa. Written in bar, without the unit. */
export function formatBar(pressureKpa: Maybe, digits = 2): string {
  return isThere(pressureKpa) ? formatNumber(pressureKpa / KPA_PER_BAR, digits) : MISSING
}

/**
 * A calendar date, `Sat 12 Sep 2026`. Belongs to no time zone.
 * @param date YYYY-MM-DD; anything after the day is ignored
 */
export function formatDate(date: string | null | undefined): string {
  const parts = /^(\d{4})-(\d{2})-(\d{2})/.exec(date ?? '')
  if (!parts) return MISSING
  const [year, month, day] = [Number(parts[1]), Number(parts[2]), Number(parts[3])]
  const utc = new Date(Date.UTC(year, month - 1, day))
  if (utc.getUTCMonth() !== month - 1 || utc.getUTCDate() !== day) return MISSING
  return `${DAYS[utc.getUTCDay()]} ${day} ${MONTHS[month - 1]} ${year}`
}

/**
 * Time of day, `13:20`, in the zone of the circuit.
 * @param instant RFC 3339
 * @param timeZone IANA name
 */
export function formatTime(instant: string | null | undefined, timeZone: string): string {
  const milliseconds = Date.parse(instant ?? '')
  if (Number.isNaN(milliseconds)) return MISSING
  const parts = new Intl.DateTimeFormat('en-GB', { timeZone, hourCycle: 'h23', hour: '2-digit', minute: '2-digit' })
    .formatToParts(milliseconds)
  const part = (type: 'hour' | 'minute') => parts.find(one => one.type === type)?.value
  return `${part('hour')}:${part('minute')}`
}

/** A file's size in decimal units: `812 B`, `3.2 kB`, `18.4 MB`. */
export function formatSize(bytes: Maybe): string {
  if (!isThere(bytes)) return MISSING
  const units = ['B', 'kB', 'MB', 'GB', 'TB']
  let [value, i] = [bytes, 0]
  // 999.95 of a unit would be written as 1000.0 of it.
  while (value >= (i === 0 ? 999.5 : 999.95) && i < units.length - 1) {
    value /= 1000
    i++
  }
  return `${formatNumber(value, i === 0 ? 0 : 1)} ${units[i]}`
}

/**
 * A setting of a setup sheet as it is read aloud: pressures in bar keep two digits, other figures as many as they have.
 * @param value already in the unit in which it is shown; null is a setting that was left open
 * @param unit the unit of the field, or '' for words
 * @param plus whether a figure above zero is written with its sign
 */
export function formatSetting(value: number | string | null | undefined, unit = '', plus = false): string {
  if (value === null || value === undefined || value === '') return 'not set'
  if (typeof value === 'string') return value
  if (!Number.isFinite(value)) return MISSING
  const own = decimals(value)
  const digits = unit === 'bar' ? Math.max(2, own) : own
  return plus ? formatDifference(value, digits) : formatNumber(value, digits)
}

/** Decimals a figure has, at most three. */
function decimals(value: number): number {
  return value.toFixed(3).replace(/\.?0+$/, '').split('.')[1]?.length ?? 0
}

/** `1 lap`, `2 laps`. */
export function formatCount(count: number, one: string, many = `${one}s`): string {
  return `${count} ${count === 1 ? one : many}`
}

const WORDS = [
  'no', 'one', 'two', 'three', 'four', 'five', 'six', 'seven', 'eight', 'nine', 'ten', 'eleven', 'twelve',
] as const

/** A number within a sentence: in words up to twelve, in figures beyond. */
export function numberInWords(count: number): string {
  return WORDS[count] ?? String(count)
}

/** A count within a sentence: `two laps`, `25 laps`. */
export function countInWords(count: number, one: string, many = `${one}s`): string {
  return `${numberInWords(count)} ${count === 1 ? one : many}`
}

/** The same words with a capital at their beginning. */
export function asSentence(text: string): string {
  return text.charAt(0).toUpperCase() + text.slice(1)
}

/** Number, year and kind of a car as a title block writes them: `No. 47, 2006 hatchback`. */
export function carKind(car: { number: string, year: number | null, kind: string }): string {
  const kind = [car.year, car.kind].filter(Boolean).join(' ')
  return [car.number && `No. ${car.number}`, kind].filter(Boolean).join(', ') || MISSING
}
