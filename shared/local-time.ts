/** Minutes by which a zone's wall clock is ahead of UTC at an instant. */
export function offsetMinutes(instantMs: number, timeZone: string): number {
  const parts = new Intl.DateTimeFormat('en-GB', {
    timeZone, hourCycle: 'h23', year: 'numeric', month: 'numeric', day: 'numeric', hour: 'numeric', minute: 'numeric',
  }).formatToParts(instantMs)
  const part = (type: string) => Number(parts.find(p => p.type === type)?.value)
  const wallMs = Date.UTC(part('year'), part('month') - 1, part('day'), part('hour'), part('minute'))
  return Math.round((wallMs - Math.floor(instantMs / 60_000) * 60_000) / 60_000)
}

const DAY_MS = 86_400_000

/** The instant at which a zone's clocks show what UTC shows at `wallMs`. See `localToInstant` for odd hours. */
function instantOfWall(wallMs: number, timeZone: string): string {
  const before = offsetMinutes(wallMs - DAY_MS, timeZone)
  const after = offsetMinutes(wallMs + DAY_MS, timeZone)
  const fits = [before, after].find(offset => offsetMinutes(wallMs - offset * 60_000, timeZone) === offset)
  return new Date(wallMs - (fits ?? before) * 60_000).toISOString()
}

/** What the clocks of a zone show, as the instant at which UTC shows it, ms since 1970. */
function wallOf(instant: string, timeZone: string): number {
  const instantMs = Date.parse(instant)
  return instantMs + offsetMinutes(instantMs, timeZone) * 60_000
}

/**
 * The instant at which the clocks of a zone show a date and time. An hour that is skipped in spring is read with the
 * offset before the change, an hour that comes twice in autumn is its first passage.
 * @param date YYYY-MM-DD
 * @param time HH:MM
 * @param known an instant that is kept when it shows this very date and time: perhaps the second passage
 * @returns RFC 3339 in UTC
 */
export function localToInstant(date: string, time: string, timeZone: string, known: string | null = null): string {
  const wallMs = Date.parse(`${date}T${time}:00Z`)
  if (known && Math.floor(wallOf(known, timeZone) / 60_000) * 60_000 === wallMs) return known
  return instantOfWall(wallMs, timeZone)
}

/**
 * Time of day, `13:20`, by the clocks of a zone.
 * @param instant RFC 3339
 * @param timeZone IANA name
 * @returns null for what is no instant
 */
export function clockTime(instant: string | null | undefined, timeZone: string): string | null {
  if (Number.isNaN(Date.parse(instant ?? ''))) return null
  return new Date(wallOf(instant!, timeZone)).toISOString().slice(11, 16)
}

/**
 * The same time of day on a day that is as far from the new date as the instant was from the old one: an outing that
 * began after midnight stays after midnight.
 * @param instant RFC 3339
 * @param fromDate YYYY-MM-DD; so is toDate
 * @returns RFC 3339 in UTC
 */
export function movedToDate(instant: string, fromDate: string, toDate: string, timeZone: string): string {
  const byMs = Date.parse(`${toDate}T00:00:00Z`) - Date.parse(`${fromDate}T00:00:00Z`)
  return byMs === 0 ? instant : instantOfWall(wallOf(instant, timeZone) + byMs, timeZone)
}

/**
 * Whether the clocks of a zone are changed on the day of an instant: a time of day may then be doubted.
 * @param instant RFC 3339
 */
export function clocksChangeAround(instant: string, timeZone: string): boolean {
  const midnightMs = Math.floor(wallOf(instant, timeZone) / DAY_MS) * DAY_MS
  const [begins, ends] = [midnightMs, midnightMs + DAY_MS].map(wallMs => Date.parse(instantOfWall(wallMs, timeZone)))
  return offsetMinutes(begins!, timeZone) !== offsetMinutes(ends!, timeZone)
}
