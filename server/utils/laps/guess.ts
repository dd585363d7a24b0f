import type { ChannelKind } from '../../../shared/channels'
import type { PreviewColumn } from '../../../shared/schemas/logs'
import type { DecimalMark } from './numbers'
import { channelKind, channelSlug } from '../../../shared/channels'
import { ALIASES, ALIASES_WITH_UNIT, DEVICES } from './aliases'
import { parseClock } from './clock'
import { cellNumber, isMissing } from './numbers'
import { printable } from './text'
import { guessUnit, speedUnitFromPath } from './unit-guess'
import { headerParts, knownUnit, suffixUnits, words } from './units'

/** A column as found in the first rows of a file. */
export interface FoundColumn {
  index: number
  /** The header as it stands in the file; may be empty. */
  source: string
  /** What the units row says, '' where there is none. */
  unitText: string
  /** The cells of the first rows, missing ones included. */
  values: readonly string[]
}

type Content = 'number' | 'clock' | 'text' | 'empty'

interface Column extends FoundColumn {
  content: Content
  /** NaN where a cell is no number. */
  numbers: Float64Array
}

interface Candidate {
  channel: ChannelKind
  /** The unit that the header or the units row states, where the channel knows it. */
  unit: string | undefined
  score: number
}

type Guess = Pick<PreviewColumn, 'channel' | 'unit' | 'confidence' | 'reason'>

const byAlias = aliasIndex(ALIASES)
const byAliasWithUnit = aliasIndex(ALIASES_WITH_UNIT)
const LONGEST_NAME = 63
const LONGEST_UNIT = 20
const LONGEST_VALUE = 200

function aliasIndex(aliases: Readonly<Record<string, readonly string[]>>): ReadonlyMap<string, readonly string[]> {
  const index = new Map<string, string[]>()
  for (const [channel, names] of Object.entries(aliases)) {
    for (const name of names) index.set(name, [...index.get(name) ?? [], channel])
  }
  return index
}

/** How many of a row's cells name a known channel; by this the header is told from other lines above the values. */
export function knownNames(cells: readonly string[]): number {
  return cells.filter(cell => headerReadings(cell, '').some(reading => channelsOf(reading).length > 0)).length
}

/**
 * Says for every column which channel it is, in which unit, how sure that is and why. A channel is given once: to the
 * column that names it best, the first of equals; every other column of numbers keeps its own name as a slug, and text
 * stays in the file.
 * @param found the columns in the order of the file
 * @param named false where the file has no header, so that nothing can be recognised
 */
export function guessColumns(found: readonly FoundColumn[], mark: DecimalMark, named: boolean): PreviewColumn[] {
  const columns = found.map(column => inspect(column, mark))
  const winners = named ? pickWinners(columns) : new Map<number, Candidate>()
  const taken = new Set([...winners.values()].map(({ channel }) => channel.name))
  const guesses = columns.map((column, i) => {
    const winner = winners.get(i)
    return winner ? recognised(column, winner) : unrecognised(column, taken, named)
  })
  checkSpeed(columns, guesses)
  return columns.map(({ index, source, values }, i) => ({
    index,
    source,
    ...guesses[i]!,
    firstValues: values.filter(value => !isMissing(value)).slice(0, 3).map(value => printable(value, LONGEST_VALUE)),
  }))
}

function inspect(column: FoundColumn, mark: DecimalMark): Column {
  const present = column.values.filter(value => !isMissing(value))
  const numbers = Float64Array.from(column.values, value => cellNumber(value, mark) ?? Number.NaN)
  const numeric = numbers.filter(value => !Number.isNaN(value)).length
  const clocks = numeric === present.length ? 0 : present.filter(value => parseClock(value) !== undefined).length
  return { ...column, numbers, content: contentOf(present.length, numeric, clocks) }
}

function contentOf(present: number, numeric: number, clocks: number): Content {
  if (present === 0) return 'empty'
  if (clocks * 2 > present) return 'clock'
  return numeric * 2 > present ? 'number' : 'text'
}

interface Reading {
  name: string[]
  unitText: string | null
}

function headerReadings(source: string, unitText: string): Reading[] {
  const parts = headerParts(source)
  const name = words(parts.name)
  if (unitText !== '' || parts.unitText !== null) {
    const stated = unitText !== '' ? unitText : parts.unitText
    const readings: Reading[] = [{ name, unitText: stated }]
    // A bracket need not hold a unit: `Accel (x)`, `Time (UTC)`.
    if (parts.unitText !== null && knownUnit(parts.unitText) === undefined) {
      readings.unshift({ name: [...name, ...words(parts.unitText)], unitText: unitText !== '' ? unitText : null })
    }
    return readings
  }
  return [{ name, unitText: null }, ...suffixUnits(name).map(({ name, unit }) => ({ name, unitText: unit }))]
}

/** The channels that a reading of a header can mean, best first. */
function channelsOf({ name, unitText }: Reading): Candidate[] {
  const unit = unitText === null ? undefined : knownUnit(unitText) ?? knownUnit(unitText.replace(/\/?\s*\bper\b\s*/, '/'))
  const device = name.length > 1 ? DEVICES.get(name[0]!) : undefined
  const spellings: { key: string, bonus: number }[] = [{ key: name.join(' '), bonus: 0 }]
  if (device !== undefined) spellings.push({ key: name.slice(1).join(' '), bonus: device })
  return spellings.flatMap(({ key, bonus }) => {
    const withUnit = unit === undefined ? [] : byAliasWithUnit.get(key) ?? []
    return [...byAlias.get(key) ?? [], ...withUnit].flatMap((channel) => {
      const kind = channelKind(channel)!
      const implied = unitText === null ? knownUnit(key) : unit
      const fits = kind.units.some(known => known.unit === implied)
      if (!fits && (withUnit.includes(channel) || !unitIgnorable(kind, unitText, implied))) return []
      const score = 10 + bonus + (ALIASES[channel]?.[0] === key ? 0.5 : 0) + (fits ? 0.25 : 0)
      return [{ channel: kind, unit: fits ? implied : undefined, score }]
    })
  })
}

/** A stated text that is no unit at all may be passed over where it cannot lead to a wrong conversion. */
function unitIgnorable(kind: ChannelKind, unitText: string | null, unit: string | undefined): boolean {
  if (unitText === null || unitText === '') return true
  return unit === undefined && (kind.units.length === 1 || kind.name === 'time')
}

function candidatesOf(column: Column): Candidate[] {
  if (column.content === 'text') return []
  const candidates = headerReadings(column.source, column.unitText).flatMap(channelsOf)
  return candidates
    .filter(({ channel }) => column.content !== 'clock' || channel.name === 'time')
    .map(candidate => candidate.channel.name === 'time' ? { ...candidate, score: candidate.score + timeBonus(column) } : candidate)
    .sort((a, b) => b.score - a.score)
}

/** Where several columns tell the time, the one that rises from row to row is worth more than any name. */
function timeBonus(column: Column): number {
  const times = timesOf(column).filter(value => !Number.isNaN(value))
  if (times.length < 2) return 0
  let rising = 0
  for (let i = 1; i < times.length; i++) if (times[i]! > times[i - 1]!) rising++
  return rising >= 0.98 * (times.length - 1) ? 5 : 5 * rising / times.length - 2
}

/** One a row, NaN where the cell tells no time; seconds where they are written as times, else as they stand. */
function timesOf(column: Column): Float64Array {
  if (column.content !== 'clock') return column.numbers
  return Float64Array.from(column.values, (value) => {
    const reading = parseClock(value)
    return reading ? reading.wholeS + reading.nanoseconds / 1e9 : Number.NaN
  })
}

function pickWinners(columns: readonly Column[]): Map<number, Candidate> {
  const winners = new Map<string, { i: number, candidate: Candidate }>()
  const all = columns.map(candidatesOf)
  if (!all.some(candidates => candidates.some(({ channel }) => channel.name === 'time'))) {
    const unnamed = columns.findIndex(column => column.content === 'clock' && timeBonus(column) === 5)
    if (unnamed >= 0) all[unnamed] = [{ channel: channelKind('time')!, unit: undefined, score: 0 }]
  }
  for (const [i, candidates] of all.entries()) {
    const candidate = candidates[0]
    if (!candidate) continue
    const holder = winners.get(candidate.channel.name)
    if (!holder || candidate.score > holder.candidate.score) winners.set(candidate.channel.name, { i, candidate })
  }
  return new Map([...winners.values()].map(({ i, candidate }) => [i, candidate]))
}

function recognised(column: Column, { channel, unit, score }: Candidate): Guess {
  if (score === 0) return { channel: 'time', unit: 'ISO 8601', confidence: 'likely', reason: 'No column is named time, and these values are times that rise from row to row.' }
  if (channel.name === 'time' && column.content === 'clock') {
    return { channel: 'time', unit: 'ISO 8601', confidence: 'sure', reason: 'The header says time and the values are written as times.' }
  }
  const limit = channel.name === 'latitude' ? 90 : channel.name === 'longitude' ? 180 : Infinity
  if (column.numbers.some(value => Math.abs(value) > limit)) {
    return { channel: channel.name, unit: channel.unit, confidence: 'likely', reason: `The header says ${channel.label}, but some values are beyond ${limit}°; decimal degrees are needed.` }
  }
  if (unit !== undefined) return { channel: channel.name, unit, confidence: 'sure', reason: `The header says ${channel.label} in ${unit}.` }
  if (channel.units.length === 1) return { channel: channel.name, unit: channel.units[0]!.unit, confidence: 'sure', reason: `The header says ${channel.label}.` }
  const guess = guessUnit(channel, column.numbers)
  return { channel: channel.name, unit: guess.unit, confidence: 'likely', reason: `The header says ${channel.label} without a unit; ${guess.because}.` }
}

function unrecognised(column: Column, taken: Set<string>, named: boolean): Guess {
  const { name, unit } = ownNameAndUnit(column)
  if (column.content === 'text' || column.content === 'clock') return { channel: null, unit: '', confidence: 'unknown', reason: 'Its values are not numbers, so it stays in the file.' }
  if (column.content === 'empty' && (column.source === '' || !named)) return { channel: null, unit: '', confidence: 'unknown', reason: 'It has no name and no values.' }
  const rival = candidatesOf(column)[0]?.channel
  const channel = freeName(name, `${name} ${unit}`, taken)
  taken.add(channel)
  const why = !named
    ? 'The file has no header, so nothing says what this is'
    : rival ? `Another column is already ${rival.label}` : 'Not a channel that Lapwright knows'
  return { channel, unit, confidence: 'unknown', reason: `${why}; kept under its own name.` }
}

function ownNameAndUnit(column: Column): { name: string, unit: string } {
  const parts = headerParts(column.source)
  const stated = column.unitText || parts.unitText
  if (stated) return { name: parts.name, unit: printable(knownUnit(stated) ?? stated, LONGEST_UNIT) }
  // One letter at the end of an unknown name (`sensor_v`) is too little to call it a unit.
  const suffix = suffixUnits(words(parts.name)).find(({ name }) => words(parts.name).slice(name.length).join('').length > 1)
  return suffix ? { name: suffix.name.join(' '), unit: suffix.unit } : { name: parts.name, unit: '' }
}

/** A name that no other column has and that is not the name of a known channel, which would be converted. */
function freeName(name: string, longName: string, taken: ReadonlySet<string>): string {
  const free = (slug: string) => !taken.has(slug) && !channelKind(slug)
  const fit = (text: string) => {
    const slug = channelSlug(text)
    return (/^[a-z]/.test(slug) ? slug : `column_${slug}`).slice(0, LONGEST_NAME - 4).replace(/_+$/, '')
  }
  if (free(fit(name))) return fit(name)
  // Only a rejected unit makes the long name the better one; a second column of one name is numbered.
  if (!taken.has(fit(name)) && free(fit(longName))) return fit(longName)
  let number = 2
  while (!free(`${fit(name)}_${number}`)) number++
  return `${fit(name)}_${number}`
}

/** A speed without a unit is held against the speed at which the position moves. */
function checkSpeed(columns: readonly Column[], guesses: Guess[]): void {
  const find = (channel: string) => guesses.findIndex(guess => guess.channel === channel)
  const [speed, time, latitude, longitude] = [find('speed'), find('time'), find('latitude'), find('longitude')]
  if (speed < 0 || time < 0 || latitude < 0 || longitude < 0 || guesses[speed]!.confidence === 'sure') return
  const unit = speedUnitFromPath({
    timesS: timesOf(columns[time]!).map(value => guesses[time]!.unit === 'ms' ? value / 1000 : value),
    latitudesDeg: columns[latitude]!.numbers,
    longitudesDeg: columns[longitude]!.numbers,
    speeds: columns[speed]!.numbers,
  })
  if (unit) Object.assign(guesses[speed]!, { unit, reason: `The header says Speed without a unit; in ${unit} it agrees with how fast the position moves.` })
}
