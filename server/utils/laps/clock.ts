import type { DecimalMark } from './numbers'
import { cellNumber, isMissing } from './numbers'

export type TimeUnit = 's' | 'ms' | 'ISO 8601'

const CLOCK = /^(?:(\d{4})[-/]?(\d\d)[-/]?(\d\d)(?:T|\s+))?(\d\d?):?(\d\d)(?::?(\d\d)(?:[.,](\d+))?)?\s*(Z|[+-]\d\d(?::?\d\d)?)?$/i
const DAY_S = 86400
/** Numbers between these, in seconds, are Unix time: September 2001 to 2103. Smaller ones are a clock of their own. */
const UNIX_FROM_S = 1e9
const UNIX_TO_S = 4.2e9

export interface ClockReading {
  /** Whole seconds since 1970 where a date is given, else since midnight. */
  wholeS: number
  nanoseconds: number
  dated: boolean
  zoned: boolean
}

/**
 * Reads a date and time, or a time of day, as ISO 8601 and RFC 3339 write it (a space for the T, a comma for the point
 * and a slash in the date are taken too). Without a zone it is read as UTC.
 * @returns undefined for anything else
 */
export function parseClock(text: string): ClockReading | undefined {
  const match = CLOCK.exec(text.trim())
  if (!match) return undefined
  const [, year, month, day, hour, minute, second, fraction, zone] = match
  const dated = year !== undefined
  if (!dated && !text.includes(':')) return undefined
  const h = Number(hour)
  const min = Number(minute)
  const s = Number(second ?? 0)
  // A leap second is written as :60 (RFC 3339, 5.7) and runs on into the next minute.
  if (h > 24 || min > 59 || s > 60) return undefined
  let wholeS = h * 3600 + min * 60 + s - zoneS(zone)
  if (dated) {
    const date = new Date(Date.UTC(Number(year), Number(month) - 1, Number(day)))
    if (date.getUTCMonth() !== Number(month) - 1 || date.getUTCDate() !== Number(day)) return undefined
    wholeS += date.getTime() / 1000
  }
  const nanoseconds = fraction === undefined ? 0 : Math.round(Number(`0.${fraction}`) * 1e9)
  return { wholeS, nanoseconds, dated, zoned: zone !== undefined }
}

function zoneS(zone: string | undefined): number {
  if (zone === undefined || zone.toUpperCase() === 'Z') return 0
  const digits = zone.slice(1).replace(':', '').padEnd(4, '0')
  const offset = Number(digits.slice(0, 2)) * 3600 + Number(digits.slice(2)) * 60
  return zone.startsWith('-') ? -offset : offset
}

export interface LogClock {
  /** Seconds since the first value read, for a number in the clock's unit. */
  fromNumber: (value: number) => number
  /** The same for a cell; NaN when it is missing, undefined when it tells no time. */
  fromText: (text: string) => number | undefined
  /** Unix seconds of the first value, null where the file tells no absolute time. */
  startedAtS: () => number | null
  /** True once a date has been read that had no zone. */
  withoutZone: () => boolean
}

/**
 * Turns the time column into seconds since its first value. Differences are taken before any scaling (milliseconds,
 * nanoseconds), so that Unix times keep their full resolution. A time of day without a date continues over midnight.
 */
export function createClock(unit: TimeUnit, mark: DecimalMark): LogClock {
  return unit === 'ISO 8601' ? isoClock() : numberClock(unit === 'ms' ? 1000 : 1, mark)
}

function numberClock(perSecond: number, mark: DecimalMark): LogClock {
  let first = Number.NaN
  function fromNumber(value: number): number {
    if (Number.isNaN(first)) first = value
    return (value - first) / perSecond
  }
  return {
    fromNumber,
    fromText(text) {
      const value = cellNumber(text, mark)
      return value === undefined || Number.isNaN(value) ? value : fromNumber(value)
    },
    startedAtS() {
      const startS = first / perSecond
      return startS >= UNIX_FROM_S && startS <= UNIX_TO_S ? startS : null
    },
    withoutZone: () => false,
  }
}

function isoClock(): LogClock {
  let first: ClockReading | undefined
  let lastWholeS = 0
  let withoutZone = false

  function fromText(text: string): number | undefined {
    if (isMissing(text)) return Number.NaN
    const reading = parseClock(text)
    if (!reading) return undefined
    if (!first) {
      first = reading
      lastWholeS = reading.wholeS
    }
    // A column that mixes dates and bare times of day cannot be laid on one axis.
    if (reading.dated !== first.dated) return undefined
    if (reading.dated && !reading.zoned) withoutZone = true
    // The day that brings it nearest to its predecessor: midnight continues, and one bad cell does not add a day.
    if (!reading.dated) reading.wholeS += DAY_S * Math.round((lastWholeS - reading.wholeS) / DAY_S)
    lastWholeS = reading.wholeS
    return ((reading.wholeS - first.wholeS) * 1e9 + (reading.nanoseconds - first.nanoseconds)) / 1e9
  }

  return {
    fromNumber: () => Number.NaN,
    fromText,
    startedAtS: () => first?.dated ? first.wholeS + first.nanoseconds / 1e9 : null,
    withoutZone: () => withoutZone,
  }
}
