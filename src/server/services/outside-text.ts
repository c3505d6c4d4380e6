import { lookup, type LookupAddress, type LookupOptions } from 'node:dns';
import { request as requestPlain, type IncomingMessage } from 'node:http';
import { request as requestSecure } from 'node:https';
import { BlockList, isIP } from 'node:net';
import { env } from '../env.ts';
import { invalid, type Refusal } from '../errors.ts';

/** What is read of an address that a person gave: at most so many bytes, in so many ms, over so many redirects. */
export const outsideLimits = { bytes: 900_000, ms: 10_000, redirects: 3 } as const;

// Networks that are nobody's on the open internet: IANA's registries of special-purpose addresses, IPv4 and IPv6, and multicast.
const closed = new BlockList();
for (const net of ['0.0.0.0/8', '10.0.0.0/8', '100.64.0.0/10', '127.0.0.0/8', '169.254.0.0/16', '172.16.0.0/12', '192.0.0.0/24', '192.0.2.0/24', '192.88.99.0/24', '192.168.0.0/16', '198.18.0.0/15', '198.51.100.0/24', '203.0.113.0/24', '224.0.0.0/3']) {
  const [address = '', bits] = net.split('/');
  closed.addSubnet(address, Number(bits), 'ipv4');
}
for (const net of ['2001::/23', '2001:db8::/32', '2002::/16', '3fff::/20']) {
  const [address = '', bits] = net.split('/');
  closed.addSubnet(address, Number(bits), 'ipv6');
}
const worldwide = new BlockList();
worldwide.addSubnet('2000::', 3, 'ipv6');

/** Whether an IP address belongs to the open internet; forms that wrap an IPv4 address in an IPv6 one do not. */
export function isOpenInternet(address: string): boolean {
  if (isIP(address) === 4) return !closed.check(address, 'ipv4');
  return isIP(address) === 6 && worldwide.check(address, 'ipv6') && !closed.check(address, 'ipv6');
}

const refusal = (message: string): Refusal => invalid([{ path: 'address', message }]);
const notOutside = (): Refusal => refusal('This address does not lead to the open internet. Give the one your calendar offers for sharing.');
const noAnswer = (): Refusal => refusal('Nothing that can be read is at this address. Open it in your browser to see whether it is right.');

/** The host and port that an operator allows inside their own network. */
const allowedInside = (url: URL): boolean => env().INNER_CALENDAR_HOSTS.split(',').includes(url.host);

/**
 * Understands an address that a person gave: `webcal:` is `https:` by another name, and no name is written in front of it.
 * @throws Refusal `invalid` for what is no address of the open internet
 */
export function outsideUrl(typed: string): URL {
  const written = /^[a-z][a-z0-9+.-]*:/i.test(typed.trim()) ? typed.trim().replace(/^webcals?:/i, 'https:') : `https://${typed.trim()}`;
  const url = URL.canParse(written) ? new URL(written) : null;
  if (!url || url.href.length > 2000) throw refusal('This is no web address. It begins with https:// or webcal:// and often ends in .ics.');
  if (url.protocol !== 'https:' && url.protocol !== 'http:') throw refusal('The address begins with https://, http:// or webcal://.');
  if (url.username !== '' || url.password !== '') throw refusal('An address with a name and password in it is not read. Use the secret address that your calendar offers.');
  if (allowedInside(url)) return url;
  const port = Number(url.port || (url.protocol === 'https:' ? 443 : 80));
  const host = url.hostname.replace(/^\[|\]$|\.$/g, '');
  if ((port < 1024 && port !== 80 && port !== 443) || (isIP(host) !== 0 && !isOpenInternet(host)) || (isIP(host) === 0 && !host.includes('.'))) throw notOutside();
  return url;
}

type Found = (error: Error | null, address: string | LookupAddress[], family?: number) => void;

/** Finds a name's addresses and lets none through that is not of the open internet: what is checked is what is then connected to. */
function openLookup(hostname: string, options: LookupOptions, found: Found): void {
  lookup(hostname, { ...options, all: true }, (error, addresses) => {
    const [first] = addresses ?? [];
    if (error || !first) return found(error ?? new Error(`${hostname} has no address`), []);
    if (addresses.some(({ address }) => !isOpenInternet(address))) return found(notOutside(), []);
    if (options.all) found(null, addresses);
    else found(null, first.address, first.family);
  });
}

const answerOf = (url: URL, signal: AbortSignal): Promise<IncomingMessage> =>
  new Promise((resolve, reject) => {
    const headers = { accept: 'text/calendar, text/plain;q=0.5, */*;q=0.1', 'accept-encoding': 'identity', 'user-agent': 'Skidway' };
    const options = { headers, signal, agent: false, ...(allowedInside(url) ? {} : { lookup: openLookup }) } as const;
    (url.protocol === 'https:' ? requestSecure : requestPlain)(url, options, resolve).once('error', reject).end();
  });

async function textOf(answer: IncomingMessage): Promise<string> {
  const parts: Buffer[] = [];
  let bytes = 0;
  for await (const part of answer as AsyncIterable<Buffer>) {
    bytes += part.length;
    if (bytes > outsideLimits.bytes) {
      answer.destroy();
      throw refusal(`This calendar is larger than ${outsideLimits.bytes / 1000} kB. Share the coming months only.`);
    }
    parts.push(part);
  }
  return Buffer.concat(parts).toString('utf8');
}

/**
 * Reads the text at an address that a person gave, without being led into our own network: by number, by name, or by a redirect.
 * @param ms how long all of it may take
 * @throws Refusal `invalid` at `address` in words for that person
 */
export async function outsideText(address: string, ms: number = outsideLimits.ms): Promise<string> {
  const signal = AbortSignal.timeout(ms);
  let url = outsideUrl(address);
  try {
    for (let turn = 0; turn <= outsideLimits.redirects; turn += 1) {
      const answer = await answerOf(url, signal);
      const status = answer.statusCode ?? 0;
      if (status === 200) return await textOf(answer);
      answer.resume();
      const to = answer.headers.location;
      if (status < 300 || status > 399 || to === undefined) throw noAnswer();
      url = outsideUrl(new URL(to, url).href);
    }
    throw refusal('This address leads on and on. Give the one it ends at.');
  } catch (error) {
    if (error instanceof Error && error.name === 'Refusal') throw error;
    if (signal.aborted) throw refusal(`This address did not answer within ${ms / 1000} s.`);
    throw noAnswer();
  }
}
