import { expect, it } from 'vitest'
import { tileSource } from '../../../../server/utils/tile-source'

it('is the origin of the tiles, with subdomains where the address has them', () => {
  expect(tileSource('https://tiles.lapwright.example:8443/{z}/{x}/{y}.png')).toBe('https://tiles.lapwright.example:8443')
  expect(tileSource('https://{s}.tiles.lapwright.example/{z}/{x}/{y}.png')).toBe('https://*.tiles.lapwright.example')
})
