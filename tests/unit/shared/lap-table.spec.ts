import { describe, expect, it } from 'vitest'
import { comparePair, lapTable } from '../../../shared/lap-table'
import type { Lap } from '../../../shared/schemas/days'

function lap(number: number, sectorsS: (number | null)[], more: Partial<Lap> = {}): Lap {
  const timeS = sectorsS.reduce<number>((sum, sector) => sum + (sector ?? 0), 0)
  return { id: `lap-${number}`, number, logId: null, kind: 'timed', startS: 0, timeS, sectorsS, flags: [], excluded: false, excludedReason: '', ...more }
}

const LAPS = [
  lap(0, [], { kind: 'out', timeS: 120 }),
  lap(1, [31, 30, 30.2]),
  lap(2, [30.4, 30.1, 30.3]),
  lap(3, [29, 31, 31], { excluded: true, excludedReason: 'cut corner 2' }),
  lap(4, [30.4, null, null], { timeS: 91, flags: ['missed_sector'] }),
  lap(5, [], { kind: 'in', timeS: 100 }),
]

describe('lapTable', () => {
  const table = lapTable(LAPS)

  it('marks the best lap and the best sectors of counted laps, equals both', () => {
    expect(table.rows.filter(row => row.isBest).map(row => row.name)).toEqual(['2'])
    expect(table.rows.map(row => row.sectors.filter(sector => sector.isBest).length)).toEqual([0, 2, 1, 0, 1, 0])
    expect(table.bestSectorsS).toEqual([30.4, 30, 30.2])
    expect(table.sumOfBestS).toBe(90.6)
  })

  it('names out and in laps, gives every row all sector columns, and says what is the matter', () => {
    expect(table.rows.map(row => row.name)).toEqual(['out', '1', '2', '3', '4', 'in'])
    expect(table.rows.map(row => row.sectors.length)).toEqual([3, 3, 3, 3, 3, 3])
    expect(table.rows.map(row => row.notes)).toEqual([[], [], [], ['cut corner 2'], ['missed a sector line'], []])
  })

  it('says from which log a lap is, when there is more than one', () => {
    const logs = [{ id: 'a', fileName: 'first.csv' }, { id: 'b', fileName: 'second.csv' }]
    const of = (...laps: Lap[]) => lapTable(laps, logs).rows.map(row => row.notes)
    expect(of(lap(1, [90], { logId: 'a' }), lap(2, [91], { logId: 'a' }))).toEqual([[], []])
    expect(of(lap(1, [90], { logId: 'a' }), lap(1, [89.9], { logId: 'b', flags: ['repeated'] })))
      .toEqual([['from first.csv'], ['from second.csv', 'the log added first counts']])
  })

  it('takes differences from the shown times', () => {
    expect(table.rows.map(row => row.behindS)).toEqual([null, 0.4, null, 0.2, 0.2, null])
    // 90.0006 and 90.0004 are shown as 90.001 and 90.000.
    const [first] = lapTable([lap(1, [90.0006]), lap(2, [90.0004])]).rows
    expect(first?.behindS).toBe(0.001)
  })

  it('has no sector columns while only the start/finish line is drawn', () => {
    expect(lapTable([lap(1, [90])])).toMatchObject({ sectorCount: 0, sumOfBestS: null })
  })
})

describe('comparePair', () => {
  const [a, b] = [lap(1, [91]), lap(2, [90])]

  it('holds the slower lap against the faster one', () => {
    expect(comparePair([b, a], b)).toEqual({ lap: a, against: b })
    expect(comparePair([a, b], b)).toEqual({ lap: a, against: b })
  })

  it('holds one lap against the best, but never a lap against itself', () => {
    expect(comparePair([a], b)).toEqual({ lap: a, against: b })
    expect(comparePair([b], b)).toBeNull()
    expect(comparePair([], b)).toBeNull()
  })
})
