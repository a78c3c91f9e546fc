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
