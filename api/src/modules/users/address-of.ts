import { isIP } from 'node:net'

/**
 * What counts as one address when tries are counted: an IPv4 address, or the /64 network of an IPv6 one, which a
 * single line is given whole.
 */
export function addressOf(ip: string): string {
  const mapped = /^::ffff:(\d+\.\d+\.\d+\.\d+)$/i.exec(ip)?.[1]
  if (mapped) return mapped
  const plain = ip.split('%', 1)[0] ?? ip
  if (isIP(plain) !== 6) return plain
  const [head = '', tail] = plain.toLowerCase().split('::')
  const left = head === '' ? [] : head.split(':')
  const right = tail ? tail.split(':') : []
  const zeros = tail === undefined ? 0 : Math.max(0, 8 - left.length - right.length)
  const groups = [...left, ...Array.from({ length: zeros }, () => '0'), ...right]
  return `${groups
    .slice(0, 4)
    .map((group) => group.replace(/^0+(?=.)/, ''))
    .join(':')}::/64`
}
