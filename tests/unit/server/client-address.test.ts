import { describe, expect, it } from 'vitest';
import { clientAddress, countedAddress } from '~/server/http/client-address.ts';

describe('who is counted for an address', () => {
  it.each([
    ['203.0.113.7', '203.0.113.7'],
    ['::ffff:203.0.113.7', '203.0.113.7'],
    ['2001:db8:1:2:3:4:5:6', '2001:db8:1:2::/64'],
    ['2001:db8:1:2::9', '2001:db8:1:2::/64'],
    ['2001:0DB8:0001:0002:ffff::', '2001:db8:1:2::/64'],
    ['2001:db8::1', '2001:db8:0:0::/64'],
    ['::1', '0:0:0:0::/64'],
    ['fe80::1%eth0', 'fe80:0:0:0::/64'],
    ['unknown', 'unknown'],
  ])('%s is %s', (address, counted) => expect(countedAddress(address)).toBe(counted));

  it('is one for all addresses of a network, and another for the next', () => {
    const of = (address: string): string => clientAddress(new Request('http://x/', { headers: { 'x-client-address': address } }));
    expect(of('2001:db8:1:2:aaaa::1')).toBe(of('2001:db8:1:2:bbbb:cccc:dddd:eeee'));
    expect(of('2001:db8:1:3::1')).not.toBe(of('2001:db8:1:2::1'));
  });
});
