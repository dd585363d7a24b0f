import { describe, expect, it } from 'vitest'
import { firstComparison, firstSteps, nextStep, type FirstBook } from '../../../shared/first-steps'

type Day = NonNullable<FirstBook['day']>
type Outing = Day['outings'][number]

const EMPTY: FirstBook = { circuits: [], cars: [], day: null }
const LAYOUT = { id: 'y1', name: 'Full circuit', direction: null, lengthM: null, lineCount: 0, version: 1, changedAt: '' }
const CIRCUIT = { id: 'c1', name: 'Harrow Fell', layouts: [LAYOUT] } as FirstBook['circuits'][number]
const CAR = { id: 'r1', name: 'No. 47', setups: [{ number: 2 }] } as FirstBook['cars'][number]

const lap = (id: string, timeS: number, more: object = {}): Outing['laps'][number] =>
  ({ id, number: 1, logId: null, kind: 'timed', startS: 0, timeS, sectorsS: [], flags: [], excluded: false, excludedReason: '', ...more })
const log = (status: Outing['logs'][number]['status']): Outing['logs'][number] =>
  ({ id: `l-${status}`, fileName: 'run.csv', sizeBytes: 1, status, rowProblems: 0, problem: null })
const outing = (logs: Outing['logs'], laps: Outing['laps'] = [], lineCount = 0): Outing =>
  ({ id: 'o1', number: 1, layout: { id: 'y1', name: 'Full circuit', lineCount }, logs, laps })
const book = (outings: Outing[] | null): FirstBook =>
  ({ circuits: [CIRCUIT], cars: [CAR], day: outings && { id: 'd1', date: '2026-09-12', outings } })

const steps = (of: FirstBook) => firstSteps(of, date => `on ${date}`)
const next = (of: FirstBook) => nextStep(steps(of))?.action

describe('firstSteps', () => {
  it('are five, none of them done in an empty book, and begin with a circuit', () => {
    expect(steps(EMPTY).map(step => step.done)).toEqual([false, false, false, false, false])
    expect(steps(EMPTY).every(step => step.has === '')).toBe(true)
    expect(next(EMPTY)).toEqual({ label: 'Add a circuit', to: '/circuits/new' })
  })

  it('ask for what a half-done step still lacks, and say what is there', () => {
    const bare: FirstBook = { ...EMPTY, circuits: [{ ...CIRCUIT, layouts: [] }] }
    expect(steps(bare)[0]).toMatchObject({ done: false, has: 'Harrow Fell, without a layout so far', action: { to: '/circuits/c1' } })
    const sheetless: FirstBook = { circuits: [CIRCUIT], cars: [{ ...CAR, setups: [] }], day: null }
    expect(next(sheetless)).toEqual({ label: 'Write its setup sheet', to: '/cars/r1/setups/new' })
    expect(steps(book([]))[2]).toMatchObject({ has: 'on 2026-09-12, without an outing so far', action: { to: '/days/d1/outings/new' } })
  })

  it.each([
    ['no day', book(null), '/days/new'],
    ['an outing without a log', book([outing([])]), '/outings/o1'],
    ['columns to confirm', book([outing([log('mapping')])]), '/logs/l-mapping'],
    ['a log that was refused', book([outing([log('refused')])]), '/outings/o1'],
    ['a log without lines', book([outing([log('no_lines')])]), '/layouts/y1?log=l-no_lines'],
    ['a log that is being read', book([outing([log('processing')])]), '/outings/o1'],
  ])('lead on from %s', (_what, of, to) => {
    expect(next(of)?.to).toBe(to)
  })

  it('count a refused log as none, and one that is being read as handed over', () => {
    expect(steps(book([outing([log('refused')])]))[3]).toMatchObject({ done: false, has: 'run.csv was refused' })
    expect(steps(book([outing([log('queued')])]))[3]!.done).toBe(true)
    // A second file that could be used makes up for the first.
    expect(steps(book([outing([log('refused'), log('ready')])]))[3]!.done).toBe(true)
  })

  it('are all done with the first lap, whichever outing has it', () => {
    const of = book([outing([]), { ...outing([log('ready')], [lap('a', 91)], 3), id: 'o2', number: 2 }])
    expect(steps(of).map(step => step.done)).toEqual([true, true, true, true, true])
    expect(nextStep(steps(of))).toBeNull()
    expect(steps(of)[4]!.has).toBe('laps of outing 2')
  })
})

describe('firstComparison', () => {
  const run = (id: string, setup: string, laps: Outing['laps'], layout = 'y1') =>
    ({ ...outing([log('ready')], laps), id, layout: { id: layout, name: layout, lineCount: 3 }, setup: { id: setup, number: 1, name: setup } })

  it('holds the best lap of the second setup against the best of the first', () => {
    const found = firstComparison([
      run('o1', 's1', [lap('slow', 93), lap('best', 91)]), run('o2', 's1', [lap('same', 92)]), run('o3', 's2', [lap('other', 90)]),
    ])
    expect(found).toEqual({ lap: 'other', against: 'best' })
  })

  it('takes two outings with one setup when there is no other', () => {
    expect(firstComparison([run('o1', 's1', [lap('a', 91)]), run('o2', 's1', [lap('b', 92)])])).toEqual({ lap: 'b', against: 'a' })
  })

  it('has no answer across layouts, with one outing, or with laps that do not count', () => {
    expect(firstComparison([run('o1', 's1', [lap('a', 91)]), run('o2', 's2', [lap('b', 92)], 'y2')])).toBeNull()
    expect(firstComparison([run('o1', 's1', [lap('a', 91)])])).toBeNull()
    expect(firstComparison([run('o1', 's1', [lap('a', 91)]), run('o2', 's2', [lap('b', 92, { excluded: true }), lap('out', 120, { kind: 'out' })])])).toBeNull()
  })
})
