import { describe, expect, it } from 'vitest'
import { asSentence, carKind, countInWords, formatCount, MISSING, numberInWords } from '../../../../shared/utils/format'

describe('counts', () => {
  it('counts in words', () => {
    expect([0, 1, 2].map(n => formatCount(n, 'lap'))).toEqual(['0 laps', '1 lap', '2 laps'])
    expect(formatCount(2, 'entry', 'entries')).toBe('2 entries')
    expect([0, 1, 12, 13].map(n => countInWords(n, 'lap'))).toEqual(['no laps', 'one lap', 'twelve laps', '13 laps'])
    expect([0, 12, 13].map(numberInWords)).toEqual(['no', 'twelve', '13'])
    expect(asSentence(countInWords(3, 'outing'))).toBe('Three outings')
    expect(asSentence('')).toBe('')
  })
})

describe('carKind', () => {
  it('writes what is known', () => {
    expect(carKind({ number: '47', year: 2006, kind: 'hatchback' })).toBe('No. 47, 2006 hatchback')
    expect(carKind({ number: '', year: null, kind: 'saloon' })).toBe('saloon')
    expect(carKind({ number: '47', year: null, kind: '' })).toBe('No. 47')
    expect(carKind({ number: '', year: null, kind: '' })).toBe(MISSING)
  })
})
