import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { clocksChangeAround, clockTime, localToInstant, movedToDate } from '../../../shared/local-time'

describe('localToInstant', () => {
  it.each([
    ['2026-09-12', '13:20', 'Europe/London', '2026-09-12T12:20:00.000Z'],
    ['2026-01-10', '13:20', 'Europe/London', '2026-01-10T13:20:00.000Z'],
    ['2026-07-04', '09:05', 'Australia/Adelaide', '2026-07-03T23:35:00.000Z'],
    ['2026-07-04', '00:00', 'America/St_Johns', '2026-07-04T02:30:00.000Z'],
  ])('%s %s in %s is %s', (date, time, zone, instant) => {
    expect(localToInstant(date, time, zone)).toBe(instant)
    expect(clockTime(instant, zone)).toBe(time)
  })

  it('reads the hour that is skipped in spring with the offset before', () => {
    // British summer time 2026 begins on Sunday 29 March at 01:00 UTC (last Sunday of March).
    expect(localToInstant('2026-03-29', '01:30', 'Europe/London')).toBe('2026-03-29T01:30:00.000Z')
    expect(localToInstant('2026-03-29', '00:30', 'Europe/London')).toBe('2026-03-29T00:30:00.000Z')
    expect(localToInstant('2026-03-29', '02:30', 'Europe/London')).toBe('2026-03-29T01:30:00.000Z')
  })

  it('takes the first passage of the hour that comes twice in autumn', () => {
    // It ends on Sunday 25 October 2026 at 01:00 UTC, when 02:00 becomes 01:00 again.
    expect(localToInstant('2026-10-25', '01:30', 'Europe/London')).toBe('2026-10-25T00:30:00.000Z')
    expect(localToInstant('2026-10-25', '02:30', 'Europe/London')).toBe('2026-10-25T02:30:00.000Z')
  })
})

describe('an hour that comes twice', () => {
  it('keeps the passage that was meant, as long as date and time are the same', () => {
    const second = '2026-10-25T01:30:00.000Z'
    expect(localToInstant('2026-10-25', '01:30', 'Europe/London', second)).toBe(second)
    expect(localToInstant('2026-10-25', '01:30', 'Europe/London')).toBe('2026-10-25T00:30:00.000Z')
    expect(localToInstant('2026-10-25', '01:31', 'Europe/London', second)).toBe('2026-10-25T00:31:00.000Z')
    expect(localToInstant('2026-10-24', '01:30', 'Europe/London', second)).toBe('2026-10-24T00:30:00.000Z')
  })

  it('keeps the seconds of an instant that shows the same', () => {
    expect(localToInstant('2026-09-12', '13:20', 'Europe/London', '2026-09-12T12:20:31.000Z')).toBe('2026-09-12T12:20:31.000Z')
  })
})

describe('movedToDate', () => {
  it('keeps the time of day over a change to and from summer time', () => {
    expect(movedToDate('2026-09-12T12:20:00.000Z', '2026-09-12', '2026-11-14', 'Europe/London')).toBe('2026-11-14T13:20:00.000Z')
    expect(movedToDate('2026-03-28T09:05:00.000Z', '2026-03-28', '2026-03-29', 'Europe/London')).toBe('2026-03-29T08:05:00.000Z')
  })

  it('leaves an outing after midnight after midnight, and everything else alone', () => {
    expect(movedToDate('2026-06-13T00:10:00.000Z', '2026-06-12', '2026-06-19', 'UTC')).toBe('2026-06-20T00:10:00.000Z')
    expect(movedToDate('2026-06-13T00:10:00.000Z', '2026-06-12', '2026-06-12', 'UTC')).toBe('2026-06-13T00:10:00.000Z')
  })

  const zone = fc.constantFrom('Europe/London', 'America/New_York', 'Australia/Sydney', 'Asia/Kolkata', 'UTC')
  const date = fc.date({ min: new Date('2020-01-01'), max: new Date('2030-12-31'), noInvalidDate: true }).map(day => day.toISOString().slice(0, 10))
  it('shows the same clock on the new date, away from skipped hours', () => {
    // From six in the morning on no zone skips an hour.
    const minutes = fc.integer({ min: 6 * 60, max: 24 * 60 - 1 })
    fc.assert(fc.property(zone, date, date, minutes, (timeZone, from, to, minute) => {
      const time = `${String(Math.floor(minute / 60)).padStart(2, '0')}:${String(minute % 60).padStart(2, '0')}`
      const moved = movedToDate(localToInstant(from, time, timeZone), from, to, timeZone)
      expect(moved).toBe(localToInstant(to, time, timeZone))
      expect(clockTime(moved, timeZone)).toBe(time)
    }))
  })
})

describe('clocksChangeAround', () => {
  it('knows the days of the change, from midnight to midnight at the circuit', () => {
    const changes = (instant: string) => clocksChangeAround(instant, 'America/New_York')
    // Sunday 1 November 2026, until midnight in New York.
    expect(['2026-11-01T03:59:00Z', '2026-11-01T04:00:00Z', '2026-11-02T04:59:00Z', '2026-11-02T05:00:00Z'].map(changes)).toEqual([false, true, true, false])
    expect(clocksChangeAround('2026-11-01T12:00:00Z', 'America/Phoenix')).toBe(false)
  })
})
