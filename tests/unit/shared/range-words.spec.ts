import { describe, expect, it } from 'vitest'
import { makeFigures, STANDARD_CHOICE } from '../../../shared/figures'
import { toStored } from '../../../shared/quantities'
import { rangeInUnits, rangeWords } from '../../../shared/range-words'
import { conditionsSchema, hotPressuresSchema } from '../../../shared/schemas/days'

const metric = makeFigures(STANDARD_CHOICE)
const imperial = makeFigures({ units: 'imperial', numberLanguage: 'de-DE' })

describe('rangeInUnits', () => {
  it.each([
    [rangeWords(-30, 55, '°C'), 'between −30 and 55 °C', 'between −22 and 131 °F'],
    [rangeWords(50, 500, 'kPa, that is 0.5 to 5 bar'), 'between 0.5 and 5 bar', 'between 7,3 and 72,5 psi'],
    [rangeWords(1, 1000, 'N/mm'), 'between 1 and 1000 N/mm', 'between 5,8 and 5710,1 lbf/in'],
    [rangeWords(0, 300, 'kg'), 'between 0 and 300 kg', 'between 0 and 661,3 lb'],
    [rangeWords(-12, 12, '°'), 'between −12 and 12 °', 'between −12 and 12 °'],
    [rangeWords(0, 100, 'clicks'), 'between 0 and 100 clicks', 'between 0 and 100 clicks'],
    ['between 0.5 and 5 bar', 'between 0.5 and 5 bar', 'between 7,3 and 72,5 psi'],
    ['please choose a car', 'please choose a car', 'please choose a car'],
  ])('tells %j', (message, inMetric, inImperial) => {
    expect([rangeInUnits(message, metric), rangeInUnits(message, imperial)]).toEqual([inMetric, inImperial])
  })

  it('rounds inwards: what it tells is taken by the schema', () => {
    const air = (shown: number) => conditionsSchema.safeParse({ airC: toStored(shown, imperial.unitOf('temperature')) }).success
    expect([-23, -22, 131, 132].map(air)).toEqual([false, true, true, false])
    const judge = (shown: number) => hotPressuresSchema.safeParse({ fl: toStored(shown, imperial.unitOf('pressure')) }).success
    expect([7.2, 7.3, 72.5, 72.6].map(judge)).toEqual([false, true, true, false])
  })

  it('tells what a schema says of a figure that is none', () => {
    const [issue] = conditionsSchema.safeParse({ airC: Number.NaN }).error!.issues
    expect(rangeInUnits(issue!.message, imperial)).toBe('between −22 and 131 °F')
  })
})
