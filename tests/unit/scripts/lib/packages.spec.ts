import { describe, expect, it } from 'vitest'
import { installedMatches } from '../../../../scripts/lib/packages.mjs'

const a = { version: '1.0.0', integrity: 'sha512-a' }
const lock = { packages: { '': { name: 'x' }, 'node_modules/a': a, 'node_modules/b': { version: '2.0.0', optional: true } } }

describe('installedMatches', () => {
  it('takes an installation without the optional packages of other machines', () => {
    expect(installedMatches(lock, { packages: { 'node_modules/a': a } })).toBe(true)
  })

  it('refuses a missing package', () => {
    expect(installedMatches(lock, { packages: {} })).toBe(false)
  })

  it('refuses another version and other contents', () => {
    expect(installedMatches(lock, { packages: { 'node_modules/a': { ...a, version: '1.0.1' } } })).toBe(false)
    expect(installedMatches(lock, { packages: { 'node_modules/a': { ...a, integrity: 'sha512-b' } } })).toBe(false)
  })
})
