import { readFileSync } from 'node:fs'
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { createLogReader } from '../../../../../server/utils/laps/read'
import { sniffLog } from '../../../../../server/utils/laps/sniff'
import { latin1, readBytes, readText, refusal, sniffText, utf16, utf8 } from '../../../../support/log-text'

const HEADER = 'time_s,lat,lon,speed_mph,acc_x_g,note\n'
const TEXT = `${HEADER}0.0,54.40,-2.91,100,1,a\n0.1,54.41,-2.92,50,-0.5,b\n`

function fixture(name: string): Uint8Array {
  return new Uint8Array(readFileSync(new URL(`../../../../../fixtures/${name}`, import.meta.url)))
}

function values(log: ReturnType<typeof readText>, name: string): number[] {
  return [...log.channels.find(channel => channel.name === name)!.values]
}

describe('a good file', () => {
  it('comes out as columns in the unit of storage', () => {
    const log = readText(TEXT)
    expect(log).toMatchObject({ rows: 2, startedAtS: null, problems: [] })
    expect([...log.timeS]).toEqual([0, 0.1])
    expect([...log.rowNumbers]).toEqual([2, 3])
    expect([...log.latitudeDeg]).toEqual([54.40, 54.41])
    expect([...log.longitudeDeg]).toEqual([-2.91, -2.92])
    expect(log.channels.map(({ name, label, unit }) => [name, label, unit])).toEqual([
      ['speed', 'Speed', 'm/s'], ['longitudinal_acceleration', 'Longitudinal acceleration', 'm/s2'],
    ])
  })

  // NIST SP 811 (2008), appendix B.8. Tolerance: one rounding of the product.
  it.each([
    ['speed (mph)', 'speed', 100, 44.704], // mile per hour: 4.4704 E-01 m/s, exact
    ['speed (km/h)', 'speed', 36, 10], // kilometer per hour: 2.777778 E-01 m/s
    ['speed (kn)', 'speed', 3600, 1852], // knot: 5.144444 E-01 m/s; 1852 m an hour
    ['acc_x (g)', 'longitudinal_acceleration', -2, -19.6133], // standard acceleration of free fall: 9.80665 m/s2, exact
    ['altitude (ft)', 'altitude', 10, 3.048], // foot: 3.048 E-01 m, exact
    ['oil pressure (psi)', 'oil_pressure', 10, 68.94757], // psi: 6.894757 E+00 kPa, seven figures
    ['oil pressure (bar)', 'oil_pressure', 4.5, 450], // bar: 1.0 E+02 kPa, exact
    ['oil temp (°F)', 'oil_temperature', 212, 100], // t/degC = (t/degF - 32)/1.8
    ['yaw rate (rad/s)', 'yaw_rate', Math.PI, 180],
  ])('%s is converted', (header, channel, cell, stored) => {
    const log = readText(`time_s,lat,lon,${header}\n0,54.4,-2.9,${cell}\n1,54.5,-2.8,${cell}\n`)
    const tolerance = header.includes('psi') ? 5e-7 * stored : 1e-12 * Math.abs(stored)
    expect(Math.abs(values(log, channel)[1]! - stored)).toBeLessThanOrEqual(tolerance)
  })

  it.each([
    ['LF', utf8(TEXT)],
    ['CRLF', utf8(TEXT.replaceAll('\n', '\r\n'))],
    ['no line end at the end', utf8(TEXT.slice(0, -1))],
    ['a byte order mark', utf8(`\uFEFF${TEXT}`)],
    ['UTF-16, little end first', utf16(TEXT, 'le')],
    ['UTF-16, big end first', utf16(TEXT, 'be')],
    ['semicolons', utf8(TEXT.replaceAll(',', ';'))],
    ['tabs', utf8(TEXT.replaceAll(',', '\t'))],
    ['decimal commas', utf8(TEXT.replaceAll(',', ';').replaceAll('.', ','))],
    ['quotes around everything', utf8(TEXT.replace(/[^,\n]+/g, '"$&"'))],
    ['blank lines at the end', utf8(`${TEXT}\n\n`)],
    ['spaces around cells', utf8(TEXT.replaceAll(',', ' , '))],
  ])('reads the same with %s', (_, bytes) => {
    expect(readBytes(bytes)).toEqual(readText(TEXT))
    expect(readBytes(bytes, Array.from(bytes, (_, i) => i))).toEqual(readText(TEXT))
  })

  it('is read the same in Latin-1', () => {
    const text = 'time_s,lat,lon,Öl vorn (°C),Fahrer\n0.0,54.40,-2.91,90,"Åsa, die zweite"\n0.1,54.41,-2.92,91,Zoë\n'
    expect(readBytes(latin1(text))).toEqual(readBytes(utf8(text)))
    expect(values(readBytes(latin1(text)), 'ol_vorn')).toEqual([90, 91])
  })

  it('is read by the names of its columns, also where these hold what cannot be stored', () => {
    const names = ['oil\u0000temp', `${'x'.repeat(199)}😀`, 'two\tparts']
    const text = `time_s,lat,lon,${names.join(',')}\n0.0,54.40,-2.91,90,1,2\n0.1,54.41,-2.92,91,1,2\n`
    const bytes = utf16(text, 'le')
    const preview = sniffLog(bytes, { complete: true })
    expect(preview.columns.map(({ source }) => source).slice(3)).toEqual(['oil?temp', `${'x'.repeat(199)}\uFFFD`, 'two parts'])
    const log = readBytes(bytes, [], preview)
    expect(log.channels).toHaveLength(3)
    expect(JSON.stringify(log.channels.map(({ label }) => label))).not.toMatch(/\\u/)
  })

  it('goes on after a block of NUL bytes, which costs its own row alone', () => {
    const bytes = utf8(`${TEXT}${'\0'.repeat(512)}\n0.2,54.42,-2.93,51,0,c\n`)
    const log = readBytes(bytes, [], sniffText(TEXT))
    expect([...log.timeS]).toEqual([0, 0.1, Number.NaN, 0.2])
    expect(log.problems.map(({ code, row }) => [code, row])).toEqual([['too_few_cells', 4], ['bad_time', 4]])
    expect(JSON.stringify(log.problems)).not.toMatch(/\\u/)
  })

  it('gets through 2 MB of lines that begin with a quote in less than 10 s of processor time', () => {
    const stray = '"a\n'.repeat(700_000)
    const before = process.cpuUsage()
    const bytes = utf8(`${TEXT}${stray}0.2,54.42,-2.93,51,0,c\n`)
    const log = readBytes(bytes, Array.from({ length: 32 }, (_, i) => i * 65_536), sniffText(TEXT))
    const { user, system } = process.cpuUsage(before)
    expect(log.rows).toBe(700_003)
    expect(log.timeS.at(-1)).toBe(0.2)
    // Four times what it took; each byte looked at for each line before it would take hours.
    expect((user + system) / 1e6).toBeLessThan(10)
  }, 60_000)

  it('may be cut anywhere, also within a character', () => {
    const bytes = utf8('time_s,lat,lon,Öl (°C),note\n0.0,54.40,-2.91,90,"x ""𝜔""\r\ny"\n0.1,54.41,-2.92,91,ü\n')
    const whole = readBytes(bytes)
    expect([...whole.rowNumbers]).toEqual([2, 4])
    for (let cut = 0; cut <= bytes.length; cut++) expect(readBytes(bytes, [cut])).toEqual(whole)
  })

  it('keeps numbered channels apart by label', () => {
    const log = readText('time_s,lat,lon,Fuel (l),Fuel (l)\n0,54.4,-2.9,20,21\n1,54.5,-2.8,20,21\n')
    expect(log.channels.map(({ name, label, unit }) => [name, label, unit])).toEqual([['fuel', 'Fuel', 'l'], ['fuel_2', 'Fuel 2', 'l']])
  })

  it('of another size than its head is read to the end', () => {
    const rows = Array.from({ length: 20_000 }, (_, i) => `${i / 10},${54 + i / 1e5},-2.9,1,0,x`)
    const bytes = utf8(HEADER + rows.join('\n'))
    const log = readBytes(bytes, [65_536, 131_072], sniffLog(bytes.subarray(0, 65_536)))
    expect(log.rows).toBe(20_000)
    expect(log.latitudeDeg.at(-1)).toBe(54 + 19_999 / 1e5)
  })

  it('without a header is read by the columns that a person names', () => {
    const text = '0,54.4,-2.9\n1,54.5,-2.8\n'
    const preview = sniffText(text)
    const names = ['time', 'latitude', 'longitude']
    const reader = createLogReader(preview, { columns: preview.columns.map((column, i) => ({ ...column, channel: names[i]!, unit: i === 0 ? 's' : '°' })) })
    reader.push(utf8(text))
    expect(reader.end()).toMatchObject({ rows: 2, timeS: Float64Array.of(0, 1), rowNumbers: Uint32Array.of(1, 2) })
  })
})

describe('time', () => {
  const withTimes = (header: string, ...times: string[]) => readText(`${header},lat,lon\n${times.map((time, i) => `${time},54.${i + 1},-2.9\n`).join('')}`)

  it('may be milliseconds', () => {
    expect([...withTimes('time_ms', '100', '120', '145').timeS]).toEqual([0, 0.02, 0.045])
  })

  it('may be ISO 8601 with a zone', () => {
    const log = withTimes('Time', '2026-05-09T12:15:00.000+02:00', '2026-05-09T12:15:00.040+02:00')
    expect([...log.timeS]).toEqual([0, 0.04])
    expect(log.startedAtS).toBe(Date.UTC(2026, 4, 9, 10, 15) / 1000)
    expect(log.problems).toEqual([])
  })

  it('is read as UTC without one, and says so', () => {
    const log = withTimes('Time', '2026-05-09 10:15:00.0', '2026-05-09 10:15:00.1')
    expect(log.startedAtS).toBe(Date.UTC(2026, 4, 9, 10, 15) / 1000)
    expect(log.problems).toMatchObject([{ code: 'time_without_zone', row: 2 }])
  })

  it('tells the start from Unix seconds', () => {
    expect(withTimes('time_s', '1778321700.5', '1778321700.6').startedAtS).toBe(1778321700.5)
  })
})

describe('a file with faults', () => {
  it('text-in-number.csv loses one cell', () => {
    const log = readBytes(fixture('text-in-number.csv'))
    expect(log.rows).toBe(14)
    expect(values(log, 'speed').map(Number.isNaN).indexOf(true)).toBe(4)
    expect(values(log, 'speed').filter(Number.isNaN)).toHaveLength(1)
    expect([...log.latitudeDeg, ...log.longitudeDeg, ...log.timeS].some(Number.isNaN)).toBe(false)
    expect(log.problems).toEqual([{ code: 'bad_number', message: expect.stringContaining('"seventy"') as string, row: 6, count: 1 }])
  })

  it('keeps the whole cells of a last line that was cut', () => {
    const log = readText(`${TEXT}0.2,54.42,-2.9`)
    expect(log.rows).toBe(3)
    expect([log.timeS[2], log.latitudeDeg[2], log.longitudeDeg[2]]).toEqual([0.2, 54.42, Number.NaN])
    expect(log.problems).toMatchObject([{ code: 'cut_last_line', row: 4 }])
  })

  it('counts lines through quoted cells and blank lines', () => {
    const log = readText(`${HEADER}0.0,54.40,-2.91,1,1,"two\nlines"\n\n0.1,54.41,-2.92,x,1,"three\r\n\r\nlines"\n0.2,54.42,-2.93,1,1,\n`)
    expect([...log.rowNumbers]).toEqual([2, 5, 8])
    expect(log.problems).toMatchObject([{ code: 'bad_number', row: 5 }])
  })
})

describe('refusals', () => {
  const map = (text: string) => ({ columns: sniffText(text).columns })

  it('no_rows: a header alone', () => {
    expect(refusal(() => readText(HEADER))).toMatchObject({ code: 'no_rows', row: 1 })
  })

  it('no_time: a time that cannot be read in its unit', () => {
    const preview = sniffText(TEXT)
    const columns = preview.columns.map(column => column.channel === 'time' ? { ...column, unit: 'ISO 8601' } : column)
    const reader = createLogReader(preview, { columns })
    reader.push(utf8(TEXT))
    expect(refusal(() => reader.end())).toMatchObject({ code: 'no_time', row: 2 })
  })

  it.each([
    ['degrees and minutes', '5424.12,-254.5'], ['no fix at all', '0,0'], ['nothing', ',-2.9'], ['a longitude off the earth', '54.4,1000'],
  ])('no_position: %s', (_, position) => {
    const text = `time_s,lat,lon\n0,${position}\n1,${position}\n`
    const preview = sniffText(text)
    const reader = createLogReader(preview, { columns: preview.columns })
    reader.push(utf8(text))
    expect(refusal(() => reader.end())).toMatchObject({ code: 'no_position', row: 2 })
  })

  it('no_position: no-latitude.csv has no column for it', () => {
    const { code, message } = refusal(() => readBytes(fixture('no-latitude.csv')))
    expect(code).toBe('no_position')
    expect(message).toContain('latitude')
  })

  it('no_time: no column for it', () => {
    expect(refusal(() => readText('lat,lon\n54.4,-2.9\n')).code).toBe('no_time')
  })

  it('wrong_header: another column in the place of a mapped one', () => {
    const other = TEXT.replace('speed_mph,acc_x_g', 'acc_x_g,speed_mph')
    expect(refusal(() => createLogReader(sniffText(other), map(TEXT)))).toMatchObject({ code: 'wrong_header', row: 1 })
    const reader = createLogReader(sniffText(TEXT), map(TEXT))
    expect(refusal(() => reader.push(utf8(other)))).toMatchObject({ code: 'wrong_header', row: 1 })
  })

  it('wrong_header: not when only a column that is left out is another', () => {
    const other = TEXT.replace('note', 'remark')
    const reader = createLogReader(sniffText(TEXT), map(TEXT))
    reader.push(utf8(other))
    expect(reader.end().rows).toBe(2)
  })

  it('unknown_unit: a known channel in a unit that it cannot have', () => {
    const columns = map(TEXT).columns.map(column => column.channel === 'speed' ? { ...column, unit: 'furlong/h' } : column)
    expect(refusal(() => createLogReader(sniffText(TEXT), { columns })).code).toBe('unknown_unit')
  })
})

describe('any table', () => {
  const numberText = fc.oneof(
    fc.double({ noNaN: true, noDefaultInfinity: true }).map(String),
    fc.tuple(fc.integer({ min: -99_999, max: 99_999 }), fc.nat(9)).map(([n, digits]) => (n / 7).toFixed(digits)),
    fc.integer().map(String),
  )
  const cell = fc.oneof({ weight: 8, arbitrary: numberText }, { weight: 1, arbitrary: fc.constantFrom('', '-', 'NaN', 'n/a') })
  const note = fc.string({ unit: fc.constantFrom('a', ',', '"', '\n', 'é', '𝜔'), maxLength: 5 })
  const row = fc.record({ cells: fc.tuple(cell, cell), note, quoteAll: fc.boolean() })
  const file = fc.record({
    rows: fc.array(row, { minLength: 1, maxLength: 12 }),
    end: fc.constantFrom('\n', '\r\n'),
    cuts: fc.array(fc.nat(5000), { maxLength: 8 }),
  })

  const preview = sniffText('time_s,lat,lon,one,two,note\n0,54.1,-2.9,1.5,2.5,a\n')

  it('is read back to exactly Number(text), with the right lines, however it is cut, and unchanged', () => {
    fc.assert(fc.property(file, ({ rows, end, cuts }) => {
      let text = `time_s,lat,lon,one,two,note${end}`
      let line = 2
      const lines: number[] = []
      for (const [i, { cells, note, quoteAll }] of rows.entries()) {
        const quote = (cell: string) => quoteAll || /[",\n]/.test(cell) ? `"${cell.replaceAll('"', '""')}"` : cell
        text += [String(i), `54.${i + 1}`, '-2.9', ...cells, note].map(quote).join(',') + end
        lines.push(line)
        line += 1 + note.split('\n').length - 1
      }
      const bytes = utf8(text)
      const copy = bytes.slice()
      const log = readBytes(bytes, cuts.map(cut => cut % bytes.length).sort((a, b) => a - b), preview)
      const expected = (n: 0 | 1) => rows.map(({ cells }) => /\d/.test(cells[n]) ? Number(cells[n]) : Number.NaN)
      expect(values(log, 'one')).toEqual(expected(0))
      expect(values(log, 'two')).toEqual(expected(1))
      expect([...log.timeS]).toEqual(rows.map((_, i) => i))
      expect([...log.rowNumbers]).toEqual(lines)
      expect(log.problems).toEqual([])
      expect(bytes).toEqual(copy)
    }), { numRuns: 100 })
  }, 30_000)
})
