import { describe, expect, it } from 'vitest'
import { addressOf } from './address-of.js'

describe('addressOf', () => {
  // constructed, with the documentation ranges of RFC 5737 and RFC 3849
  it.each([
    ['192.0.2.7', '192.0.2.7'],
    ['::ffff:192.0.2.7', '192.0.2.7'],
    ['2001:db8:1:2:3:4:5:6', '2001:db8:1:2::/64'],
    ['2001:DB8:1:2::9', '2001:db8:1:2::/64'],
    ['2001:db8::1', '2001:db8:0:0::/64'],
    ['2001:0db8:0001:0002:0000:0000:0000:0009', '2001:db8:1:2::/64'],
    ['::1', '0:0:0:0::/64'],
    ['fe80::1%eth0', 'fe80:0:0:0::/64'],
    ['unknown', 'unknown'],
  ])('counts %s as %s', (ip, address) => {
    expect(addressOf(ip)).toBe(address)
  })
})
