import { isIPv6 } from 'node:net';

/**
 * The true client address: the connection's own, or, behind a known number of proxies, the entry
 * of X-Forwarded-For that the outermost of them wrote. What a client put there itself is never believed.
 *
 * @param socketAddress address of the connection
 * @param forwardedFor the X-Forwarded-For header, if any
 * @param hops how many proxies in front append to it
 */
export function clientAddress(socketAddress: string, forwardedFor: string | null | undefined, hops: number): string {
  if (hops === 0 || !forwardedFor) return socketAddress;
  const entries = forwardedFor.split(',').map((e) => e.trim());
  return entries[entries.length - hops] || socketAddress;
}

/** Whom tries are counted for: an IPv4 address, or the /64 of an IPv6 one, since one subscriber has all of it. */
export function networkOf(address: string): string {
  const plain = address.split('%')[0]!.replace(/^::ffff:(?=\d+\.)/i, '');
  if (!isIPv6(plain) || plain.includes('.')) return plain;
  const [head = '', tail] = plain.split('::');
  const before = head === '' ? [] : head.split(':');
  const after = tail ? tail.split(':') : [];
  const groups = tail === undefined ? before : [...before, ...new Array<string>(8 - before.length - after.length).fill('0'), ...after];
  return `${groups.slice(0, 4).map((g) => Number.parseInt(g, 16).toString(16)).join(':')}::/64`;
}
