import type { LapFacts } from './compare-sheet'
import { formatNumber } from './utils/format'

/** Something that was not the same for both laps, as shown: digits and unit settled. */
export interface OutsideRow { label: string, unit: string, lap: string, against: string }

/** What differed outside the car, what was the same, and what nobody noted for both. */
export interface Outside { differs: OutsideRow[], same: string[], unknown: string[] }

interface Item { label: string, unit: string, digits?: number, of: (lap: LapFacts) => number | string | null }

const ITEMS: Item[] = [
  { label: 'Driver', unit: '', of: lap => lap.driver.name },
  { label: 'Car', unit: '', of: lap => lap.car.name },
  { label: 'Track surface', unit: '', of: lap => lap.conditions.wetness },
  { label: 'Track', unit: '°C', of: lap => lap.conditions.trackC },
  { label: 'Air', unit: '°C', of: lap => lap.conditions.airC },
  { label: 'Humidity', unit: '%', of: lap => lap.conditions.humidityPct },
  { label: 'Wind', unit: 'm/s', of: lap => lap.conditions.windMps },
  { label: 'Wind from', unit: '', of: lap => lap.conditions.windFrom || null },
  { label: 'Fuel at the start', unit: 'l', of: lap => lap.fuelStartL },
  { label: 'Passenger', unit: '', of: lap => lap.passenger ? 'yes' : 'no' },
]

/** Whole figures without decimals, others with one. */
function shown(value: number | string): string {
  return typeof value === 'string' ? value : formatNumber(value, Number.isInteger(value) ? 0 : 1)
}

/** Hold the circumstances of two laps against each other. */
export function outsideOf(lap: LapFacts, against: LapFacts): Outside {
  const outside: Outside = { differs: [], same: [], unknown: [] }
  for (const { label, unit, of } of ITEMS) {
    const mine = of(lap)
    const other = of(against)
    if (mine === null && other === null) outside.unknown.push(label.toLowerCase())
    else if (mine === other) outside.same.push(label.toLowerCase())
    else outside.differs.push({ label, unit, lap: mine === null ? 'not noted' : shown(mine), against: other === null ? 'not noted' : shown(other) })
  }
  return outside
}

/** How the traces came about, in sentences. */
export function measuredWords(lap: LapFacts, against: LapFacts, keys: { lap: string, against: string }): string[] {
  const words = lap.rateHz === against.rateHz
    ? [`Both logs have ${formatNumber(lap.rateHz)} samples a second; crossings lie between samples.`]
    : [`The log of ${keys.lap} has ${formatNumber(lap.rateHz)} samples a second, that of ${keys.against} ${formatNumber(against.rateHz)}; crossings lie between samples.`]
  const channels = [['Speed', 'speed'], ['Longitudinal g', 'longitudinal'], ['Lateral g', 'lateral']] as const
  for (const [name, channel] of channels) {
    const how = (lapFacts: LapFacts) => lapFacts.source[channel] === 'logged' ? 'as logged' : 'derived from position and time'
    words.push(how(lap) === how(against) ? `${name} is ${how(lap)}.` : `${name} is ${how(lap)} in ${keys.lap}, ${how(against)} in ${keys.against}.`)
  }
  return words
}
