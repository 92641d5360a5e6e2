import type { IncomingMessage } from 'node:http';
import type { Config } from '../../server/config';

/** The host names this server answers for: its public one, and this machine's for whoever watches its health. */
export function knownHosts(config: Config): ReadonlySet<string> {
  const local = ['localhost', '127.0.0.1', '[::1]'].map((name) => `${name}:${config.port}`);
  return new Set([new URL(config.publicUrl).host, ...local]);
}

/**
 * The address of the person's end: that of the socket, or, behind a proxy we trust, the last hop that
 * proxy saw. What a stranger writes into X-Forwarded-For counts for nothing.
 */
export function clientAddress(req: IncomingMessage, config: Config): string {
  const peer = (req.socket.remoteAddress ?? '').replace(/^::ffff:/, '');
  if (!config.trustedProxies.includes(peer)) return peer;
  const hops = String(req.headers['x-forwarded-for'] ?? '').split(',');
  return hops.map((hop) => hop.trim()).findLast((hop) => hop && !config.trustedProxies.includes(hop)) ?? peer;
}

/** Replaces every forwarding header by what we know, so that Astro's address and URL are right and cannot be forged. */
export function normaliseForwarding(req: IncomingMessage, config: Config): void {
  const publicUrl = new URL(config.publicUrl);
  const address = clientAddress(req, config);
  for (const name of Object.keys(req.headers)) {
    if (name === 'forwarded' || name.startsWith('x-forwarded-')) delete req.headers[name];
  }
  req.headers['x-forwarded-for'] = address;
  if (req.headers.host === publicUrl.host) req.headers['x-forwarded-proto'] = publicUrl.protocol.slice(0, -1);
}
