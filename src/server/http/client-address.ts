import { isIPv6 } from 'node:net';

/** The first four groups of an IPv6 address, of which `::` may hide some. */
function network(address: string): string {
  const [head = '', tail] = address.split('::');
  const groups = (part: string): string[] => (part === '' ? [] : part.split(':'));
  const first = groups(head);
  const hidden = tail === undefined ? 0 : Math.max(0, 8 - first.length - groups(tail).length);
  return [...first, ...Array.from({ length: hidden }, () => '0'), ...groups(tail ?? '')].slice(0, 4).map((group) => Number.parseInt(group, 16).toString(16)).join(':');
}

/**
 * Who is counted for an address: itself, or of IPv6 its network (64 bits), for whoever has one address of a network has them all.
 * @param address as our front or a socket says it
 */
export function countedAddress(address: string): string {
  const bare = address.replace(/%.*$/, '');
  const wrapped = /^::ffff:(\d+\.\d+\.\d+\.\d+)$/i.exec(bare)?.[1];
  if (wrapped !== undefined) return wrapped;
  return isIPv6(bare) ? `${network(bare)}::/64` : address;
}

/** The network address of whoever asks, as tries are counted (a client's own header of this name is overwritten in our front). */
export const clientAddress = (request: Request): string => countedAddress(request.headers.get('x-client-address') ?? 'unknown');
