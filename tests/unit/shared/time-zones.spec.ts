import { describe, expect, it } from 'vitest'
import { clockNames, zoneAbbreviation } from '../../../shared/time-zones'

/** What the CLDR of the runtime calls the zone's time in the English of a place where it is in common use. */
function named(instant: string, timeZone: string, english: string): string {
  return new Intl.DateTimeFormat(english, { timeZone, timeZoneName: 'short' }).formatToParts(new Date(instant)).find(part => part.type === 'timeZoneName')!.value
}

describe('zoneAbbreviation', () => {
  it.each([
    ['Europe/London', 'en-GB'], ['Europe/Berlin', 'en-GB'], ['Europe/Madrid', 'en-GB'], ['Europe/Lisbon', 'en-GB'], ['Europe/Helsinki', 'en-GB'],
    ['America/New_York', 'en-US'], ['America/Chicago', 'en-US'], ['America/Denver', 'en-US'], ['America/Phoenix', 'en-US'], ['America/Los_Angeles', 'en-US'],
    ['Australia/Sydney', 'en-AU'], ['Australia/Adelaide', 'en-AU'], ['Australia/Brisbane', 'en-AU'], ['Pacific/Auckland', 'en-NZ'],
  ])('names the time of %s in January and July as CLDR does in %s', (zone, english) => {
    for (const instant of ['2026-01-12T12:00:00Z', '2026-07-12T12:00:00Z']) {
      expect(zoneAbbreviation(instant, zone), instant).toBe(named(instant, zone, english))
    }
  })

  it('changes with the clocks', () => {
    expect(zoneAbbreviation('2026-10-25T00:59:59Z', 'Europe/London')).toBe('BST')
    expect(zoneAbbreviation('2026-10-25T01:00:00Z', 'Europe/London')).toBe('GMT')
    expect(zoneAbbreviation('2026-07-12T12:00:00Z', 'Europe/Dublin')).toBe('IST')
  })

  it('names both where the clocks are changed on a date', () => {
    expect(clockNames('2026-10-25', 'Europe/London')).toBe('BST, then GMT')
    expect(clockNames('2026-03-29', 'Europe/Berlin')).toBe('CET, then CEST')
    expect(clockNames('2026-09-12', 'Europe/Berlin')).toBe('CEST')
  })

  it('tells the distance to UTC where no abbreviation is in common use', () => {
    expect(zoneAbbreviation('2026-01-12T12:00:00Z', 'Asia/Kolkata')).toBe('UTC+5:30')
    expect(zoneAbbreviation('2026-01-12T12:00:00Z', 'America/Sao_Paulo')).toBe('UTC\u22123')
    expect(zoneAbbreviation('2026-01-12T12:00:00Z', 'UTC')).toBe('UTC')
    expect(zoneAbbreviation('no instant', 'UTC')).toBe('')
  })
})
