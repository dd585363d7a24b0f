import type { LapFacts } from './compare-sheet'
import type { Figures } from './figures'
import type { QuantityName } from './quantities'

/** Something that was not the same for both laps, as shown: digits and unit settled. */
export interface OutsideRow { label: string, unit: string, lap: string, against: string }

/** What differed outside the car, what was the same, and what nobody noted for both. */
export interface Outside { differs: OutsideRow[], same: string[], unknown: string[] }

interface Item { label: string, quantity?: QuantityName, of: (lap: LapFacts) => number | string | null }

const ITEMS: Item[] = [
  { label: 'Driver', of: lap => lap.driver.name },
  { label: 'Car', of: lap => lap.car.name },
  { label: 'Track surface', of: lap => lap.conditions.wetness },
  { label: 'Track', quantity: 'temperature', of: lap => lap.conditions.trackC },
  { label: 'Air', quantity: 'temperature', of: lap => lap.conditions.airC },
  { label: 'Humidity', quantity: 'share', of: lap => lap.conditions.humidityPct },
  { label: 'Wind', quantity: 'wind', of: lap => lap.conditions.windMps },
  { label: 'Wind from', of: lap => lap.conditions.windFrom || null },
  { label: 'Fuel at the start', quantity: 'volume', of: lap => lap.fuelStartL },
  { label: 'Passenger', of: lap => lap.passenger ? 'yes' : 'no' },
]

function shown(value: number | string | null, quantity: QuantityName | undefined, figures: Figures): string {
  if (value === null) return 'not noted'
  return typeof value === 'string' || !quantity ? String(value) : figures.typed(quantity, value)
}

/** Hold the circumstances of two laps against each other. */
export function outsideOf(lap: LapFacts, against: LapFacts, figures: Figures): Outside {
  const outside: Outside = { differs: [], same: [], unknown: [] }
  for (const { label, quantity, of } of ITEMS) {
    const mine = of(lap)
    const other = of(against)
    if (mine === null && other === null) outside.unknown.push(label.toLowerCase())
    else if (mine === other) outside.same.push(label.toLowerCase())
    else {
      const unit = quantity ? figures.unit(quantity) : ''
      const write = (value: number | string | null) => shown(value, quantity, figures)
      outside.differs.push({ label, unit, lap: write(mine), against: write(other) })
    }
  }
  return outside
}

/** How the traces came about, in sentences. */
export function measuredWords(
  lap: LapFacts, against: LapFacts, keys: { lap: string, against: string }, figures: Figures,
): string[] {
  const rate = (rateHz: number) => figures.number(rateHz)
  const words = lap.rateHz === against.rateHz
    ? [`Both logs have ${rate(lap.rateHz)} samples a second; crossings lie between samples.`]
    : [`The log of ${keys.lap} has ${rate(lap.rateHz)} samples a second, that of ${keys.against} ${rate(against.rateHz)}; crossings lie between samples.`]
  const channels = [['Speed', 'speed'], ['Longitudinal g', 'longitudinal'], ['Lateral g', 'lateral']] as const
  for (const [name, channel] of channels) {
    const how = (lapFacts: LapFacts) => lapFacts.source[channel] === 'logged' ? 'as logged' : 'derived from position and time'
    words.push(how(lap) === how(against) ? `${name} is ${how(lap)}.` : `${name} is ${how(lap)} in ${keys.lap}, ${how(against)} in ${keys.against}.`)
  }
  return words
}
