import { describe, expect, it } from 'vitest'
import { dayGroups, daySentence, outingSentence, trackSpread, type Sentence } from '../../../shared/day-sheet'
import { makeFigures, STANDARD_CHOICE } from '../../../shared/figures'
import { conditionsSchema, type Lap, type OutingSummary } from '../../../shared/schemas/days'

const standard = makeFigures(STANDARD_CHOICE)
let nextId = 0

function lap(number: number, timeS: number, more: Partial<Lap> = {}): Lap {
  return {
    id: `lap-${nextId++}`, logId: null, number, kind: 'timed', startS: 0, timeS, sectorsS: [timeS / 2, timeS / 2], flags: [], excluded: false,
    excludedReason: '', ...more,
  }
}

function outing(number: number, timesS: number[], more: Partial<OutingSummary> = {}): OutingSummary {
  return {
    id: `outing-${number}`, number, startedAt: null, layout: { id: 'full', name: 'Full', lineCount: 2 },
    car: { id: 'hatch', name: '2006 hatchback' }, setup: { id: 's11', number: 11, name: '' }, driver: { id: 'n', name: 'Nell Placeholder' },
    fuelStartL: null, passenger: false, conditions: conditionsSchema.parse({}),
    hotPressures: { fl: null, fr: null, rl: null, rr: null },
    notes: '', laps: timesS.map((timeS, i) => lap(i + 1, timeS)), logs: [], setupChanges: [], version: 1, changedAt: '2026-09-12T12:00:00.000Z',
    ...more,
  }
}

function log(status: OutingSummary['logs'][number]['status']): OutingSummary['logs'][number] {
  return { id: 'log', fileName: 'a.csv', sizeBytes: 1, status, rowProblems: 0, problem: null }
}

const text = (sentence: Sentence) => sentence.map(part => typeof part === 'string' ? part : part.fig).join('')
const says = (outings: OutingSummary[]) => text(daySentence({ outings }, dayGroups(outings), standard))
const wet = { ...conditionsSchema.parse({}), wetness: 'wet' as const }

describe('dayGroups', () => {
  it('never puts two cars or two layouts on one axis', () => {
    const groups = dayGroups([
      outing(1, [91]),
      outing(2, [99], { car: { id: 'coupe', name: '1994 coupe' } }),
      outing(3, [90]),
      outing(4, [60], { layout: { id: 'short', name: 'Short', lineCount: 1 } }),
    ])
    expect(groups.map(group => group.outings.map(each => each.number))).toEqual([[1, 3], [2], [4]])
    expect(groups[0]?.figures.best?.timeS).toBe(90)
  })

  it('never mixes wet and dry', () => {
    const [group] = dayGroups([outing(1, [91, 92]), outing(2, [85, 86], { conditions: wet })])
    expect(group?.figuresOf).toBe('dry')
    expect(group?.figures.best?.timeS).toBe(91)
    expect(dayGroups([outing(1, []), outing(2, [99], { conditions: wet })])[0]).toMatchObject({ figuresOf: 'wet' })
    expect(dayGroups([outing(1, [99], { conditions: wet })])[0]).toMatchObject({ figuresOf: null })
  })
})

describe('daySentence', () => {
  it('says the best lap and who came near to it on which setup', () => {
    expect(says([
      outing(1, [92.41, 90.869]),
      outing(2, [91.5], { setup: { id: 's12', number: 12, name: '' } }),
      outing(3, [90.982], { setup: { id: 's12', number: 12, name: '' } }),
    ])).toBe('Three outings, 4 laps count. Best 1:30.869, lap 2 of outing 1; outing 3 came within 0.113 s of it, on revision 12 instead of 11.')
  })

  it('takes the difference from the shown times, and says when there is none', () => {
    expect(says([outing(1, [90.0004]), outing(2, [90.0006])])).toContain('outing 2 came within 0.001 s of it.')
    expect(says([outing(1, [90]), outing(2, [90.0001])])).toContain('outing 2 did the same.')
  })

  it('names car and layout when there are several', () => {
    expect(says([outing(1, [91]), outing(2, [99], { car: { id: 'coupe', name: '1994 coupe' } })]))
      .toBe('Two outings, 2 laps count. Best 1:31.000 in the 2006 hatchback on Full, lap 1 of outing 1.')
  })

  it('says what is missing while there is no lap', () => {
    expect(says([])).toBe('No outing on this sheet yet.')
    expect(says([outing(1, [])])).toBe('One outing, and no lap that counts yet.')
    expect(says([outing(1, [], { logs: [log('mapping')] })])).toBe('One outing, and no lap that counts yet: one log waits for its columns.')
    expect(says([outing(1, [], { logs: [log('no_lines'), log('ready')] })])).toContain('one log waits for the timing lines')
    expect(says([outing(1, [], { logs: [log('processing'), log('queued')] })])).toContain('two logs are being read')
  })
})

describe('outingSentence', () => {
  it('says the best lap, how many count, and what the best sectors together would have given', () => {
    const laps = [lap(1, 91, { sectorsS: [46, 45] }), lap(2, 90.5, { sectorsS: [45, 45.5] }), lap(3, 95, { excluded: true, excludedReason: 'flag' })]
    expect(text(outingSentence(outing(3, [], { laps }), standard)))
      .toBe('Outing 3 did 1:30.500 on lap 2; two of its three timed laps count. Its best sectors together are 0.500 s faster.')
  })

  it('leaves the sectors out when the best lap holds them all', () => {
    expect(text(outingSentence(outing(1, [91, 90]), standard))).toBe('Outing 1 did 1:30.000 on lap 2; all of its two laps count.')
    expect(text(outingSentence(outing(1, [90]), standard))).toBe('Outing 1 did 1:30.000 on lap 1; it is the only timed lap.')
  })

  it('says what is missing', () => {
    expect(text(outingSentence(outing(2, []), standard))).toBe('Outing 2 has no log yet.')
    expect(text(outingSentence(outing(2, [], { logs: [log('no_lines')] }), standard))).toBe('Outing 2 has no lap that counts yet: one log waits for the timing lines.')
  })
})

describe('trackSpread', () => {
  it('speaks of the track temperature only where it moved by 3 degrees', () => {
    const at = (number: number, trackC: number | null) =>
      ({ number, conditions: { ...conditionsSchema.parse({}), trackC } })
    expect(trackSpread([at(1, 19), at(2, null), at(3, 34)])).toEqual({ warm: 3, cool: 1, byC: 15 })
    expect(trackSpread([at(1, 19), at(2, 21)])).toBeNull()
    expect(trackSpread([at(1, null)])).toBeNull()
  })
})
