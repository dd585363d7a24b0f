/**
 * How figures and dates are written in a language. The marks are kept here and not asked from Intl, whose answer
 * depends on the version of its tables: server and browser must write the same. Source: Unicode CLDR; a test holds this
 * table against the CLDR of the runtime.
 */
export interface NumberMarks {
  decimal: string
  /** Between groups of three digits, from five digits on. */
  group: string
}

type DateOrder = 'day name' | 'name day' | 'd.m.y' | 'd/m/y' | 'd-m-y' | 'y-m-d'

export interface NumberLanguageKind extends NumberMarks {
  name: string
  date: DateOrder
}

/** The words of the book stay English in every one of them. */
export const NUMBER_LANGUAGES = {
  'en-GB': { name: 'English, United Kingdom', decimal: '.', group: ',', date: 'day name' },
  'en-US': { name: 'English, United States', decimal: '.', group: ',', date: 'name day' },
  'de-DE': { name: 'German', decimal: ',', group: '.', date: 'd.m.y' },
  'de-CH': { name: 'German, Switzerland', decimal: '.', group: '\u2019', date: 'd.m.y' },
  'fr-FR': { name: 'French', decimal: ',', group: '\u202F', date: 'd/m/y' },
  'nl-NL': { name: 'Dutch', decimal: ',', group: '.', date: 'd-m-y' },
  'sv-SE': { name: 'Swedish', decimal: ',', group: '\u00A0', date: 'y-m-d' },
} as const satisfies Record<string, NumberLanguageKind>

export type NumberLanguage = keyof typeof NUMBER_LANGUAGES

export const NUMBER_LANGUAGE_TAGS = Object.keys(NUMBER_LANGUAGES) as [NumberLanguage, ...NumberLanguage[]]

const DAYS = ['Sun', 'Mon', 'Tue', 'Wed', 'Thu', 'Fri', 'Sat']
const MONTHS = ['Jan', 'Feb', 'Mar', 'Apr', 'May', 'Jun', 'Jul', 'Aug', 'Sep', 'Oct', 'Nov', 'Dec']

const two = (value: number) => String(value).padStart(2, '0')

/** Day, month and year in an order, without the day of the week. */
const ORDERS: Record<DateOrder, (day: number, month: number, year: number) => string> = {
  'day name': (day, month, year) => `${day} ${MONTHS[month - 1]} ${year}`,
  'name day': (day, month, year) => `${MONTHS[month - 1]} ${day}, ${year}`,
  'd.m.y': (day, month, year) => `${two(day)}.${two(month)}.${year}`,
  'd/m/y': (day, month, year) => `${two(day)}/${two(month)}/${year}`,
  'd-m-y': (day, month, year) => `${two(day)}-${two(month)}-${year}`,
  'y-m-d': (day, month, year) => `${year}-${two(month)}-${two(day)}`,
}

/**
 * A calendar date with its day of the week, `Sat 12 Sep 2026` or `Sat 12.09.2026`. Belongs to no time zone.
 * @param date YYYY-MM-DD; anything after the day is ignored
 * @returns null for what is no date
 */
export function writeDate(date: string | null | undefined, language: NumberLanguage): string | null {
  const parts = /^(\d{4})-(\d{2})-(\d{2})/.exec(date ?? '')
  if (!parts) return null
  const [year, month, day] = [Number(parts[1]), Number(parts[2]), Number(parts[3])]
  const utc = new Date(Date.UTC(year, month - 1, day))
  if (utc.getUTCMonth() !== month - 1 || utc.getUTCDate() !== day) return null
  return `${DAYS[utc.getUTCDay()]} ${ORDERS[NUMBER_LANGUAGES[language].date](day, month, year)}`
}
