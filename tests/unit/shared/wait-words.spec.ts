import { expect, it } from 'vitest'
import { waitInWords } from '../../../shared/wait-words'

it.each([
  [0.2, 'in 1 second'],
  [20, 'in 20 seconds'],
  [59.5, 'in 60 seconds'],
  [60, 'in 1 minute'],
  [61, 'in 2 minutes'],
  [420, 'in 7 minutes'],
  [3600, 'in 60 minutes'],
])('says %d s as "%s", never too early', (seconds, words) => {
  expect(waitInWords(seconds)).toBe(words)
})
