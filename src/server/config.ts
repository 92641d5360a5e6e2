import { resolve } from 'node:path';
import { contradictions } from './config-rules';
import { configSchema, type Environment } from './environment';

/** Settings as the rest of the program uses them; every path is absolute, every URL without a closing slash. */
export interface Config {
  /** True when the fakes and the local database stand in for the real services. */
  demo: boolean;
  port: number;
  host: string;
  /** Where people reach the studio; links in mails and at Stripe are built from it and from nothing else. */
  publicUrl: string;
  databaseUrl: string;
  databasePort: number;
  authSecret: string;
  stripeSecretKey: string;
  stripeWebhookSecret: string;
  /** Where the Stripe SDK connects to; absent means the real service. */
  stripeApi?: { host: string; port: number; protocol: 'http' };
  resendApiKey: string;
  resendWebhookSecret: string;
  /** Where the Resend SDK connects to; absent means the real service. */
  resendBaseUrl?: string;
  mailFrom: string;
  dataFolder: string;
  uploadsFolder: string;
  contentFolder: string;
  /** Socket addresses whose X-Forwarded-For is believed. */
  trustedProxies: string[];
  logLevel: 'debug' | 'info' | 'warn' | 'error' | 'silent';
}

/** Settings that cannot be used, told in sentences for the person who set them. */
export class ConfigError extends Error {
  override readonly name = 'ConfigError';

  constructor(readonly problems: string[]) {
    super(`The settings cannot be used:\n${problems.map((problem) => `  - ${problem}`).join('\n')}`);
  }
}

/**
 * Reads the settings from `env`, fills in what the demo needs, and refuses contradictions.
 *
 * @param root the project's folder, from which relative paths are taken
 * @throws ConfigError naming every setting that is wrong
 */
export function readConfig(env: NodeJS.ProcessEnv = process.env, root = process.cwd()): Config {
  const parsed = configSchema.safeParse(env);
  if (!parsed.success) {
    throw new ConfigError(parsed.error.issues.map((issue) => `${issue.path.join('.')} ${issue.message}.`));
  }
  const problems = contradictions(parsed.data);
  if (problems.length > 0) throw new ConfigError(problems);
  const settings = parsed.data;
  const port = settings.PORT ?? 4321;
  const dataFolder = resolve(root, settings.POURWRIGHT_DATA ?? '.data');
  return {
    port,
    host: settings.HOST ?? '127.0.0.1',
    databasePort: port + 3,
    dataFolder,
    uploadsFolder: resolve(dataFolder, 'uploads'),
    contentFolder: resolve(root, 'src/content'),
    trustedProxies: settings.TRUSTED_PROXIES?.split(/[\s,]+/).filter(Boolean) ?? [],
    logLevel: settings.LOG_LEVEL ?? 'info',
    ...(settings.DATABASE_URL ? realServices(settings) : demoServices(settings, port)),
  };
}

type Services = Pick<
  Config,
  | 'demo'
  | 'publicUrl'
  | 'databaseUrl'
  | 'authSecret'
  | 'stripeSecretKey'
  | 'stripeWebhookSecret'
  | 'stripeApi'
  | 'resendApiKey'
  | 'resendWebhookSecret'
  | 'resendBaseUrl'
  | 'mailFrom'
>;

function realServices(settings: Environment): Services {
  return {
    demo: false,
    publicUrl: new URL(present(settings.PUBLIC_URL)).origin,
    databaseUrl: present(settings.DATABASE_URL),
    authSecret: present(settings.AUTH_SECRET),
    stripeSecretKey: present(settings.STRIPE_SECRET_KEY),
    stripeWebhookSecret: present(settings.STRIPE_WEBHOOK_SECRET),
    resendApiKey: present(settings.RESEND_API_KEY),
    resendWebhookSecret: present(settings.RESEND_WEBHOOK_SECRET),
    mailFrom: present(settings.MAIL_FROM),
  };
}

function demoServices(settings: Environment, port: number): Services {
  const password = settings.LOCAL_DATABASE_PASSWORD;
  const login = password ? `pourwright:${encodeURIComponent(password)}` : 'pourwright';
  return {
    demo: true,
    publicUrl: `http://localhost:${port}`,
    databaseUrl: `postgres://${login}@127.0.0.1:${port + 3}/pourwright`,
    authSecret: settings.AUTH_SECRET ?? 'demo-only-secret-that-never-leaves-this-machine',
    stripeSecretKey: 'sk_test_pourwright',
    stripeWebhookSecret: settings.STRIPE_WEBHOOK_SECRET ?? 'whsec_pourwright',
    stripeApi: { host: '127.0.0.1', port: port + 1, protocol: 'http' },
    resendApiKey: 're_pourwright',
    resendWebhookSecret: settings.RESEND_WEBHOOK_SECRET ?? 'whsec_cG91cndyaWdodC1kZW1v',
    resendBaseUrl: `http://127.0.0.1:${port + 2}`,
    mailFrom: settings.MAIL_FROM ?? 'Marrowfen Casting House <studio@example.org>',
  };
}

function present(value: string | undefined): string {
  if (value === undefined) throw new Error('contradictions() let a half-filled environment through');
  return value;
}
