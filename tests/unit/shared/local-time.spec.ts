import { describe, expect, it } from 'vitest'
import { localToInstant } from '../../../shared/local-time'
import { formatTime } from '../../../shared/utils/format'

describe('localToInstant', () => {
  it.each([
    ['2026-09-12', '13:20', 'Europe/London', '2026-09-12T12:20:00.000Z'],
    ['2026-01-10', '13:20', 'Europe/London', '2026-01-10T13:20:00.000Z'],
    ['2026-07-04', '09:05', 'Australia/Adelaide', '2026-07-03T23:35:00.000Z'],
    ['2026-07-04', '00:00', 'America/St_Johns', '2026-07-04T02:30:00.000Z'],
  ])('%s %s in %s is %s', (date, time, zone, instant) => {
    expect(localToInstant(date, time, zone)).toBe(instant)
    expect(formatTime(instant, zone)).toBe(time)
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
