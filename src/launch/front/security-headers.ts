import type { Config } from '../../server/config';

/** The headers every answer carries, whatever made it. */
export function commonHeaders(config: Config): Record<string, string> {
  return {
    'x-content-type-options': 'nosniff',
    'x-frame-options': 'DENY',
    // "same-origin" keeps sign-in links out of other sites' logs and still sends Origin with our own forms.
    'referrer-policy': 'same-origin',
    'permissions-policy': 'camera=(self), microphone=(), geolocation=(), payment=(), usb=(), interest-cohort=()',
    'cross-origin-opener-policy': 'same-origin',
    'cross-origin-resource-policy': 'same-origin',
    ...(config.publicUrl.startsWith('https:') && { 'strict-transport-security': 'max-age=31536000' }),
  };
}

/** What a page's own policy cannot say in a `<meta>`; a form may lead to the pay page, by redirect. */
export function framingPolicy(config: Config): string {
  const payPage = config.stripeApi
    ? `http://localhost:${config.stripeApi.port} http://127.0.0.1:${config.stripeApi.port}`
    : 'https://checkout.stripe.com';
  return `frame-ancestors 'none'; form-action 'self' ${payPage}`;
}

// No answer may be framed or given another base, a picture or a file no more than a page.
const NEVER = "base-uri 'none'; frame-ancestors 'none'";

/**
 * The whole Content-Security-Policy of an answer.
 *
 * @param own the policy that the page or file brought along
 */
export function contentPolicy(own: string | undefined, type: string, framing: string): string {
  if (!type.startsWith('text/html')) return `${own ?? "default-src 'none'"}; ${NEVER}`;
  return `${own?.replace(/;\s*$/, '') ?? "default-src 'self'; object-src 'none'; base-uri 'none'"}; ${framing}`;
}

/**
 * The policy of a built file. A built page carries its own in a `<meta>`, with the hashes of its scripts; as a header
 * it holds from the first byte. A script's policy binds the worker it starts, which imports its parts.
 */
export function staticPolicy(type: string, body: Buffer, framing: string): string {
  if (type.startsWith('text/html')) {
    return contentPolicy(POLICY_META.exec(body.toString('utf8'))?.[1], type, framing);
  }
  const own = type.startsWith('text/javascript')
    ? "default-src 'self'"
    : "default-src 'none'; style-src 'unsafe-inline'";
  return contentPolicy(own, type, framing);
}

const POLICY_META = /<meta http-equiv="content-security-policy" content="([^"]*)"/i;
