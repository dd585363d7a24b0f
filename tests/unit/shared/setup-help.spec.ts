import { describe, expect, it } from 'vitest'
import { SETUP_FIELDS } from '../../../shared/setup-fields'
import { SETUP_HELP, setupHelpId } from '../../../shared/setup-help'

describe('SETUP_HELP', () => {
  it('explains every setting of a sheet', () => {
    expect(SETUP_FIELDS.filter(field => setupHelpId(field.path) === undefined).map(field => field.path)).toEqual([])
  })

  it('explains nothing that no sheet has, and nothing twice', () => {
    const known = new Set(SETUP_FIELDS.map(field => field.path.split('.').at(-1)))
    const keys = SETUP_HELP.flatMap(help => help.keys)
    expect(keys.filter(key => !known.has(key))).toEqual([])
    expect(new Set(keys).size).toBe(keys.length)
  })

  it('names the sign of every setting that may be below zero', () => {
    for (const field of SETUP_FIELDS.filter(each => each.signed)) {
      const help = SETUP_HELP.find(each => each.keys.includes(field.path.split('.').at(-1)!))
      expect(help?.words, field.path).toMatch(/positive|negative/)
    }
  })
})
