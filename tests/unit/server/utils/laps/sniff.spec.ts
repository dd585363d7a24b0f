import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { logPreviewSchema } from '../../../../../shared/schemas/logs'
import { headerKey, sniffLog } from '../../../../../server/utils/laps/sniff'
import { latin1, refusal, sniffText, utf16, utf8 } from '../../../../support/log-text'

const ROWS = '0.0,54.40,-2.91,72\n0.1,54.41,-2.92,73\n0.2,54.42,-2.93,74\n'
const HEADER = 'time_s,lat,lon,speed_kmh\n'

function fixture(name: string): Uint8Array {
  return new Uint8Array(readFileSync(new URL(`../../../../../fixtures/${name}`, import.meta.url)))
}

function shapeOf(text: string) {
  const { delimiter, headerRow, unitsRow, firstDataRow, columns } = sniffText(text)
  return { delimiter, rows: [headerRow, unitsRow, firstDataRow], names: columns.map(({ source }) => source) }
}

describe('sniffLog', () => {
  it('finds a plain table', () => {
    const preview = sniffText(HEADER + ROWS)
    expect(preview).toMatchObject({ encoding: 'utf-8', delimiter: ',', headerRow: 1, unitsRow: null, firstDataRow: 2 })
    expect(preview.columns.map(({ channel }) => channel)).toEqual(['time', 'latitude', 'longitude', 'speed'])
    expect(preview.columns[1]!.firstValues).toEqual(['54.40', '54.41', '54.42'])
    expect(logPreviewSchema.safeParse(preview).error).toBeUndefined()
  })

  it.each([',', ';', '\t', '|'])('finds the delimiter %j', (delimiter) => {
    expect(sniffText((HEADER + ROWS).replaceAll(',', delimiter)).delimiter).toBe(delimiter)
  })

  it('is not led astray by decimal commas', () => {
    const preview = sniffText('time_s;lat;lon;speed_kmh\n0,0;54,40;-2,91;72,5\n0,1;54,41;-2,92;73,5\n')
    expect(preview.delimiter).toBe(';')
    expect(preview.columns.map(({ channel }) => channel)).toEqual(['time', 'latitude', 'longitude', 'speed'])
  })

  it('passes over lines before the header, also when they are padded with delimiters', () => {
    expect(shapeOf(`Harrow Fell\n"Driver","Ada, of course"\n\n${HEADER}${ROWS}`).rows).toEqual([4, null, 5])
    expect(shapeOf(`Circuit,Harrow Fell,,\nDate,2026-05-09,,\nLaps,8,,\n${HEADER}${ROWS}`).rows).toEqual([4, null, 5])
  })

  it('counts the lines of a quoted cell before the header', () => {
    expect(shapeOf(`"two\nlines",x\n${HEADER}${ROWS}`).rows).toEqual([3, null, 4])
  })

  it('finds a row of units', () => {
    const preview = sniffText(`time,lat,lon,speed,fuel\ns,deg,deg,mph,[l]\n${ROWS.replaceAll('\n', ',5\n')}`)
    expect([preview.headerRow, preview.unitsRow, preview.firstDataRow]).toEqual([1, 2, 3])
    expect(preview.columns.map(({ unit }) => unit)).toEqual(['s', '°', '°', 'mph', 'l'])
  })

  it('lets a blank line stand under the header', () => {
    expect(shapeOf(`${HEADER}\n${ROWS}`).rows[0]).toBe(1)
  })

  it('keeps a bad first row as data', () => {
    expect(shapeOf(`${HEADER}0.0,none yet,no fix,72\n${ROWS}`).rows).toEqual([1, null, 2])
  })

  it('names the columns of a file without a header', () => {
    const shape = shapeOf(ROWS)
    expect(shape.rows).toEqual([1, null, 1])
    expect(shape.names).toEqual(['column 1', 'column 2', 'column 3', 'column 4'])
    expect(sniffText(ROWS).columns.every(({ confidence }) => confidence === 'unknown')).toBe(true)
  })

  it('keeps empty and repeated names', () => {
    const preview = sniffText(`time,lat,lon,,speed,speed\n${ROWS.replace(/\d+\n/g, '1,2,3\n')}`)
    expect(preview.columns.map(({ source }) => source)).toEqual(['time', 'lat', 'lon', '', 'speed', 'speed'])
    expect(preview.columns.map(({ channel }) => channel)).toEqual(['time', 'latitude', 'longitude', 'column', 'speed', 'speed_2'])
  })

  it('takes trailing delimiters in the header, in the rows or in both', () => {
    const trailing = (text: string) => text.replaceAll('\n', ',\n')
    expect(shapeOf(trailing(HEADER) + ROWS).names).toHaveLength(4)
    expect(shapeOf(HEADER + trailing(ROWS)).names).toEqual(['time_s', 'lat', 'lon', 'speed_kmh', ''])
    expect(sniffText(trailing(HEADER + ROWS)).columns.at(-1)).toMatchObject({ source: '', channel: null })
  })

  it('finds a header without rows', () => {
    expect(shapeOf(HEADER).rows).toEqual([1, null, 2])
  })

  it('does not judge by a last line that may be cut', () => {
    const head = utf8(`${HEADER}${ROWS}0.3,54.4`)
    expect(sniffLog(head).columns).toHaveLength(4)
    expect(sniffLog(head)).toEqual(sniffText(HEADER + ROWS))
  })

  it.each([['utf-8', utf8], ['latin1', latin1], ['utf-16le', (text: string) => utf16(text, 'le')], ['utf-16be', (text: string) => utf16(text, 'be')]] as const)('reads %s', (encoding, encode) => {
    const preview = sniffLog(encode('time_s,lat,lon,Öltemperatur (°C)\n0.0,54.40,-2.91,72\n'), { complete: true })
    expect(preview.encoding).toBe(encoding)
    expect(preview.columns[3]).toMatchObject({ source: 'Öltemperatur (°C)', unit: '°C' })
  })

  it('does not count the byte order mark to the first name', () => {
    expect(sniffText(`\uFEFF${HEADER}${ROWS}`).columns[0]!.source).toBe('time_s')
  })

  it.each([
    ['lines that begin with a quote', '"a\n'],
    ['quoted cells of two lines', '"a\nb",'],
    ['quotes within a quoted cell', '"a" "b,\n'],
  ])('takes less than a second of processor time for 64 KiB of %s', (_, piece) => {
    const head = utf8((HEADER + ROWS + piece.repeat(65_536)).slice(0, 65_536))
    const before = process.cpuUsage()
    // No table of numbers, but that is not what is asked here.
    expect(refusal(() => sniffLog(head)).code).toBe('no_table')
    const { user, system } = process.cpuUsage(before)
    expect((user + system) / 1e6).toBeLessThan(1)
  })

  it('holds no character that cannot be stored: no control characters, no half of an emoji', () => {
    const emoji = `${'x'.repeat(199)}😀`
    const text = `time,lat,lon,no\u0000te,${emoji},sp\u0001in [${'y'.repeat(19)}😀]\n0,54.4,-2.9,\u0000n\u0007,${emoji},5\n1,54.5,-2.9,b,c,6\n`
    const { columns } = sniffLog(utf16(text, 'le'), { complete: true })
    expect(columns[3]).toMatchObject({ source: 'no?te', firstValues: ['?n?', 'b'] })
    expect(columns[5]!.unit).toContain('yyy')
    // JSON writes such characters, and none other of these, as an escape.
    expect(JSON.stringify(columns)).not.toMatch(/\\u/)
  })

  it('does not change its input', () => {
    const head = utf8(HEADER + ROWS)
    const copy = head.slice()
    sniffLog(head)
    expect(head).toEqual(copy)
  })
})

describe('refusals', () => {
  it.each(['', '\n\n', '\uFEFF', ' \r\n'])('%j is empty', (text) => {
    expect(refusal(() => sniffText(text)).code).toBe('empty_file')
  })

  it('empty.csv is empty', () => {
    expect(refusal(() => sniffLog(fixture('empty.csv'), { complete: true })).code).toBe('empty_file')
  })

  it('picture.csv is a PNG picture', () => {
    const { code, message } = refusal(() => sniffLog(fixture('picture.csv'), { complete: true }))
    expect(code).toBe('not_text')
    expect(message).toContain('PNG picture')
  })

  it.each([
    'Dear all,\nthe track is wet.\nBring towels, and soup.\nSee you there,\nAda\n', 'one column\n1\n2\n3\n', 'no line end at all',
  ])('%j is no table', (text) => {
    expect(refusal(() => sniffText(text)).code).toBe('no_table')
  })

  it('more than 400 columns are no table that can be read', () => {
    const row = Array.from({ length: 401 }, (_, i) => i).join(',')
    expect(refusal(() => sniffText(`${row}\n${row}\n`)).code).toBe('no_table')
  })
})

describe('headerKey', () => {
  it('is the same for other values and another for another header', () => {
    const key = (text: string) => headerKey(sniffText(text))
    expect(key(HEADER + ROWS)).toBe(key(`${HEADER}9.0,10.5,20.5,1\n9.1,10.6,20.6,250\n`))
    expect(key(`note,x,y,z\n${HEADER}${ROWS}`)).toBe(key(HEADER + ROWS))
    const others = [`time_s,lat,lon,speed_mph\n${ROWS}`, (HEADER + ROWS).replaceAll(',', ';'), ROWS, `time_s,lat,lon,speed_kmh\ns,,,\n${ROWS}`]
    expect(new Set([HEADER + ROWS, ...others].map(key)).size).toBe(5)
  })

  it('is nothing for a file without a header, or any two of as many columns would be taken for one', () => {
    expect(headerKey(sniffText(ROWS))).toBeNull()
  })

  it('tells units rows apart', () => {
    const withUnit = (unit: string) => headerKey(sniffText(`time,lat,lon,speed\ns,deg,deg,${unit}\n${ROWS}`))
    expect(withUnit('km/h')).not.toBe(withUnit('mph'))
  })
})
