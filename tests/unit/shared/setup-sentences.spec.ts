import { describe, expect, it } from 'vitest'
import { revisionSentence } from '../../../shared/setup-sentences'

const difference = (label: string) => ({ label, unit: 'mm', a: 1, b: 2 })
const many = ['Rear spring', 'Rear rebound', 'Front bar', 'Brake bias'].map(difference)

describe('revisionSentence', () => {
  it.each([
    [1, null, [], 42, 'Revision 1 is a fresh sheet, with 42 settings filled in.'],
    [1, null, [], 1, 'Revision 1 is a fresh sheet, with 1 setting filled in.'],
    [3, 2, [], 42, 'Revision 3 is the same as revision 2 in every setting.'],
    [3, 2, many.slice(0, 1), 42, 'Revision 3 changes the rear spring of revision 2.'],
    [3, 2, many.slice(0, 2), 42, 'Revision 3 changes the rear spring and rear rebound of revision 2.'],
    [3, 2, many.slice(0, 3), 42, 'Revision 3 changes the rear spring, rear rebound and front bar of revision 2.'],
    [3, 2, many, 42, 'Revision 3 changes revision 2 in four places.'],
  ])('of revision %d from %s', (number, basedOn, differences, filled, sentence) => {
    expect(revisionSentence(number, basedOn, differences, filled)).toBe(sentence)
  })
})
