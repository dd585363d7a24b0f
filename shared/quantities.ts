import { readNumber } from './number-text'

/**
 * The quantities of the book: the unit in which each is stored and sent, and those in which people read and type it.
 *
 * Conversion: `stored = shown * factor + offset`. All factors are exact: NIST SP 811 (2008), appendix B.8, with 1 in =
 * 25.4 mm, 1 ft = 0.3048 m, 1 mi/h = 0.44704 m/s, 1 lb = 0.453 592 37 kg, 1 lbf = 4.448 221 615 260 5 N, 1 gal (U.S.) =
 * 231 in3, degF by its definition, g_n = 9.80665 m/s2.
 */
export interface ShownUnit {
  unit: string
  factor: number
  /** In the stored unit. */
  offset?: number
  /** Decimals of a figure that was measured, or typed in another unit. */
  digits: number
  /** Decimals that a typed figure always has. */
  least?: number
  /** What the arrow keys add or take away. */
  step: number
}

export type Units = 'metric' | 'imperial'
export const UNITS = ['metric', 'imperial'] as const satisfies readonly Units[]

type Quantity = Record<Units, ShownUnit> & { stored: string }

const FOOT_M = 0.3048
const INCH_MM = 25.4
const MILE_PER_HOUR_MPS = 0.44704
const POUND_KG = 0.45359237
const POUND_FORCE_N = 4.4482216152605
const GALLON_L = 231 * INCH_MM ** 3 / 1e6
const STANDARD_GRAVITY_MPS2 = 9.80665

function same(unit: string, factor: number, digits: number, step: number, stored = unit): Quantity {
  const shown = { unit, factor, digits, step }
  return { stored, metric: shown, imperial: shown }
}

export const QUANTITIES = {
  speed: {
    stored: 'm/s',
    metric: { unit: 'km/h', factor: 1 / 3.6, digits: 0, step: 1 },
    imperial: { unit: 'mph', factor: MILE_PER_HOUR_MPS, digits: 0, step: 1 },
  },
  wind: {
    stored: 'm/s',
    metric: { unit: 'm/s', factor: 1, digits: 1, step: 1 },
    imperial: { unit: 'mph', factor: MILE_PER_HOUR_MPS, digits: 1, step: 1 },
  },
  /** Along the track: stations and lengths of layouts. */
  distance: {
    stored: 'm',
    metric: { unit: 'm', factor: 1, digits: 0, step: 1 },
    imperial: { unit: 'ft', factor: FOOT_M, digits: 0, step: 1 },
  },
  /** Across the track. */
  width: {
    stored: 'm',
    metric: { unit: 'm', factor: 1, digits: 1, step: 1 },
    imperial: { unit: 'ft', factor: FOOT_M, digits: 1, step: 1 },
  },
  /** On the car. */
  length: {
    stored: 'mm',
    metric: { unit: 'mm', factor: 1, digits: 1, step: 0.1 },
    imperial: { unit: 'in', factor: INCH_MM, digits: 3, step: 0.01 },
  },
  temperature: {
    stored: '°C',
    metric: { unit: '°C', factor: 1, digits: 1, step: 1 },
    imperial: { unit: '°F', factor: 5 / 9, offset: -160 / 9, digits: 1, step: 1 },
  },
  /** How much warmer; has no zero point to move. */
  temperatureDifference: {
    stored: '°C',
    metric: { unit: '°C', factor: 1, digits: 0, step: 1 },
    imperial: { unit: '°F', factor: 5 / 9, digits: 0, step: 1 },
  },
  /** Above ambient. */
  pressure: {
    stored: 'kPa',
    metric: { unit: 'bar', factor: 100, digits: 2, least: 2, step: 0.01 },
    imperial: { unit: 'psi', factor: POUND_FORCE_N / INCH_MM ** 2 * 1000, digits: 1, least: 1, step: 0.1 },
  },
  volume: {
    stored: 'l',
    metric: { unit: 'l', factor: 1, digits: 1, step: 1 },
    imperial: { unit: 'US gal', factor: GALLON_L, digits: 2, step: 0.5 },
  },
  mass: {
    stored: 'kg',
    metric: { unit: 'kg', factor: 1, digits: 1, step: 1 },
    imperial: { unit: 'lb', factor: POUND_KG, digits: 1, step: 1 },
  },
  springRate: {
    stored: 'N/mm',
    metric: { unit: 'N/mm', factor: 1, digits: 1, step: 1 },
    imperial: { unit: 'lbf/in', factor: POUND_FORCE_N / INCH_MM, digits: 1, step: 5 },
  },
  torque: {
    stored: 'N m',
    metric: { unit: 'N m', factor: 1, digits: 1, step: 1 },
    imperial: { unit: 'lbf ft', factor: POUND_FORCE_N * FOOT_M, digits: 1, step: 1 },
  },
  acceleration: same('g', STANDARD_GRAVITY_MPS2, 2, 0.1, 'm/s2'),
  angle: same('°', 1, 1, 0.1),
  share: same('%', 1, 1, 1),
} as const satisfies Record<string, Quantity>

export type QuantityName = keyof typeof QUANTITIES

/** The unit in which a quantity is shown. */
export function shownUnit(quantity: QuantityName, units: Units): ShownUnit {
  return QUANTITIES[quantity][units]
}

/** A figure in the unit in which it is shown; NaN stays NaN. */
export function toShown(stored: number, { factor, offset = 0 }: Pick<ShownUnit, 'factor' | 'offset'>): number {
  return (stored - offset) / factor
}

/**
 * A figure in the unit in which it is stored, without the dust of the conversion: 1.1 bar is 110 kPa and not
 * 110.00000000000001. Fourteen digits are kept, so that what was typed comes back as it was.
 */
export function toStored(shown: number, { factor, offset = 0 }: Pick<ShownUnit, 'factor' | 'offset'>): number {
  return Number((shown * factor + offset).toPrecision(14))
}

/** A typed figure in the stored unit; null for an empty text, NaN for one that is no figure. */
export function parseShown(typed: string, unit: Pick<ShownUnit, 'factor' | 'offset'>): number | null {
  const shown = readNumber(typed)
  return shown === null || Number.isNaN(shown) ? shown : toStored(shown, unit)
}

/** Units of settings and messages, as they stand in answers of the server, with the quantity each of them measures. */
const BY_UNIT: Partial<Record<string, QuantityName>> = {
  'bar': 'pressure', 'kPa': 'pressure', 'N/mm': 'springRate', 'mm': 'length', 'kg': 'mass', 'l': 'volume', '°C': 'temperature',
  'm/s': 'wind', 'm': 'width', '°': 'angle', '%': 'share',
}

/**
 * What a unit of an answer measures, with the words behind it (`mm out`, `% front`).
 * @returns null for what is counted or has no unit
 */
export function quantityOfUnit(unit: string): { quantity: QuantityName, words: string, factor: number } | null {
  const [head = '', ...rest] = unit.split(' ')
  const quantity = BY_UNIT[head]
  if (!quantity) return null
  const { stored, metric } = QUANTITIES[quantity]
  return { quantity, words: rest.length ? ` ${rest.join(' ')}` : '', factor: head === stored ? 1 : metric.factor }
}
