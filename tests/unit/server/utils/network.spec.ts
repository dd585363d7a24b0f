import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { networkOf } from '../../../../server/utils/network'

const from = (remote: string | undefined, forwarded?: string, trustProxy = false) =>
  networkOf({ remote, forwarded, trustProxy })

// Addresses are of the ranges for documentation: RFC 5737 and RFC 3849.
describe('networkOf', () => {
  it.each([
    ['192.0.2.7', '192.0.2.7'],
    ['::ffff:192.0.2.7', '192.0.2.7'],
    ['2001:db8:1:2:3:4:5:6', '2001:db8:1:2::/64'],
    ['2001:DB8:0001:0002::9', '2001:db8:1:2::/64'],
    ['2001:db8::1', '2001:db8:0:0::/64'],
    ['fe80::1%eth0', 'fe80:0:0:0::/64'],
    ['::1', '0:0:0:0::/64'],
    ['not an address', 'unknown'],
    [undefined, 'unknown'],
  ])('counts %s as %s', (remote, network) => {
    expect(from(remote)).toBe(network)
  })

  it('believes the last entry of a trusted proxy and nothing else', () => {
    const header = '198.51.100.1, 203.0.113.9'
    expect(from('192.0.2.7', header, true)).toBe('203.0.113.9')
    expect(from('192.0.2.7', header, false)).toBe('192.0.2.7')
    expect(from('192.0.2.7', '203.0.113.9:4711', true)).toBe('203.0.113.9')
    expect(from('192.0.2.7', '[2001:db8:1:2::9]:4711', true)).toBe('2001:db8:1:2::/64')
    expect(from('192.0.2.7', '203.0.113.9, nonsense', true)).toBe('192.0.2.7')
    expect(from('192.0.2.7', undefined, true)).toBe('192.0.2.7')
  })

  it('gives every address of a /64 one network, and those of another /64 another', () => {
    fc.assert(fc.property(fc.ipV6(), fc.integer({ min: 0, max: 0xFFFF }), (address, group) => {
      const network = from(address)
      fc.pre(network.endsWith('/64'))
      const prefix = network.replace('::/64', '')
      expect(from(`${prefix}:${group.toString(16)}:1:2:3`)).toBe(network)
      const other = prefix.split(':')
      other[3] = (Number.parseInt(other[3]!, 16) ^ 1).toString(16)
      expect(from(`${other.join(':')}:0:1:2:3`)).not.toBe(network)
    }))
  })

  it('answers whatever is written into the header', () => {
    fc.assert(fc.property(fc.string(), (text) => {
      expect(from('192.0.2.7', text, true)).toMatch(/^[\da-f.:]+(?:\/64)?$/)
    }))
  })
})
