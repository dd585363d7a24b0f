import type { ChannelKind } from '../../../shared/channels'
import { channelKind } from '../../../shared/channels'
import { EARTH_M_PER_DEG } from './fixes'

/** How far the unit's speed may be off the path's; the nearest two units, mph and kn, differ by 15 %. */
const SPEED_AGREES = 0.07
/** A path shorter than this says nothing about a speed. */
const SHORTEST_PATH_M = 50

/**
 * The likeliest unit of a known channel whose header names none, from the size of its first values. All thresholds are
 * common practice, no source; the guess is shown as such and asks to be confirmed.
 * @param values in the unit of the file, NaN = missing
 */
export function guessUnit(kind: ChannelKind, values: Float64Array): { unit: string, because: string } {
  const present = values.filter(value => !Number.isNaN(value))
  const largest = present.reduce((most, value) => Math.max(most, Math.abs(value)), 0)
  const because = present.length === 0 ? 'the unit is the usual one' : `the unit is a guess from values up to ${Number(largest.toPrecision(4))}`
  return { unit: unitBySize(kind, present, largest), because }
}

function unitBySize(kind: ChannelKind, present: Float64Array, largest: number): string {
  switch (kind.units[0]?.unit) {
    case 's': return timeUnit(present)
    case 'g': return largest <= 6 ? 'g' : 'm/s2'
    case '%': return largest <= 1 && present.some(value => value !== 0) ? '0..1' : '%'
    case 'kPa': return largest <= 14 ? 'bar' : largest <= 140 ? 'psi' : 'kPa'
    case '°C': return largest > 150 ? '°F' : '°C'
    case 'V': return largest > 100 ? 'mV' : 'V'
    default: return kind.units[0]?.unit ?? ''
  }
}

/** Unix times tell their unit by their size, others by their step: 5 and more whole units from row to row are ms. */
function timeUnit(present: Float64Array): 's' | 'ms' {
  if ((present[0] ?? 0) >= 1e11) return 'ms'
  if (present.length < 2 || (present[0] ?? 0) >= 1e9) return 's'
  const steps = Float64Array.from({ length: present.length - 1 }, (_, i) => present[i + 1]! - present[i]!).sort()
  return steps[steps.length >> 1]! >= 5 && present.every(Number.isInteger) ? 'ms' : 's'
}

/** First rows of a log, all of one length, NaN = missing. */
export interface PathAndSpeed {
  timesS: Float64Array
  latitudesDeg: Float64Array
  longitudesDeg: Float64Array
  /** In the unit that is asked for. */
  speeds: Float64Array
}

/**
 * The unit in which a speed column agrees with the path that the position takes meanwhile.
 * @returns undefined when the car hardly moves or no unit agrees within 7 %
 */
export function speedUnitFromPath({ timesS, latitudesDeg, longitudesDeg, speeds }: PathAndSpeed): string | undefined {
  let pathM = 0
  let integral = 0
  let integralAtFix = 0
  let last = -1
  let lastFix = -1
  for (let i = 0; i < timesS.length; i++) {
    const stepS = last < 0 ? 0 : timesS[i]! - timesS[last]!
    if (Number.isNaN(timesS[i]! + latitudesDeg[i]! + longitudesDeg[i]! + speeds[i]!) || stepS < 0 || stepS > 5) continue
    if (last >= 0) integral += stepS * (speeds[i]! + speeds[last]!) / 2
    last = i
    if (lastFix >= 0) {
      const northDeg = latitudesDeg[i]! - latitudesDeg[lastFix]!
      const eastDeg = (longitudesDeg[i]! - longitudesDeg[lastFix]!) * Math.cos(latitudesDeg[i]! * Math.PI / 180)
      const stepM = Math.hypot(northDeg, eastDeg) * EARTH_M_PER_DEG
      // Shorter steps are summed later, else the receiver's scatter would lengthen the path.
      if (stepM < 5) continue
      pathM += stepM
    }
    lastFix = i
    integralAtFix = integral
  }
  if (pathM < SHORTEST_PATH_M) return undefined
  const agrees = (factor: number) => Math.abs(integralAtFix * factor / pathM - 1)
  const [best] = [...channelKind('speed')?.units ?? []].sort((a, b) => agrees(a.factor) - agrees(b.factor))
  return best && agrees(best.factor) < SPEED_AGREES ? best.unit : undefined
}
