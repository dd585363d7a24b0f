import { localToInstant, offsetMinutes } from './local-time'

/** Abbreviations by zone, in winter and in summer, as the time zone database of IANA has them. */
const ABBREVIATIONS: readonly [winter: string, summer: string, ...zones: string[]][] = [
  ['UTC', 'UTC', 'UTC', 'Etc/UTC', 'Etc/GMT', 'GMT'],
  ['GMT', 'BST', 'Europe/London', 'Europe/Belfast', 'Europe/Jersey', 'Europe/Guernsey', 'Europe/Isle_of_Man'],
  ['GMT', 'IST', 'Europe/Dublin'],
  ['WET', 'WEST', 'Europe/Lisbon', 'Atlantic/Madeira', 'Atlantic/Canary', 'Atlantic/Faroe'],
  ['CET', 'CEST', ...`Amsterdam Andorra Belgrade Berlin Bratislava Brussels Budapest Copenhagen Gibraltar Ljubljana Luxembourg Madrid
    Malta Monaco Oslo Paris Podgorica Prague Rome San_Marino Sarajevo Skopje Stockholm Tirane Vaduz Vatican Vienna Warsaw Zagreb
    Zurich`.split(/\s+/).map(city => `Europe/${city}`)],
  ['EET', 'EEST', ...'Athens Bucharest Chisinau Helsinki Kiev Kyiv Mariehamn Riga Sofia Tallinn Vilnius'.split(' ').map(city => `Europe/${city}`), 'Asia/Nicosia'],
  ['MSK', 'MSK', 'Europe/Moscow'],
  ['EST', 'EDT', 'America/New_York', 'America/Detroit', 'America/Toronto', 'America/Indiana/Indianapolis'],
  ['CST', 'CDT', 'America/Chicago', 'America/Winnipeg'],
  ['MST', 'MDT', 'America/Denver', 'America/Boise', 'America/Edmonton'],
  ['MST', 'MST', 'America/Phoenix'],
  ['PST', 'PDT', 'America/Los_Angeles', 'America/Vancouver'],
  ['JST', 'JST', 'Asia/Tokyo'],
  ['SAST', 'SAST', 'Africa/Johannesburg'],
  ['AWST', 'AWST', 'Australia/Perth'],
  ['ACST', 'ACDT', 'Australia/Adelaide'],
  ['AEST', 'AEST', 'Australia/Brisbane'],
  ['AEST', 'AEDT', 'Australia/Sydney', 'Australia/Melbourne', 'Australia/Hobart'],
  ['NZST', 'NZDT', 'Pacific/Auckland'],
]

const byZone = new Map(ABBREVIATIONS.flatMap(([winter, summer, ...zones]) =>
  zones.map(zone => [zone, { winter, summer }] as const)))

/**
 * What the clocks of a zone are called at an instant: `BST`, `CET`, or the distance to UTC (`UTC+5:30`) where no
 * abbreviation is in common use. Names are kept here: those of Intl differ from one browser to the next.
 * @param instant RFC 3339, or ms since 1970
 * @param timeZone IANA name
 */
export function zoneAbbreviation(instant: string | number, timeZone: string): string {
  const instantMs = typeof instant === 'number' ? instant : Date.parse(instant)
  if (Number.isNaN(instantMs)) return ''
  const offset = offsetMinutes(instantMs, timeZone)
  const known = byZone.get(timeZone)
  if (!known) return utcDistance(offset)
  const year = new Date(instantMs).getUTCFullYear()
  const winter = Math.min(...[0, 6].map(month => offsetMinutes(Date.UTC(year, month, 1), timeZone)))
  return offset > winter ? known.summer : known.winter
}

/**
 * What the clocks of a zone are called on a date: both names where they are changed on it, `BST, then GMT`.
 * @param date YYYY-MM-DD
 */
export function clockNames(date: string, timeZone: string): string {
  const names = ['00:00', '23:59'].map(time => zoneAbbreviation(localToInstant(date, time, timeZone), timeZone))
  return [...new Set(names)].join(', then ')
}

function utcDistance(minutes: number): string {
  if (minutes === 0) return 'UTC'
  const [hours, rest] = [Math.floor(Math.abs(minutes) / 60), Math.abs(minutes) % 60]
  return `UTC${minutes < 0 ? '\u2212' : '+'}${hours}${rest ? `:${String(rest).padStart(2, '0')}` : ''}`
}
