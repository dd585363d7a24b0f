import { describe, expect, it } from 'vitest'
import { lineReport } from '../../../../../server/utils/laps/line-report'
import type { LineUse, Pass } from '../../../../../server/utils/laps/passes'
import type { CutLap, TimingLine } from '../../../../../server/utils/laps/types'

const place = { latitudeDeg: 0, longitudeDeg: 0 }
function line(ordinal: number): TimingLine {
  return { id: `line-${ordinal}`, kind: ordinal ? 'sector' : 'start_finish', ordinal, a: place, b: place }
}

function pass(timeS: number, offSquareDeg = 0, sense: 1 | -1 = 1, offsetM = 0): Pass {
  return { timeS, sense, offsetM, gap: 'none', offSquareDeg, sample: 0, distanceM: timeS * 30 }
}

function use(of: TimingLine, all: Pass[], counting = all): LineUse {
  return { line: of, all, counting, doubtful: [] }
}

function lap(number: number, sectorsS: (number | null)[] = []): CutLap {
  return { number, kind: 'timed', startS: number * 100, timeS: 100, sectorsS, flags: [] }
}

const codes = (report: ReturnType<typeof lineReport>) => report.warnings.map(({ code }) => code)
const starts = [100, 200, 300, 400].map(t => pass(t))
const laps = [lap(1), lap(2), lap(3)]

describe('lineReport', () => {
  it('counts in the order of the lines, and has nothing to say about good ones', () => {
    const report = lineReport([line(1), line(0)], use(line(0), starts), [], laps, false)
    // Lines are known by identity: a line that no use names is left out.
    expect(report.lines).toEqual([])
    const [start, sector] = [line(0), line(1)]
    const crossed = use(sector, [pass(50, 4), pass(150, 8), pass(250, 5)])
    const good = lineReport([sector, start], use(start, starts), [crossed], laps, false)
    expect(good.lines).toEqual([
      { id: 'line-1', crossed: 3, ignored: 0, offSquareDeg: 5 },
      { id: 'line-0', crossed: 4, ignored: 0, offSquareDeg: 0 },
    ])
    expect(good.warnings).toEqual([])
  })

  it('says which line was never crossed', () => {
    const [start, sector] = [line(0), line(2)]
    const report = lineReport([start, sector], use(start, starts), [use(sector, [])], laps, false)
    expect(codes(report)).toEqual(['line_never_crossed'])
    expect(report.warnings[0]!.message).toContain('sector line 2')
    expect(report.lines[1]).toEqual({ id: 'line-2', crossed: 0, ignored: 0, offSquareDeg: null })
  })

  it('says when a line is crossed twice or three times a lap, but not once more in all', () => {
    const start = line(0)
    const between = (offsetM: number, at: number) => [100, 200, 300].map(t => pass(t + at, 0, -1, offsetM))
    const sorted = (passes: Pass[]) => passes.sort((p, q) => p.timeS - q.timeS)
    const twice = lineReport([start], use(start, sorted([...starts, ...between(40, 50)]), starts), [], laps, false)
    expect(codes(twice)).toEqual(['line_crossed_twice'])
    expect(twice.warnings[0]!.message).toContain('twice a lap')
    const three = sorted([...starts, ...between(40, 30), ...between(80, 60)])
    const thrice = lineReport([start], use(start, three, starts), [], laps, false)
    expect(thrice.warnings[0]!.message).toContain('3 times a lap')
    const once = lineReport([start], use(start, sorted([...starts, pass(250, 0, -1, 40)]), starts), [], laps, false)
    expect(codes(once)).toEqual([])
  })

  it('says when a line lies far off square, by the median', () => {
    const start = line(0)
    const slanted = [100, 200, 300].map((t, k) => pass(t, [2, 41, 44][k]))
    expect(codes(lineReport([start], use(start, slanted), [], laps, false))).toEqual(['line_off_square'])
    const straight = [100, 200, 300].map((t, k) => pass(t, [2, 3, 44][k]))
    expect(codes(lineReport([start], use(start, straight), [], laps, false))).toEqual([])
  })

  it('says when sector lines are numbered against the driving order', () => {
    const [start, one, two] = [line(0), line(1), line(2)]
    const uses = [use(one, [160, 260, 360].map(t => pass(t))), use(two, [130, 230, 330].map(t => pass(t)))]
    const missed = [lap(1, [60, null, null]), lap(2, [60, null, null]), lap(3, [60, null, null])]
    const report = lineReport([start, one, two], use(start, starts), uses, missed, false)
    expect(codes(report)).toEqual(['line_out_of_order'])
    expect(report.warnings[0]!.message).toContain('sector line 2')
  })

  it('does not say so of a line that was crossed before the first lap or after the last alone', () => {
    const [start, one] = [line(0), line(1)]
    const missed = laps.map(each => ({ ...each, sectorsS: [null, null] }))
    const sector = use(one, [pass(50), pass(100), pass(450)])
    const report = lineReport([start, one], use(start, starts), [sector], missed, false)
    expect(codes(report)).toEqual([])
  })

  it('says when the log was driven the wrong way', () => {
    const start = line(0)
    expect(codes(lineReport([start], use(start, starts, []), [], [], true))).toEqual(['wrong_direction'])
  })
})
