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

/**
 * The whole Content-Security-Policy of an answer.
 *
 * @param own the policy that the page or file brought along
 */
export function contentPolicy(own: string | undefined, type: string, framing: string): string {
  const page = type.startsWith('text/html');
  if (own) return page ? `${own.replace(/;\s*$/, '')}; ${framing}` : own;
  return page ? `default-src 'self'; object-src 'none'; base-uri 'self'; ${framing}` : "default-src 'none'";
}
