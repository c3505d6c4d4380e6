import { describe, expect, it } from 'vitest';
import { isOpenInternet } from '~/server/services/outside-text.ts';

describe('an address of the open internet', () => {
  it.each(['8.8.8.8', '1.1.1.1', '172.15.255.255', '172.32.0.1', '100.63.255.255', '100.128.0.1', '192.167.1.1', '223.255.255.1', '2606:4700::1111', '2a00:1450:4001::1'])('%s is one', (address) => expect(isOpenInternet(address)).toBe(true));

  // IANA's registries of special-purpose addresses.
  it.each([
    '0.0.0.0', '10.0.0.1', '100.64.0.1', '100.127.255.255', '127.0.0.1', '127.255.255.255', '169.254.169.254', '172.16.0.1', '172.31.255.255', '192.0.0.1', '192.0.2.1', '192.168.0.1', '198.18.0.1', '198.51.100.1', '203.0.113.1',
    '224.0.0.1', '240.0.0.1', '255.255.255.255', '::', '::1', '::ffff:127.0.0.1', '::ffff:8.8.8.8', '64:ff9b::7f00:1', 'fc00::1', 'fd12::1', 'fe80::1', 'ff02::1', '100::1', '2001:db8::1', '2001::1', '2002:7f00:1::', 'localhost', '',
  ])('%s is none', (address) => expect(isOpenInternet(address)).toBe(false));
});
