/** Every spelling of a unit that a header may use, without spaces and in lower case, by the unit as shown. */
const SPELLINGS: Readonly<Record<string, readonly string[]>> = {
  's': ['s', 'sec', 'secs', 'second', 'seconds'],
  'ms': ['ms', 'msec', 'msecs', 'millis', 'millisecond', 'milliseconds'],
  'ISO 8601': ['iso8601', 'iso-8601', 'rfc3339', 'datetime'],
  '°': ['°', 'deg', 'degs', 'degree', 'degrees', 'dd', 'decimaldegrees', '°n', '°e', 'degn', 'dege'],
  'rad': ['rad', 'rads', 'radian', 'radians'],
  'm': ['m', 'meter', 'meters', 'metre', 'metres'],
  'ft': ['ft', 'feet', 'foot'],
  'km/h': ['km/h', 'kmh', 'kph', 'kmph', 'kmhr', 'km/hr', 'kmperh', 'kmperhour'],
  'mph': ['mph', 'mi/h', 'mile/h', 'miles/h', 'milesperhour'],
  'm/s': ['m/s', 'mps', 'ms-1', 'meter/s', 'metre/s', 'meters/s', 'metres/s', 'mpers'],
  'kn': ['kn', 'kt', 'kts', 'knot', 'knots'],
  'g': ['g', 'gs', 'g\'s'],
  'm/s2': ['m/s2', 'm/s²', 'm/s^2', 'm/s/s', 'mps2', 'ms2', 'ms-2', 'm/sec2', 'm/sec^2', 'mpers2'],
  '°/s': ['°/s', 'deg/s', 'deg/sec', 'degree/s', 'degrees/s', 'dps', 'degps', 'degs-1', 'degpers'],
  'rad/s': ['rad/s', 'rad/sec', 'radps', 'rads-1', 'radpers'],
  '1/min': ['1/min', 'rpm', 'r/min', 'rev/min', 'min-1', 'u/min'],
  '%': ['%', 'pct', 'percent', 'perc'],
  '0..1': ['0..1', '0-1', 'ratio', 'fraction'],
  'kPa': ['kpa', 'kilopascal'],
  'bar': ['bar', 'bars', 'barg'],
  'psi': ['psi', 'psig', 'lb/in2', 'lbf/in2', 'lbf/in²'],
  '°C': ['°c', 'c', 'degc', 'celsius', 'degreec', 'degreesc'],
  '°F': ['°f', 'f', 'degf', 'fahrenheit', 'degreef', 'degreesf'],
  'V': ['v', 'volt', 'volts'],
  'mV': ['mv', 'millivolt', 'millivolts'],
}

const bySpelling: ReadonlyMap<string, string> = new Map(
  Object.entries(SPELLINGS).flatMap(([unit, spellings]) => spellings.map(spelling => [spelling, unit] as const)),
)

/** The unit that a text spells, as Lapwright writes it, or undefined. `[KPH]` and `km / h` are both `km/h`. */
export function knownUnit(text: string): string | undefined {
  const bare = text.trim().replace(/^[([{<]|[)\]}>]$/g, '').replace(/[\s_]/g, '').replace(/º|˚/g, '°')
  // Only the case tells megavolts from millivolts; nobody logs megavolts, so case is ignored.
  return bySpelling.get(bare.toLowerCase())
}

/** A header taken apart: `Speed (km/h)` is the name `Speed` and the unit text `km/h`. */
export interface HeaderParts {
  name: string
  unitText: string | null
}

/** Splits a unit in brackets off a header. A bracket with nothing before it is a name. */
export function headerParts(header: string): HeaderParts {
  const trimmed = header.trim()
  const open = Math.max(...['(', '[', '{', '<'].map(bracket => trimmed.lastIndexOf(bracket)))
  if (open > 0 && /[)\]}>]$/.test(trimmed)) {
    return { name: trimmed.slice(0, open).trim(), unitText: trimmed.slice(open + 1, -1).trim() }
  }
  return { name: trimmed, unitText: null }
}

/** Lower-case words of a name: `gpsSpeed_kmh` is gps, speed, kmh; accents are dropped. */
export function words(name: string): string[] {
  return name
    .normalize('NFKD')
    .replace(/\p{M}/gu, '')
    .replace(/([a-z\d])([A-Z])/g, '$1 $2')
    .replace(/([A-Z])([A-Z][a-z])/g, '$1 $2')
    .toLowerCase()
    .split(/[^a-z\d%°/]+/)
    .filter(Boolean)
}

/**
 * Readings of a name whose last one to three words spell a unit: `acc_x_g` is acc, x in g; `yaw_deg_s` is yaw in °/s.
 * The longest spelling comes first.
 */
export function suffixUnits(parts: readonly string[]): { name: string[], unit: string }[] {
  const readings: { name: string[], unit: string }[] = []
  for (const count of [3, 2, 1]) {
    if (parts.length <= count) continue
    const tail = parts.slice(-count)
    const unit = knownUnit(tail.join('/')) ?? knownUnit(tail.join(''))
    if (unit !== undefined) readings.push({ name: parts.slice(0, -count), unit })
  }
  return readings
}
