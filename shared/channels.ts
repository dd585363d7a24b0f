/**
 * The channels Lapwright knows by name: what they are called, in which unit they are stored, and which units a file may
 * give them in. Everything else in a log is kept under a slug of its own header, in the unit of the file.
 *
 * Conversion: `stored = value * factor + offset`. Factors are exact (NIST SP 811, appendix B.8: 1 mile = 1609.344 m,
 * 1 international knot = 1852/3600 m/s, g_n = 9.80665 m/s2, 1 psi = 6894.757... Pa, degF by its definition).
 */
export interface FileUnit {
  /** As shown and as stored in a column map. */
  unit: string
  factor: number
  offset?: number
}

export interface ChannelKind {
  name: string
  label: string
  /** Unit in which samples are stored: SI, but degrees for geographic angles and steering, and % for pedals. */
  unit: string
  units: readonly FileUnit[]
}

const G = 9.80665
const PSI_KPA = 6.894757293168361

const acceleration: readonly FileUnit[] = [
  { unit: 'g', factor: G },
  { unit: 'm/s2', factor: 1 },
]
const pressure: readonly FileUnit[] = [
  { unit: 'kPa', factor: 1 },
  { unit: 'bar', factor: 100 },
  { unit: 'psi', factor: PSI_KPA },
]
const temperature: readonly FileUnit[] = [
  { unit: '°C', factor: 1 },
  { unit: '°F', factor: 5 / 9, offset: -160 / 9 },
]
const percent: readonly FileUnit[] = [
  { unit: '%', factor: 1 },
  { unit: '0..1', factor: 100 },
]

export const CHANNELS = [
  { name: 'time', label: 'Time', unit: 's', units: [{ unit: 's', factor: 1 }, { unit: 'ms', factor: 0.001 }, { unit: 'ISO 8601', factor: 1 }] },
  { name: 'latitude', label: 'Latitude', unit: '°', units: [{ unit: '°', factor: 1 }] },
  { name: 'longitude', label: 'Longitude', unit: '°', units: [{ unit: '°', factor: 1 }] },
  { name: 'altitude', label: 'Altitude', unit: 'm', units: [{ unit: 'm', factor: 1 }, { unit: 'ft', factor: 0.3048 }] },
  { name: 'speed', label: 'Speed', unit: 'm/s', units: [{ unit: 'km/h', factor: 1 / 3.6 }, { unit: 'mph', factor: 0.44704 }, { unit: 'm/s', factor: 1 }, { unit: 'kn', factor: 1852 / 3600 }] },
  { name: 'course', label: 'Course', unit: '°', units: [{ unit: '°', factor: 1 }] },
  { name: 'longitudinal_acceleration', label: 'Longitudinal acceleration', unit: 'm/s2', units: acceleration },
  { name: 'lateral_acceleration', label: 'Lateral acceleration', unit: 'm/s2', units: acceleration },
  { name: 'vertical_acceleration', label: 'Vertical acceleration', unit: 'm/s2', units: acceleration },
  { name: 'yaw_rate', label: 'Yaw rate', unit: '°/s', units: [{ unit: '°/s', factor: 1 }, { unit: 'rad/s', factor: 180 / Math.PI }] },
  { name: 'rpm', label: 'Engine speed', unit: '1/min', units: [{ unit: '1/min', factor: 1 }] },
  { name: 'throttle', label: 'Throttle', unit: '%', units: percent },
  { name: 'brake', label: 'Brake', unit: '%', units: percent },
  { name: 'brake_pressure', label: 'Brake pressure', unit: 'kPa', units: pressure },
  { name: 'steering', label: 'Steering', unit: '°', units: [{ unit: '°', factor: 1 }, { unit: 'rad', factor: 180 / Math.PI }] },
  { name: 'gear', label: 'Gear', unit: '', units: [{ unit: '', factor: 1 }] },
  { name: 'oil_pressure', label: 'Oil pressure', unit: 'kPa', units: pressure },
  { name: 'oil_temperature', label: 'Oil temperature', unit: '°C', units: temperature },
  { name: 'coolant_temperature', label: 'Coolant temperature', unit: '°C', units: temperature },
  { name: 'battery_voltage', label: 'Battery voltage', unit: 'V', units: [{ unit: 'V', factor: 1 }, { unit: 'mV', factor: 0.001 }] },
  { name: 'satellites', label: 'Satellites', unit: '', units: [{ unit: '', factor: 1 }] },
  { name: 'fix_quality', label: 'Fix quality', unit: '', units: [{ unit: '', factor: 1 }] },
] as const satisfies readonly ChannelKind[]

/** Channels that are stored as float64: float32 positions alone cost 5 to 20 ms of lap time. */
export const FLOAT64_CHANNELS: ReadonlySet<string> = new Set(['time', 'latitude', 'longitude'])

const byName: ReadonlyMap<string, ChannelKind> = new Map(CHANNELS.map(kind => [kind.name, kind]))

/** The kind of a channel, or undefined for a column that is kept under its own name. */
export function channelKind(name: string): ChannelKind | undefined {
  return byName.get(name)
}

/** A slug of a header that names a channel Lapwright does not know: lower case, words joined by underscores. */
export function channelSlug(header: string): string {
  const slug = header.normalize('NFKD').replace(/\p{M}/gu, '').toLowerCase().replace(/[^a-z0-9]+/g, '_').replace(/^_+|_+$/g, '')
  return slug || 'column'
}
