import type { Environment } from './environment';

/** What a studio that takes real money must set; the demo sets none of it. */
const productionSettings = [
  'DATABASE_URL',
  'PUBLIC_URL',
  'AUTH_SECRET',
  'STRIPE_SECRET_KEY',
  'STRIPE_WEBHOOK_SECRET',
  'RESEND_API_KEY',
  'RESEND_WEBHOOK_SECRET',
  'MAIL_FROM',
] as const satisfies (keyof Environment)[];

/** Any one of these says: this is no demo. The rest may also be set to change a demo's own value. */
const decidingSettings = ['DATABASE_URL', 'PUBLIC_URL', 'STRIPE_SECRET_KEY', 'RESEND_API_KEY'] as const;

/**
 * Says in sentences why these settings do not fit together; an empty list means they do.
 * The demo and the real services never mix: a real card must not be charged from a demo database,
 * nor a demo mail be sent to a real address.
 */
export function contradictions(settings: Environment): string[] {
  const given = decidingSettings.filter((name) => settings[name]);
  if (given.length === 0) return demoProblems(settings);
  return [...missingSettings(settings, given), ...demoKeys(settings), ...addressProblems(settings)];
}

function missingSettings(settings: Environment, given: readonly string[]): string[] {
  const missing = productionSettings.filter((name) => !settings[name]);
  if (missing.length === 0) return [];
  return [
    `${given.join(', ')} ${given.length === 1 ? 'is' : 'are'} set, so this is a studio with real services; ` +
      `${missing.join(', ')} must be set as well. Leave all of them out to run the demo.`,
  ];
}

function demoProblems(settings: Environment): string[] {
  if (!settings.HOST || ['localhost', '127.0.0.1'].includes(settings.HOST)) return [];
  return ['HOST opens the demo to other machines, but its sign-in is for trying out only; leave HOST out.'];
}

function demoKeys(settings: Environment): string[] {
  const problems: string[] = [];
  if (settings.STRIPE_SECRET_KEY === 'sk_test_pourwright') {
    problems.push('STRIPE_SECRET_KEY is the key of the local pay page; take one from your Stripe account.');
  }
  if (settings.RESEND_API_KEY === 're_pourwright') {
    problems.push('RESEND_API_KEY is the key of the local inbox; take one from your Resend account.');
  }
  return problems;
}

function addressProblems(settings: Environment): string[] {
  if (!settings.PUBLIC_URL) return [];
  const url = new URL(settings.PUBLIC_URL);
  const problems: string[] = [];
  const local = ['localhost', '127.0.0.1', '[::1]'].includes(url.hostname);
  if (url.protocol === 'http:' && settings.STRIPE_SECRET_KEY?.includes('_live_')) {
    problems.push('STRIPE_SECRET_KEY is a live key, but PUBLIC_URL begins with http://; real money needs https://.');
  } else if (url.protocol === 'http:' && !local) {
    problems.push('PUBLIC_URL begins with http:// and is not this machine; sign-in links need https://.');
  }
  if (url.pathname !== '/' || url.search || url.hash) {
    problems.push('PUBLIC_URL must be an origin alone, such as https://studio.example, without a path.');
  }
  return problems;
}
