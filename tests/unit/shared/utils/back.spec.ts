import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { safeBack } from '../../../../shared/utils/back'

describe('safeBack', () => {
  it('keeps a path of this site with its query', () => {
    expect(safeBack('/compare?lap=1&against=2')).toBe('/compare?lap=1&against=2')
  })

  it.each([
    undefined, null, 3, '', ['/a'], 'days', 'https://elsewhere.example/', '//elsewhere.example', '/\\elsewhere.example', '/\t/elsewhere.example',
    '/a\\b', '/', '/sign-in', '/sign-in?back=/days', '/register',
  ])('sends %j to the track days', (value) => {
    expect(safeBack(value)).toBe('/days')
  })

  it('never leaves this site, whatever is asked', () => {
    const hostile = fc.string({ unit: fc.constantFrom('/', '\\', '\t', '\n', '@', ':', '.', 'a', ' ', '%', '?', '#') })
    fc.assert(fc.property(hostile, (tail) => {
      expect(new URL(safeBack(`/${tail}`), 'https://lapwright.example').host).toBe('lapwright.example')
    }), { numRuns: 2000 })
  })
})
