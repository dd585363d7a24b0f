import { clocksChangeAround, clockTime } from './local-time'
import { NUMBER_LANGUAGES, writeDate, type NumberLanguage, type NumberMarks } from './number-language'
import { isThere, ownDecimals, writeLapTime, writeNumber, writeSigned, type Maybe } from './number-text'
import { quantityOfUnit, shownUnit, toShown, type QuantityName, type ShownUnit, type Units } from './quantities'
import { zoneAbbreviation } from './time-zones'
import { MISSING } from './utils/format'

/** What a person chose that bears on figures. */
export interface FigureChoice { units: Units, numberLanguage: NumberLanguage }

/** Metric, with a decimal point: what strangers read. */
export const STANDARD_CHOICE: FigureChoice = { units: 'metric', numberLanguage: 'en-GB' }

/** Writes every figure of every screen in a person's units and language. Missing is an en dash. */
export type Figures = ReturnType<typeof makeFigures>

/** The writers of figures for a choice. Every argument is in the unit in which the quantity is stored. */
export function makeFigures(choice: FigureChoice) {
  const marks: NumberMarks = NUMBER_LANGUAGES[choice.numberLanguage]
  return {
    choice,
    marks,
    ...plainFigures(marks),
    ...timeFigures(choice.numberLanguage, marks),
    ...quantityFigures(choice.units, marks),
  }
}

function plainFigures(marks: NumberMarks) {
  const number = (value: Maybe, digits = 0) => writeNumber(value, digits, marks)
  return {
    /** A figure as it is, with a fixed number of decimals. */
    number,
    /** With its sign: `+0.613`. Differences of times in seconds, and of anything that has its unit already. */
    difference: (value: Maybe, digits = 3) => writeSigned(value, digits, marks),
    /** @param value per cent */
    percent: (value: Maybe, digits = 0) => isThere(value) ? `${number(value, digits)} %` : MISSING,
    /** A file's size in decimal units: `812 B`, `3.2 kB`, `18.4 MB`. */
    size: (bytes: Maybe) => writeSize(bytes, marks),
  }
}

function writeSize(bytes: Maybe, marks: NumberMarks): string {
  if (!isThere(bytes)) return MISSING
  const units = ['B', 'kB', 'MB', 'GB', 'TB']
  let [value, i] = [bytes, 0]
  // 999.95 of a unit would be written as 1000.0 of it.
  while (value >= (i === 0 ? 999.5 : 999.95) && i < units.length - 1) {
    value /= 1000
    i++
  }
  return `${writeNumber(value, i === 0 ? 0 : 1, marks)} ${units[i]}`
}

function timeFigures(language: NumberLanguage, marks: NumberMarks) {
  const timeInZone = (instant: string | null | undefined, timeZone: string) => {
    const time = clockTime(instant, timeZone)
    return time ? `${time} ${zoneAbbreviation(instant!, timeZone)}` : MISSING
  }
  return {
    /** @param seconds duration, s: `1:31.482` */
    lapTime: (seconds: Maybe, digits = 3) => writeLapTime(seconds, digits, marks),
    /** @param date YYYY-MM-DD, or an instant of which the day in UTC is meant */
    date: (date: string | null | undefined) => writeDate(date, language) ?? MISSING,
    /** Time of day by the clocks of a zone, `13:20`; with its abbreviation on a day on which they are changed. */
    time: (instant: string | null | undefined, timeZone: string) => {
      const time = clockTime(instant, timeZone)
      return time && clocksChangeAround(instant!, timeZone) ? timeInZone(instant, timeZone) : time ?? MISSING
    },
    /** With the zone's abbreviation, `13:20 BST`: where it could be doubted. */
    timeInZone,
  }
}

function quantityFigures(units: Units, marks: NumberMarks) {
  const unitOf = (quantity: QuantityName) => shownUnit(quantity, units)
  const shown = (quantity: QuantityName, stored: Maybe) =>
    isThere(stored) ? toShown(stored, unitOf(quantity)) : Number.NaN
  const figure = (quantity: QuantityName, stored: Maybe, digits: number = unitOf(quantity).digits) =>
    writeNumber(shown(quantity, stored), digits, marks)
  const unit = (quantity: QuantityName) => unitOf(quantity).unit
  const withUnit = (quantity: QuantityName) => (stored: Maybe, digits?: number) =>
    isThere(stored) ? joined(figure(quantity, stored, digits), unit(quantity)) : MISSING
  const typed = (quantity: QuantityName, stored: Maybe) =>
    writeTyped(shown(quantity, stored), unitOf(quantity), marks)
  return {
    unit,
    unitOf,
    /** In the unit in which it is shown, NaN when missing: to be rounded before it is subtracted, and for axes. */
    shown,
    /** Without its unit, with the decimals of a measured figure or as many as are asked for. */
    figure,
    /** As figure, with the sign: differences of a quantity. */
    signed: (quantity: QuantityName, stored: Maybe, digits: number = unitOf(quantity).digits) =>
      writeSigned(shown(quantity, stored), digits, marks),
    /** Without its unit, as it was typed. */
    typed,
    typedWithUnit: (quantity: QuantityName, stored: Maybe) =>
      isThere(stored) ? joined(typed(quantity, stored), unit(quantity)) : MISSING,
    speed: withUnit('speed'),
    distance: withUnit('distance'),
    width: withUnit('width'),
    temperature: withUnit('temperature'),
    temperatureDifference: withUnit('temperatureDifference'),
    pressure: withUnit('pressure'),
    /** Acceleration in multiples of standard gravity, without the unit. */
    g: (mps2: Maybe, digits?: number) => figure('acceleration', mps2, digits),
    ...settingFigures(units, marks),
  }
}

/** Degrees of an angle stand close to their figure. */
function joined(figure: string, unit: string): string {
  return unit === '°' ? figure + unit : `${figure} ${unit}`
}

/** As a person typed it: all of its own decimals where they are few, those of a measured figure otherwise. */
function writeTyped(
  shown: number, { digits, least = 0 }: Pick<ShownUnit, 'digits' | 'least'>, marks: NumberMarks, plus = false,
): string {
  if (!Number.isFinite(shown)) return MISSING
  const decimals = Math.max(least, ownDecimals(shown) ?? digits)
  return plus ? writeSigned(shown, decimals, marks) : writeNumber(shown, decimals, marks)
}

function settingFigures(units: Units, marks: NumberMarks) {
  return {
    /** The unit of a setting. @param unit of the answer: `bar`, `mm out` */
    settingUnit(unit: string): string {
      const of = quantityOfUnit(unit)
      return of ? shownUnit(of.quantity, units).unit + of.words : unit
    },
    /**
     * A setting of a setup sheet.
     * @param value in `unit`, as answers of the server have it; null is a setting that was left open
     * @param unit of the answer, or '' for words
     * @param plus whether a figure above zero is written with its sign
     */
    setting(value: number | string | null | undefined, unit = '', plus = false): string {
      if (value === null || value === undefined || value === '') return 'not set'
      if (typeof value === 'string') return value
      const of = quantityOfUnit(unit)
      if (!of) return writeTyped(value, { digits: 3 }, marks, plus)
      const own = shownUnit(of.quantity, units)
      return writeTyped(toShown(value * of.factor, own), own, marks, plus)
    },
  }
}
