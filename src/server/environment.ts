import { z } from 'zod';

const blankIsAbsent = (value: unknown) => (typeof value === 'string' && value.trim() === '' ? undefined : value);
const optional = <T extends z.ZodType>(rule: T) => z.preprocess(blankIsAbsent, rule.optional());
const portRule = 'must be a whole number from 1024 to 65532; it and the next three ports are used';
const basePort = z.coerce
  .number({ error: portRule })
  .refine((port) => Number.isInteger(port) && port >= 1024 && port <= 65_532, {
    error: portRule,
  });
const webAddress = z.url({ protocol: /^https?$/, error: 'must be a web address such as https://studio.example' });

/** The environment as the program reads it. Every setting may be absent or blank. */
export const configSchema = z.object({
  PORT: optional(basePort),
  HOST: optional(z.string()),
  PUBLIC_URL: optional(webAddress),
  DATABASE_URL: optional(z.url({ protocol: /^postgres(ql)?$/, error: 'must begin with postgres://' })),
  LOCAL_DATABASE_PASSWORD: optional(z.string()),
  AUTH_SECRET: optional(z.string().min(32, { error: 'must have at least 32 characters' })),
  STRIPE_SECRET_KEY: optional(z.string().regex(/^(sk|rk)_(test|live)_/, { error: 'must begin with sk_ or rk_' })),
  STRIPE_WEBHOOK_SECRET: optional(z.string().startsWith('whsec_', { error: 'must begin with whsec_' })),
  RESEND_API_KEY: optional(z.string().startsWith('re_', { error: 'must begin with re_' })),
  RESEND_WEBHOOK_SECRET: optional(z.string().startsWith('whsec_', { error: 'must begin with whsec_' })),
  OWNER_EMAIL: optional(z.email({ error: 'must be one mail address' })),
  MAIL_FROM: optional(z.string().includes('@', { error: 'must hold a mail address' })),
  POURWRIGHT_DATA: optional(z.string()),
  TRUSTED_PROXIES: optional(z.string()),
  LOG_LEVEL: optional(z.enum(['debug', 'info', 'warn', 'error', 'silent'])),
});

export type Environment = z.infer<typeof configSchema>;
