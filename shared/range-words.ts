import type { Figures } from './figures'
import { isThere, readNumber, writeNumber } from './number-text'
import { quantityOfUnit, toShown } from './quantities'

/** What a figure must lie between, as the schemas say it: `between −30 and 55 °C`. */
export function rangeWords(from: number, to: number, unit: string): string {
  return `between ${from} and ${to}${unit ? ` ${unit}` : ''}`.replaceAll('-', '\u2212')
}

const RANGE = /^between (\u2212?[\d.]+) and (\u2212?[\d.]+)(?: ([^ ,]+)(?: \w+)?(?:, that is .*)?)?$/

/**
 * A message of a schema with its range in the reader's unit and language; other messages as they are. The ends are
 * rounded inwards, so that whatever lies between the told ones is taken.
 */
export function rangeInUnits(message: string, figures: Pick<Figures, 'marks' | 'unitOf'>): string {
  const parts = RANGE.exec(message)
  const [from, to] = [readNumber(parts?.[1] ?? ''), readNumber(parts?.[2] ?? '')]
  if (!parts || !isThere(from) || !isThere(to)) return message
  const unit = parts[3] ?? ''
  const of = quantityOfUnit(unit)
  if (!of) return `between ${plain(from, figures)} and ${plain(to, figures)}${unit ? ` ${unit}` : ''}`
  const own = figures.unitOf(of.quantity)
  const scale = 10 ** own.digits
  // A limit that is round in this unit must not be pushed inwards by the dust of its conversion.
  const dust = 1e-9
  const inwards = (value: number, way: 1 | -1) => way * Math.ceil(way * value * scale - dust) / scale
  const low = inwards(toShown(from * of.factor, own), 1)
  const high = inwards(toShown(to * of.factor, own), -1)
  return `between ${plain(low, figures)} and ${plain(high, figures)} ${own.unit}`
}

function plain(value: number, { marks }: Pick<Figures, 'marks'>): string {
  return writeNumber(value, String(Math.abs(value)).split('.')[1]?.length ?? 0, marks)
}
