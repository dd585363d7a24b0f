/** Minutes by which a zone's wall clock is ahead of UTC at an instant. */
function offsetMinutes(instantMs: number, timeZone: string): number {
  const parts = new Intl.DateTimeFormat('en-GB', {
    timeZone, hourCycle: 'h23', year: 'numeric', month: 'numeric', day: 'numeric', hour: 'numeric', minute: 'numeric',
  }).formatToParts(instantMs)
  const part = (type: string) => Number(parts.find(p => p.type === type)?.value)
  const wallMs = Date.UTC(part('year'), part('month') - 1, part('day'), part('hour'), part('minute'))
  return Math.round((wallMs - Math.floor(instantMs / 60_000) * 60_000) / 60_000)
}

/**
 * The instant at which the clocks of a zone show a date and time. An hour that is skipped in spring is read with the
 * offset before the change, an hour that comes twice in autumn is its first passage.
 * @param date YYYY-MM-DD
 * @param time HH:MM
 * @returns RFC 3339 in UTC
 */
export function localToInstant(date: string, time: string, timeZone: string): string {
  const wallMs = Date.parse(`${date}T${time}:00Z`)
  const before = offsetMinutes(wallMs - 86_400_000, timeZone)
  const after = offsetMinutes(wallMs + 86_400_000, timeZone)
  const fits = [before, after].find(offset => offsetMinutes(wallMs - offset * 60_000, timeZone) === offset)
  return new Date(wallMs - (fits ?? before) * 60_000).toISOString()
}
