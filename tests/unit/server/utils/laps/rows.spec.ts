import type { Slot } from '../../../../../server/utils/laps/rows'
import { describe, expect, it } from 'vitest'
import { createClock } from '../../../../../server/utils/laps/clock'
import { createRowSink } from '../../../../../server/utils/laps/rows'
import { sniffText, utf8 } from '../../../../support/log-text'

/** A sink for `time,lat,note,speed`, with time and a converted speed mapped. */
function sink() {
  const slot = { offset: 0, clock: undefined, unit: '', factor: 1 }
  const slots: Slot[] = [
    { ...slot, index: 0, source: 'time', channel: 'time', clock: createClock('s', '.'), values: new Float64Array(4096) },
    { ...slot, index: 3, source: 'temp', channel: 'oil_temperature', factor: 5 / 9, offset: -160 / 9, values: new Float64Array(4096) },
  ]
  const rows = createRowSink(sniffText('time,lat,note,temp\n0,1,a,2\n'), slots, '.')
  let line = 2
  return {
    take(text: string, { quoted = false, ended = true } = {}) {
      const bytes = utf8(`xx${text}xx`)
      rows.take({ bytes, start: 2, end: bytes.length - 2, line: line++, quoted, ended })
    },
    column: (n: number) => [...slots[n]!.values.subarray(0, rows.rowNumbers().length)],
    lines: () => [...rows.rowNumbers()],
    problems: () => rows.problems.list(),
  }
}

describe('createRowSink', () => {
  it('reads mapped cells only, plain and quoted alike', () => {
    const plain = sink()
    plain.take('5.5,54,any,32')
    plain.take('6,54,any,212')
    const quoted = sink()
    quoted.take('5.5,54,"any, and more",32', { quoted: true })
    quoted.take('"6",54,"say ""so""","212"', { quoted: true })
    for (const rows of [plain, quoted]) {
      expect(rows.column(0)).toEqual([0, 0.5])
      // By definition 32 degF = 0 degC and 212 degF = 100 degC; tolerance: rounding of 5/9.
      expect(rows.column(1)[0]).toBeCloseTo(0, 12)
      expect(rows.column(1)[1]).toBeCloseTo(100, 12)
      expect(rows.problems()).toEqual([])
    }
  })

  it('lets a bad cell cost itself alone, and counts', () => {
    const rows = sink()
    rows.take('0,1,a,hot')
    rows.take('later,1,a,212')
    rows.take('2,1,a,"hot"', { quoted: true })
    expect(rows.column(0)).toEqual([0, Number.NaN, 2])
    expect(rows.column(1)[1]).toBeCloseTo(100, 12)
    expect(rows.problems()).toMatchObject([
      { code: 'bad_number', row: 2, count: 2 }, { code: 'bad_time', row: 3, count: 1 },
    ])
    expect(rows.problems()[0]!.message).toContain('"temp": "hot"')
  })

  it('shows a bad cell so that it can be stored: NUL bytes as ?, an emoji that is cut not in half', () => {
    const rows = sink()
    rows.take(`0,1,a,${'\0'.repeat(60)}`)
    rows.take(`${'x'.repeat(39)}😀,1,a,2`)
    const [nul, emoji] = rows.problems().map(({ message }) => message)
    expect(nul).toContain(`"temp": "${'?'.repeat(40)}" is not a number`)
    expect(emoji).toContain('"time": "xxx')
    expect(JSON.stringify([nul, emoji])).not.toMatch(/\\u/)
  })

  it('keeps the cells of a short row and leaves a long row out', () => {
    const rows = sink()
    rows.take('0,1')
    rows.take('1,1,a,32,5')
    rows.take('2,1,a,32,')
    rows.take('3,1,"a",32,5', { quoted: true })
    expect(rows.lines()).toEqual([2, 4])
    expect(rows.column(0)).toEqual([0, 2])
    expect(rows.column(1)[0]).toBeNaN()
    expect(rows.problems()).toMatchObject([{ code: 'too_few_cells', row: 2, count: 1 }, { code: 'too_many_cells', row: 3, count: 2 }])
  })

  it('drops the last cell of a row that was cut, and keeps a whole last row', () => {
    const cut = sink()
    cut.take('0.5', { ended: false })
    expect(cut.column(0)).toEqual([Number.NaN])
    expect(cut.problems()).toMatchObject([{ code: 'cut_last_line', row: 2 }])
    const whole = sink()
    whole.take('0.5,1,a,32', { ended: false })
    expect(whole.column(0)).toEqual([0])
    expect(whole.problems()).toEqual([])
  })

  it('passes over rows without a value', () => {
    const rows = sink()
    for (const text of ['', ',,,', ' , ,x, ', '-,1,a,n/a']) rows.take(text)
    expect(rows.lines()).toEqual([])
    expect(rows.problems()).toEqual([])
  })

  it('grows', () => {
    const rows = sink()
    for (let i = 0; i < 10_000; i++) rows.take(`${i},1,a,32`)
    expect(rows.column(0)).toEqual(Array.from({ length: 10_000 }, (_, i) => i))
    expect(rows.lines().at(-1)).toBe(10_001)
  })
})
