import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { createClock, parseClock } from '../../../../../server/utils/laps/clock'

function unixS(text: string): number | undefined {
  const reading = parseClock(text)
  return reading && reading.wholeS + reading.nanoseconds / 1e9
}

describe('parseClock', () => {
  // RFC 3339, section 5.8, examples; seconds since 1970 worked out from its own explanations.
  it('reads the examples of RFC 3339', () => {
    expect(unixS('1985-04-12T23:20:50.52Z')).toBe(482196050.52)
    // "equivalent to 1996-12-20T00:39:57Z in UTC"
    expect(unixS('1996-12-19T16:39:57-08:00')).toBe(unixS('1996-12-20T00:39:57Z'))
    // A leap second, and the same one in another zone.
    expect(unixS('1990-12-31T23:59:60Z')).toBe(unixS('1991-01-01T00:00:00Z'))
    expect(unixS('1990-12-31T15:59:60-08:00')).toBe(unixS('1990-12-31T23:59:60Z'))
    expect(unixS('1937-01-01T12:00:27.87+00:20')).toBe(unixS('1937-01-01T11:40:27.87Z'))
  })

  it('agrees with Date on every millisecond', () => {
    fc.assert(fc.property(fc.date({ min: new Date(0), max: new Date('2100-01-01T00:00:00Z'), noInvalidDate: true }), (date) => {
      const reading = parseClock(date.toISOString())!
      expect(reading.wholeS * 1000 + reading.nanoseconds / 1e6).toBe(date.getTime())
    }))
  })

  it.each(['2026-05-09 10:15:00,5', '20260509T101500.5', '2026/05/09 10:15:00.500'])('reads %j as UTC and says that it has no zone', (text) => {
    expect(unixS(text)).toBe(Date.UTC(2026, 4, 9, 10, 15, 0, 500) / 1000)
    expect(parseClock(text)).toMatchObject({ dated: true, zoned: false })
  })

  it('reads a time of day', () => {
    expect(parseClock('09:05:07.25')).toEqual({ wholeS: 32707, nanoseconds: 250_000_000, dated: false, zoned: false })
  })

  it.each(['', '12', '1015', '0.04', '2026-02-30T10:00:00Z', '2026-13-01T10:00:00Z', '10:61:00', '2026-05-09', 'noon'])('does not take %j for a time', (text) => {
    expect(parseClock(text)).toBeUndefined()
  })
})

describe('createClock', () => {
  it('counts from the first value, in seconds', () => {
    const clock = createClock('s', '.')
    expect([clock.fromText('12.5'), clock.fromText('12.75'), clock.fromNumber(13.5)]).toEqual([0, 0.25, 1])
    expect(clock.startedAtS()).toBeNull()
  })

  it('divides milliseconds once, so that they are the nearest float64', () => {
    const clock = createClock('ms', '.')
    clock.fromNumber(0)
    for (const ms of [1, 9, 20, 333, 12_345]) expect(clock.fromNumber(ms)).toBe(Number(`${ms}e-3`))
  })

  it('knows Unix time by its size', () => {
    const seconds = createClock('s', '.')
    seconds.fromText('1778321700.25')
    expect(seconds.startedAtS()).toBe(1778321700.25)
    const milliseconds = createClock('ms', '.')
    milliseconds.fromText('1778321700250')
    expect(milliseconds.fromText('1778321700290')).toBe(0.04)
    expect(milliseconds.startedAtS()).toBe(1778321700.25)
  })

  it('reads ISO 8601 to the nearest float64 of the difference', () => {
    const clock = createClock('ISO 8601', '.')
    expect(clock.fromText('2026-05-09T10:15:00.900Z')).toBe(0)
    expect(clock.fromText('2026-05-09T10:15:01.000Z')).toBe(0.1)
    expect(clock.fromText('2026-05-09T12:15:01.040+02:00')).toBe(0.14)
    expect(clock.fromText('2026-05-09T10:15:01.040000001Z')).toBe(0.140000001)
    expect(clock.startedAtS()).toBe(Date.UTC(2026, 4, 9, 10, 15, 0, 900) / 1000)
    expect(clock.withoutZone()).toBe(false)
  })

  it('says when no zone was given', () => {
    const clock = createClock('ISO 8601', '.')
    clock.fromText('2026-05-09T10:15:00')
    expect(clock.withoutZone()).toBe(true)
  })

  it('carries a time of day over midnight, also twice, and is not thrown by one bad cell', () => {
    const clock = createClock('ISO 8601', '.')
    expect(clock.fromText('23:59:59.5')).toBe(0)
    expect(clock.fromText('00:00:00.0')).toBe(0.5)
    expect(clock.fromText('11:00:00')).toBe(39600.5)
    expect(clock.fromText('22:00:00')).toBe(79200.5)
    expect(clock.fromText('00:00:00')).toBe(86400.5)
    const noon = createClock('ISO 8601', '.')
    noon.fromText('13:00:00')
    noon.fromText('00:00:00')
    expect(noon.fromText('13:00:01')).toBe(1)
    expect(noon.startedAtS()).toBeNull()
  })

  it('tells missing from unreadable', () => {
    for (const unit of ['s', 'ISO 8601'] as const) {
      expect(createClock(unit, '.').fromText('n/a')).toBeNaN()
      expect(createClock(unit, '.').fromText('late')).toBeUndefined()
    }
  })

  it('does not lay a bare time of day among dates', () => {
    const clock = createClock('ISO 8601', '.')
    clock.fromText('2026-05-09T10:15:00Z')
    expect(clock.fromText('10:15:01')).toBeUndefined()
  })
})
