import { randomBytes } from 'node:crypto'

/**
 * A network of its own for a test that tries many passwords, of the range for documentation (RFC 3849): sent as
 * X-Forwarded-For, it keeps the test from using up the attempts of all others, which come from loopback.
 */
export function newNetwork(): { address: string, neighbour: string, key: string } {
  const bytes = randomBytes(4)
  const prefix = `2001:db8:${bytes.readUInt16BE(0).toString(16)}:${bytes.readUInt16BE(2).toString(16)}`
  return { address: `${prefix}::7`, neighbour: `${prefix}:ffff:1:2:3`, key: `network:${prefix}::/64` }
}
