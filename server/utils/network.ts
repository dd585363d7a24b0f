import { isIPv4, isIPv6 } from 'node:net'

interface Asked {
  /** Address at the other end of the connection. */
  remote: string | undefined
  /** The header X-Forwarded-For as it came. */
  forwarded: string | undefined
  /** A proxy of our own stands before the server: what it wrote last is who asked it. */
  trustProxy: boolean
}

/**
 * The network from which a request comes, for counting: an IPv4 address, or the /64 of an IPv6 address, since one
 * household or one machine has a whole /64 to choose addresses from. What came before the last entry of
 * X-Forwarded-For was written by whoever asked, and is not believed.
 */
export function networkOf({ remote, forwarded, trustProxy }: Asked): string {
  const last = trustProxy ? plain(forwarded?.split(',').at(-1) ?? '') : ''
  return network(last) ?? network(plain(remote ?? '')) ?? 'unknown'
}

/** Without port, brackets and zone. */
function plain(text: string): string {
  const address = text.trim()
  const inner = /^\[([^\]]+)\]/.exec(address)?.[1] ?? /^(\d+(?:\.\d+){3}):\d+$/.exec(address)?.[1] ?? address
  return inner.replace(/%.*$/, '')
}

function network(address: string): string | null {
  if (isIPv4(address)) return address
  if (!isIPv6(address)) return null
  const groups = groupsOf(address)
  // IPv4 that came in over an IPv6 socket, ::ffff:0:0/96 (RFC 4291, 2.5.5.2).
  if (groups.slice(0, 5).every(group => group === 0) && groups[5] === 0xFFFF) {
    return [groups[6]! >> 8, groups[6]! & 255, groups[7]! >> 8, groups[7]! & 255].join('.')
  }
  return `${groups.slice(0, 4).map(group => group.toString(16)).join(':')}::/64`
}

/** The eight groups of an IPv6 address in any of its spellings. */
function groupsOf(address: string): number[] {
  // URL writes each address in one way (RFC 5952), dotted quads among them.
  const [head = '', tail] = new URL(`http://[${address}]`).hostname.slice(1, -1).split('::')
  const groups = (text: string) => text ? text.split(':').map(group => Number.parseInt(group, 16)) : []
  const [before, after] = [groups(head), groups(tail ?? '')]
  return [...before, ...Array.from({ length: 8 - before.length - after.length }, () => 0), ...after]
}
