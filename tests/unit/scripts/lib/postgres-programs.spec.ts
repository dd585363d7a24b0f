import { describe, expect, it } from 'vitest'
import { usableMajors } from '../../../../scripts/lib/postgres-programs.mjs'

describe('usableMajors', () => {
  it('puts the newest first, by number and not by letters, and leaves out what is too old', () => {
    expect(usableMajors(['9', '15', '17', '13', '100', 'x', '9.6'])).toEqual([100, 17, 15])
  })
})
