import { parseArgs } from 'node:util';
import { z } from 'zod';
import { startResendFake, startStripeFake } from './start';

const HELP = `Starts a local stand-in: node --import tsx fakes/server.ts <stripe|resend> [options]
  --port N              port on 127.0.0.1 (0: any free one)
  --state FILE          where state is kept; without it nothing outlives the process
  --webhook URL         where every event goes, on this machine
  --webhook-secret S    the secret that signs them (for resend: whsec_ and a base64 key)
  --public-url URL      stripe: where people open the pay page
  --studio NAME         stripe: the name on the pay page when a session brings none
  --settle-after N      stripe: seconds until a delayed payment arrives by itself
  --until-stdin-ends    leave when the standard input closes, so as not to outlive the program that started this`;

const flagsSchema = z.object({
  port: z.coerce.number().int().min(0).max(65535).default(0),
  state: z.string().min(1).optional(),
  webhook: z.url().optional(),
  'webhook-secret': z.string().min(1).optional(),
  'public-url': z.url().optional(),
  studio: z.string().min(1).optional(),
  'settle-after': z.coerce.number().min(0).optional(),
  'until-stdin-ends': z.boolean().default(false),
});

type Flags = z.infer<typeof flagsSchema>;

/** Reads the command line; leaves with the help text when it makes no sense. */
function readCommand(): { service: 'stripe' | 'resend'; flags: Flags } {
  const kind = (name: string) => ({ type: name === 'until-stdin-ends' ? 'boolean' : 'string' }) as const;
  const options = Object.fromEntries(Object.keys(flagsSchema.shape).map((name) => [name, kind(name)]));
  try {
    const { values, positionals } = parseArgs({ options, allowPositionals: true });
    const service = z.enum(['stripe', 'resend']).parse(positionals[0]);
    const flags = flagsSchema.parse(values);
    if (Boolean(flags.webhook) !== Boolean(flags['webhook-secret'])) {
      throw new Error('--webhook and --webhook-secret belong together.');
    }
    return { service, flags };
  } catch (error) {
    const why = error instanceof z.ZodError ? z.prettifyError(error) : (error as Error).message;
    console.error(`${why}\n\n${HELP}`);
    process.exit(2);
  }
}

async function start(): Promise<void> {
  const { service, flags } = readCommand();
  const { webhook: url, 'webhook-secret': secret } = flags;
  const options = {
    port: flags.port,
    stateFile: flags.state,
    webhook: url && secret ? { url, secret } : undefined,
    publicUrl: flags['public-url'],
    studio: flags.studio,
    settleAfterSeconds: flags['settle-after'],
  };
  const running = service === 'stripe' ? await startStripeFake(options) : await startResendFake(options);
  console.log(`The ${service} stand-in is ready: ${running.url}`);
  let leaving = false;
  const leave = (): void => {
    if (leaving) return;
    leaving = true;
    void running.close().then(() => process.exit(0));
  };
  process.on('SIGTERM', leave);
  process.on('SIGINT', leave);
  if (flags['until-stdin-ends']) process.stdin.on('close', leave).resume();
}

start().catch((error: unknown) => {
  console.error(error instanceof Error ? error.message : error);
  process.exit(1);
});
