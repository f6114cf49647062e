/** The part of a network address that one customer holds: limits count by it, so that nobody has millions of addresses to try from. */
import { isIPv6 } from 'node:net'

const MAPPED = /^::ffff:(\d+\.\d+\.\d+\.\d+)$/i
const GROUPS = 8
/** An IPv6 customer is given a whole /64 at least (RFC 6177); the lower half is theirs to choose (RFC 4291, 2.5.1). */
const NETWORK_GROUPS = 4

export function networkOf(address: string): string {
  const mapped = MAPPED.exec(address)?.[1]
  if (mapped) return mapped
  const withoutZone = address.split('%')[0] ?? ''
  if (!isIPv6(withoutZone)) return address
  // The URL parser writes every spelling of an address in one way (WHATWG URL, IPv6 serializer).
  const [head = '', tail = ''] = new URL(`http://[${withoutZone}]`).hostname.slice(1, -1).split('::')
  const [before, after] = [head, tail].map((part) => part.split(':').filter(Boolean)) as [string[], string[]]
  const zeros = Array.from({ length: GROUPS - before.length - after.length }, () => '0')
  return `${[...before, ...zeros, ...after].slice(0, NETWORK_GROUPS).join(':')}::/64`
}
