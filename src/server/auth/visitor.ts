import { isIP } from 'node:net';

/** Who is asking, as far as limits need to know. */
export interface Visitor {
  /** What limits count by: see `countedAddress`. */
  client: string;
  /** Value of the known-browser cookie. */
  knownBrowser?: string;
}

/**
 * The network address as limits count it. `address` is Astro's `clientAddress`: our front server has put the socket's
 * address there, or the last hop of a trusted proxy, whatever X-Forwarded-For came in. An IPv6 address counts by its
 * /64, the smallest block a household is given, so that a new address in it is no new allowance.
 */
export function countedAddress(address: string): string {
  const plain = address.replace(/^::ffff:(?=[\d.]+$)/i, '');
  return isIP(plain) === 6 ? firstHalf(plain) : plain;
}

function firstHalf(address: string): string {
  const [head = '', tail] = (address.split('%', 1)[0] ?? '').split('::');
  const front = head ? head.split(':') : [];
  const back = tail ? tail.split(':') : [];
  const gap = tail === undefined ? 0 : 8 - front.length - back.length;
  const groups = [...front, ...Array.from({ length: gap }, () => '0'), ...back].slice(0, 4);
  return `${groups.map((group) => Number.parseInt(group, 16).toString(16)).join(':')}::/64`;
}
