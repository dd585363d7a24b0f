import { describe, expect, it } from 'vitest'
import { CHANNELS } from '../../../../../shared/channels'
import { ALIASES, ALIASES_WITH_UNIT, DEVICES } from '../../../../../server/utils/laps/aliases'
import { words } from '../../../../../server/utils/laps/units'

describe('aliases', () => {
  it('name every known channel and no other', () => {
    const known = CHANNELS.map(({ name }) => name)
    expect(Object.keys(ALIASES)).toEqual(known)
    expect(known).toEqual(expect.arrayContaining(Object.keys(ALIASES_WITH_UNIT)))
  })

  it('mean one channel each', () => {
    const all = Object.values(ALIASES).flat()
    expect(all.filter((alias, i) => all.indexOf(alias) !== i)).toEqual([])
  })

  it('are written as a header is taken apart, so that they can be found', () => {
    const names = [ALIASES, ALIASES_WITH_UNIT].flatMap(aliases => Object.values(aliases).flat())
    for (const alias of [...names, ...DEVICES.keys()]) {
      expect(words(alias).join(' ')).toBe(alias)
    }
  })
})
