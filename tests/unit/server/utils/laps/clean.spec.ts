import type { ReadLog } from '../../../../../server/utils/laps/types'
import { readFileSync } from 'node:fs'
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { cleanLog } from '../../../../../server/utils/laps/clean'
import { readBytes, refusal } from '../../../../support/log-text'

const M_PER_DEG = 111_195

/** A car at 25 m/s to the north at 10 Hz, 40 rows, its header in line 1. */
function log(change: Partial<ReadLog> = {}, rows = 40): ReadLog {
  return {
    rows,
    timeS: Float64Array.from({ length: rows }, (_, i) => i / 10),
    rowNumbers: Uint32Array.from({ length: rows }, (_, i) => i + 2),
    latitudeDeg: Float64Array.from({ length: rows }, (_, i) => 54.4 + i * 2.5 / M_PER_DEG),
    longitudeDeg: new Float64Array(rows).fill(-2.9),
    channels: [{ name: 'speed', label: 'Speed', unit: 'm/s', values: new Float64Array(rows).fill(25) }],
    startedAtS: null,
    problems: [],
    ...change,
  }
}

function changed(values: Float64Array, changes: Readonly<Record<number, number>>): Float64Array {
  const copy = values.slice()
  for (const [i, value] of Object.entries(changes)) copy[Number(i)] = value
  return copy
}

function samples(read: ReadLog, name: string): number[] {
  return [...cleanLog(read).channels.find(channel => channel.name === name)!.samples]
}

function fixture(name: string): ReadLog {
  return readBytes(new Uint8Array(readFileSync(new URL(`../../../../../fixtures/${name}`, import.meta.url))))
}

describe('a good log', () => {
  it('passes unchanged, positions as float64 and the rest as float32', () => {
    const read = log({ startedAtS: 1778321700 })
    const clean = cleanLog(read)
    expect(clean).toMatchObject({ rows: 40, startedAtS: 1778321700, gaps: [], problems: [] })
    expect(clean.channels.map(({ name, label, unit }) => [name, label, unit])).toEqual([
      ['time', 'Time', 's'], ['latitude', 'Latitude', '°'], ['longitude', 'Longitude', '°'], ['speed', 'Speed', 'm/s'],
    ])
    const exact = clean.channels.slice(0, 3).map(({ samples }) => samples)
    expect(exact).toEqual([read.timeS, read.latitudeDeg, read.longitudeDeg])
    expect(clean.channels[3]!.samples).toEqual(new Float32Array(40).fill(25))
    // Tenths of seconds are not exact in binary; their differences are right to 1e-12.
    expect(clean.rateHz).toBeCloseTo(10, 10)
  })

  it('does not touch its input, whatever is in it', () => {
    const number = fc.oneof(fc.double({ min: -200, max: 200 }), fc.constant(Number.NaN), fc.constant(0))
    const column = fc.array(number, { minLength: 30, maxLength: 30 }).map(values => Float64Array.from(values))
    fc.assert(fc.property(column, column, column, (latitudeDeg, longitudeDeg, speed) => {
      const channels = [{ name: 'speed', label: 'Speed', unit: 'm/s', values: speed }]
      const read = log({ latitudeDeg, longitudeDeg, channels }, 30)
      const copy = structuredClone(read)
      try {
        const clean = cleanLog(read)
        const [time, latitude, longitude] = clean.channels.map(({ samples }) => samples)
        for (let i = 0; i < time!.length; i++) {
          if (i > 0) expect(time![i]).toBeGreaterThan(time![i - 1]!)
          expect(Math.abs(latitude![i]!)).toBeLessThanOrEqual(90)
          expect(Math.abs(longitude![i]!)).toBeLessThanOrEqual(180)
        }
      }
      catch (error) {
        expect(['too_short', 'no_position']).toContain((error as { code?: string }).code)
      }
      expect(read).toEqual(copy)
    }))
  })

  it('of the fixtures comes out whole', () => {
    for (const [name, rateHz] of [['harrow-fell.csv', 25], ['short-loop.csv', 10]] as const) {
      const read = fixture(name)
      const clean = cleanLog(read)
      expect(clean.channels[0]!.samples).toHaveLength(read.rows)
      expect(clean.rateHz).toBeCloseTo(rateHz, 6)
      expect([clean.gaps, clean.problems]).toEqual([[], []])
    }
  }, 30_000)
})

describe('time', () => {
  it('that repeats loses the later row', () => {
    const read = log({ timeS: changed(log().timeS, { 20: 1.9 }) })
    const clean = cleanLog(read)
    expect(clean.channels[0]!.samples).toHaveLength(39)
    expect(clean.channels[1]!.samples[19]).toBe(read.latitudeDeg[19])
    expect(clean.problems).toEqual([{ code: 'repeated_time', message: expect.any(String) as string, row: 22, count: 1 }])
  })

  it('that steps back once loses that row, with its line', () => {
    const clean = cleanLog(log({ timeS: changed(log().timeS, { 20: 0.5 }) }))
    expect(clean.channels[0]!.samples).toHaveLength(39)
    expect(clean.problems).toMatchObject([{ code: 'time_steps_back', row: 22, count: 1 }])
  })

  it('that leaps ahead once loses the leap and not what follows', () => {
    const clean = cleanLog(log({ timeS: changed(log().timeS, { 20: 5000 }) }))
    expect(clean.channels[0]!.samples).toHaveLength(39)
    expect(clean.problems).toMatchObject([{ code: 'time_steps_back', row: 22, count: 1 }])
  })

  it('that is missing costs its row', () => {
    const clean = cleanLog(log({ timeS: changed(log().timeS, { 7: Number.NaN, 9: Number.NaN }) }))
    expect(clean.channels[0]!.samples).toHaveLength(38)
    expect(clean.problems).toMatchObject([{ code: 'row_without_time', row: 9, count: 2 }])
  })

  it('that runs back is refused with the line', () => {
    const read = log({ timeS: Float64Array.from({ length: 40 }, (_, i) => (i % 20) / 10) })
    expect(refusal(() => cleanLog(read))).toMatchObject({ code: 'time_runs_back', row: 22 })
  })

  it('runs back in backwards.csv, first in line 10', () => {
    expect(refusal(() => cleanLog(fixture('backwards.csv')))).toMatchObject({ code: 'time_runs_back', row: 10 })
  })

  it('may step back in one row of a hundred and not in more', () => {
    const base = log({}, 400)
    const back = (count: number) => {
      const at = Object.fromEntries(Array.from({ length: count }, (_, i) => [i * 50 + 20, 0]))
      return log({ timeS: changed(base.timeS, at) }, 400)
    }
    expect(cleanLog(back(4)).problems).toMatchObject([{ code: 'time_steps_back', row: 22, count: 4 }])
    expect(refusal(() => cleanLog(back(5)))).toMatchObject({ code: 'time_runs_back', row: 22 })
  })
})

describe('positions', () => {
  it('that are missing, 0, 0 or off the earth are interpolated, and reported', () => {
    const whole = log()
    const read = log({
      latitudeDeg: changed(whole.latitudeDeg, { 5: Number.NaN, 15: 0, 25: 95 }),
      longitudeDeg: changed(whole.longitudeDeg, { 15: 0 }),
    })
    const latitude = samples(read, 'latitude')
    // A straight at constant speed is its own interpolation; tolerance: rounding in degrees, 1e-12 deg = 0.1 um.
    for (const [i, deg] of latitude.entries()) expect(Math.abs(deg - whole.latitudeDeg[i]!)).toBeLessThan(1e-12)
    expect(cleanLog(read).problems).toMatchObject([{ code: 'position_zero', row: 17, count: 1 }, { code: 'position_out_of_range', row: 27, count: 1 }])
  })

  it('before the first fix and after the last are left out, and time zero stays', () => {
    const read = log({ latitudeDeg: changed(log().latitudeDeg, { 0: Number.NaN, 1: Number.NaN, 39: Number.NaN }) })
    const clean = cleanLog(read)
    expect(clean.channels.map(({ samples }) => samples.length)).toEqual([37, 37, 37, 37])
    expect(clean.channels[0]!.samples[0]).toBe(0.2)
    expect(clean.problems).toMatchObject([{ code: 'before_first_fix', row: 2, count: 2 }, { code: 'after_last_fix', row: 41, count: 1 }])
  })

  it('of a slow receiver are interpolated between new fixes, never held', () => {
    // 2 Hz in a 10 Hz file; the rows in between repeat.
    const whole = log({}, 41)
    const read = log({ latitudeDeg: whole.latitudeDeg.map((_, i, all) => all[i - i % 5]!) }, 41)
    const clean = cleanLog(read)
    for (const [i, deg] of clean.channels[1]!.samples.entries()) {
      expect(Math.abs(deg - whole.latitudeDeg[i]!)).toBeLessThan(1e-12)
    }
    expect(clean.channels[1]!.rateHz).toBeCloseTo(2, 10)
    expect(clean.channels[3]!.rateHz).toBeCloseTo(10, 10)
    // Its period is half a second, so that only 1.5 s are a gap.
    expect(clean.gaps).toEqual([])
  })

  it('that jump are dropped and reported', () => {
    const whole = log()
    const read = log({ latitudeDeg: changed(whole.latitudeDeg, { 20: 54.5 }) })
    expect(Math.abs(samples(read, 'latitude')[20]! - whole.latitudeDeg[20]!)).toBeLessThan(1e-12)
    expect(cleanLog(read).problems).toMatchObject([{ code: 'position_jump', row: 22, count: 1 }])
  })

  it('are interpolated over the 180th meridian', () => {
    const longitudeDeg = Float64Array.from({ length: 40 }, (_, i) => (i < 20 ? 180 : -180) + (i - 20) * 3e-5)
    const read = log({ longitudeDeg: changed(longitudeDeg, { 19: Number.NaN, 20: Number.NaN, 21: Number.NaN }) })
    const longitude = samples(read, 'longitude')
    for (const i of [19, 20, 21]) {
      const offDeg = (longitude[i]! - longitudeDeg[i]! + 540) % 360 - 180
      expect(Math.abs(offDeg)).toBeLessThan(1e-9)
    }
  })
})

describe('gaps', () => {
  const without = (from: number, to: number) => {
    const changes = Object.fromEntries(Array.from({ length: to - from }, (_, i) => [from + i, Number.NaN]))
    return log({ latitudeDeg: changed(log().latitudeDeg, changes) })
  }

  it('are longer than three periods and half a second', () => {
    // Fixes at 0.9 and 1.4 s: exactly the limit. At 0.9 and 1.5 s: beyond it.
    expect(cleanLog(without(10, 14)).gaps).toEqual([])
    expect(cleanLog(without(10, 15)).gaps).toEqual([{ fromS: 0.9, toS: 1.5 }])
  })

  it('are also rows that are not there', () => {
    const rows = Array.from({ length: 40 }, (_, i) => i).filter(i => i < 10 || i >= 20)
    const whole = log()
    const read = log({
      timeS: Float64Array.from(rows, i => whole.timeS[i]!),
      latitudeDeg: Float64Array.from(rows, i => whole.latitudeDeg[i]!),
    }, 30)
    expect(cleanLog(read).gaps).toEqual([{ fromS: 0.9, toS: 2 }])
  })

  it('are not where the car stands', () => {
    const place = (i: number) => 54.4 + (i < 10 ? i : i < 30 ? 10 : i - 20) * 2.5 / M_PER_DEG
    const latitudeDeg = Float64Array.from({ length: 40 }, (_, i) => place(i))
    const speed = Float64Array.from({ length: 40 }, (_, i) => i >= 10 && i < 30 ? 0 : 25)
    const channels = [{ name: 'speed', label: 'Speed', unit: 'm/s', values: speed }]
    expect(cleanLog(log({ latitudeDeg, channels })).gaps).toEqual([])
    // The same with the wheels turning is a receiver that has frozen.
    expect(cleanLog(log({ latitudeDeg })).gaps).toEqual([{ fromS: 1, toS: 3.1 }])
  })
})

describe('other channels', () => {
  it('stay in step with the time when rows are left out', () => {
    const channels = [{ name: 'row', label: 'Row', unit: '', values: Float64Array.from({ length: 40 }, (_, i) => i) }]
    const read = log({
      channels,
      timeS: changed(log().timeS, { 7: Number.NaN, 20: 1.9 }),
      latitudeDeg: changed(log().latitudeDeg, { 0: Number.NaN, 1: Number.NaN, 39: Number.NaN }),
    })
    const kept = Array.from({ length: 40 }, (_, i) => i).filter(i => ![0, 1, 7, 20, 39].includes(i))
    expect(samples(read, 'row')).toEqual(kept)
    expect(samples(read, 'time')).toEqual(kept.map(i => i / 10))
    expect(samples(read, 'latitude')).toEqual(kept.map(i => read.latitudeDeg[i]))
  })

  it('keep their missing values and go when they have none', () => {
    const some = changed(new Float64Array(40).fill(1), { 3: Number.NaN })
    const clean = cleanLog(log({ channels: [
      { name: 'fuel', label: 'Fuel', unit: 'l', values: some }, { name: 'boost', label: 'Boost', unit: 'bar', values: new Float64Array(40).fill(Number.NaN) },
    ] }))
    expect(clean.channels.slice(3).map(({ name }) => name)).toEqual(['fuel'])
    expect([...clean.channels[3]!.samples.subarray(2, 5)]).toEqual([1, Number.NaN, 1])
    expect(clean.problems).toMatchObject([{ code: 'empty_channel' }])
  })

  it('do not invent a speed', () => {
    const values = changed(new Float64Array(40).fill(25), { 3: -4, 4: 9000 })
    expect(samples(log({ channels: [{ name: 'speed', label: 'Speed', unit: 'm/s', values }] }), 'speed').slice(3, 5)).toEqual([-4, 9000])
  })
})

describe('refusals', () => {
  it('too_short: fewer than ten usable rows', () => {
    expect(refusal(() => cleanLog(log({}, 9)))).toMatchObject({ code: 'too_short', row: 2 })
    expect(cleanLog(log({}, 10)).channels[0]!.samples).toHaveLength(10)
  })

  it('no_time and no_position: nothing left of them', () => {
    expect(refusal(() => cleanLog(log({ timeS: new Float64Array(40).fill(Number.NaN) }))).code).toBe('no_time')
    expect(refusal(() => cleanLog(log({ latitudeDeg: new Float64Array(40).fill(99) }))).code).toBe('no_position')
  })

  it('no_position: another column taken for the latitude, so that the car would fly', () => {
    // Speeds between 20 and 40 taken for degrees: hundreds of kilometres from row to row.
    const latitudeDeg = Float64Array.from({ length: 40 }, (_, i) => 30 + 10 * Math.sin(i / 3))
    expect(refusal(() => cleanLog(log({ latitudeDeg })))).toMatchObject({ code: 'no_position', row: 2 })
  })

  it('leaves the problems of the reader to the reader', () => {
    expect(cleanLog(log({ problems: [{ code: 'bad_number', message: 'x', row: 4, count: 1 }] })).problems).toEqual([])
  })
})
