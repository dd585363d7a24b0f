import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { repeatedLaps, type LoggedLaps } from '../../../../../server/utils/laps/repeats'

/** Laps of one length, one after the other from `fromS` on the log's own clock. */
function log(name: string, zeroAtS: number | null, fromS: number, count: number, timeS = 90): LoggedLaps {
  const laps = Array.from({ length: count }, (_, i) => ({ id: `${name}${i + 1}`, startS: fromS + i * timeS, timeS, sure: true }))
  return { zeroAtS, laps }
}
const repeats = (...logs: LoggedLaps[]) => [...repeatedLaps(logs)]

describe('repeatedLaps', () => {
  it('finds those of a second logger that ran beside the first, on a clock of its own', () => {
    expect(repeats(log('a', 1000, 60, 3), log('b', 980, 81, 3))).toEqual(['b1', 'b2', 'b3'])
  })

  it('leaves what the second log alone has', () => {
    // The second logger was switched off two laps later.
    expect(repeats(log('a', 1000, 60, 3), log('b', 1000, 60.4, 5))).toEqual(['b1', 'b2', 'b3'])
  })

  it('leaves two logs of one outing alone that follow each other', () => {
    expect(repeats(log('a', 1000, 0, 3), log('b', 1270, 0, 3))).toEqual([])
  })

  it('takes the log that came first, whichever began earlier', () => {
    expect(repeats(log('b', 5000, 10, 2), log('a', 4000, 10, 13))).toEqual(['a12', 'a13'])
  })

  it('counts those of the first alone where a clock does not tell the time of day', () => {
    expect(repeats(log('a', null, 0, 2), log('b', 1000, 0, 2))).toEqual(['b1', 'b2'])
    expect(repeats(log('a', 1000, 0, 2), log('b', null, 9000, 1), log('c', 1180, 0, 1))).toEqual(['b1'])
  })

  it('lets no log without sure laps stand in the way', () => {
    const doubtful = log('a', 1000, 0, 2)
    const laps = [{ ...doubtful.laps[0]!, sure: false }, doubtful.laps[1]!]
    expect(repeats({ ...doubtful, laps }, log('b', 1000, 0, 2))).toEqual(['b2'])
    expect(repeats(log('a', null, 0, 0), log('b', null, 0, 2))).toEqual([])
  })

  it('never takes a lap of the first log, and all of a copy', () => {
    fc.assert(fc.property(
      fc.double({ min: -1e9, max: 2e9, noNaN: true }), fc.integer({ min: 1, max: 12 }),
      fc.double({ min: 20, max: 400, noNaN: true }),
      (zeroAtS, count, timeS) => {
        const [first, copy] = [log('a', zeroAtS, 5, count, timeS), log('b', zeroAtS, 5, count, timeS)]
        expect(repeats(first, copy)).toEqual(copy.laps.map(lap => lap.id))
        expect(repeats(first)).toEqual([])
      },
    ))
  })
})
