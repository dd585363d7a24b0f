import { formatCount } from './utils/format'

const MONTHS = [
  'January', 'February', 'March', 'April', 'May', 'June', 'July', 'August', 'September', 'October', 'November', 'December',
]

/** `12 September 2026`, as a sentence says it. @param date YYYY-MM-DD */
export function dateInWords(date: string): string {
  const [year, month, day] = date.split('-').map(Number)
  return `${day} ${MONTHS[month! - 1]} ${year}`
}

/** What stands on something that is to be removed: how many, and the date of the last. */
export interface Standing { count: number, lastDate: string }

const lastOn = ({ count, lastDate }: Standing) => count === 1 ? `on ${dateInWords(lastDate)}` : `the last on ${dateInWords(lastDate)}`
const were = ({ count }: Standing, what: string) => `${formatCount(count, what)} ${count === 1 ? 'was' : 'were'}`
const those = ({ count }: Standing, what: string) => count === 1 ? `that ${what}` : `those ${what}s`
const it = ({ count }: Standing) => count === 1 ? 'it' : 'them'

/** Why a circuit cannot go, and what to do first. */
export function circuitStays(days: Standing): string {
  return `${were(days, 'track day')} held at this circuit, ${lastOn(days)}: remove ${those(days, 'day')} first.`
}

export function layoutStays(outings: Standing): string {
  return `${were(outings, 'outing')} driven on this layout, ${lastOn(outings)}: move ${those(outings, 'outing')} to another layout or remove ${it(outings)} first.`
}

export function carStays(outings: Standing): string {
  return `${were(outings, 'outing')} driven in this car, ${lastOn(outings)}: put another car on ${those(outings, 'outing')} or remove ${it(outings)} first.`
}

export function setupStays(outings: Standing): string {
  return `${were(outings, 'outing')} driven with this revision, ${lastOn(outings)}: put another revision on ${those(outings, 'outing')} or remove ${it(outings)} first.`
}

/** @param numbers of the revisions that were written from this one, rising; at least one */
export function setupIsBase(numbers: readonly number[]): string {
  if (numbers.length === 1) return `Revision ${numbers[0]} is based on this one and shows what it changed: remove that one first.`
  const listed = `${numbers.slice(0, -1).join(', ')} and ${numbers.at(-1)}`
  return `Revisions ${listed} are based on this one and show what they changed: remove those first.`
}

export function dayStays(outings: number): string {
  return outings === 1
    ? '1 outing stands on this day: remove that outing first.'
    : `${outings} outings stand on this day: remove them first.`
}

export interface StandingLog { fileName: string, lapCount: number }

/** Why an outing cannot go without its logs being named. */
export function outingStays(logs: readonly StandingLog[]): string {
  const [first] = logs
  if (!first) return 'This outing has laps: remove them first.'
  const laps = formatCount(logs.reduce((sum, log) => sum + log.lapCount, 0), 'lap')
  return logs.length === 1
    ? `The log ${first.fileName} with ${laps} belongs to this outing: remove the log first, or remove both together on the outing’s page.`
    : `${logs.length} logs with ${laps} belong to this outing: remove the logs first, or remove all together on the outing’s page.`
}

/**
 * What a person is told before an outing goes with its logs.
 * @param logs names of their files
 */
export function outingGoes({ logs, lapCount }: { logs: readonly string[], lapCount: number }): string {
  if (!logs.length) return 'The outing goes with what was written down about it.'
  const what = logs.length === 1 ? 'its log' : `its ${logs.length} logs`
  return `The outing goes, and with it ${what} and ${formatCount(lapCount, 'lap')}: ${logs.join(', ')}.`
}
