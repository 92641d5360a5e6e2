import { and, count, eq } from 'drizzle-orm';
import { uuidv7 } from 'uuidv7';
import { demoRates } from '../demo/rates';
import { tray } from '../server/db/schema/commissions';
import { invitations, users } from '../server/db/schema/people';
import { rateVersions } from '../server/db/schema/studio';
import type { Config } from '../server/config';
import { closeServices, createServices, type Services } from '../server/services';

const NOBODY =
  'Nobody owns this studio yet. Set OWNER_EMAIL to the address of its owner and start again; that address then signs in as owner.';
const STARTING_RATES =
  'The rates in force are starting values, not this studio’s own. Look through every figure on the page Rates and save them before you send a quote.';

/**
 * Makes a real studio's empty database ready: its first owner is invited, and starting rates are put in
 * force with a note in the tray that they have to be looked through. Later starts change nothing.
 *
 * @throws Error with a sentence for the person starting it, when there is no owner and none is named
 */
export async function firstRun(services: Services, ownerEmail: string | undefined): Promise<string> {
  const { db } = services;
  const done: string[] = [];
  const [owners] = await db
    .select({ n: count() })
    .from(users)
    .where(and(eq(users.role, 'owner'), eq(users.active, true)));
  const [invited] = await db.select({ n: count() }).from(invitations).where(eq(invitations.role, 'owner'));
  if (!owners?.n && !invited?.n) {
    if (!ownerEmail) throw new Error(NOBODY);
    await db
      .insert(invitations)
      .values({ email: ownerEmail.trim().toLowerCase(), name: ownerEmail.trim(), role: 'owner' });
    done.push(`${ownerEmail} may sign in as owner`);
  }
  const [rates] = await db.select({ n: count() }).from(rateVersions);
  if (!rates?.n) {
    const createdAt = services.now();
    await db.transaction(async (tx) => {
      await tx
        .insert(rateVersions)
        .values({ id: uuidv7(), rates: { ...demoRates, version: 'starting-values' }, createdAt });
      await tx.insert(tray).values({
        id: uuidv7(),
        problem: { code: 'stale', message: STARTING_RATES },
        data: { page: '/studio/rates' },
        createdAt,
      });
    });
    done.push('starting rates are in force');
  }
  return done.join(', ') || 'it has its owner and its rates';
}

/** The first run over services of its own, closed again afterwards. */
export async function prepareRealStudio(config: Config, progress: (words: string) => void): Promise<void> {
  const services = createServices({ ...config, logLevel: 'warn' });
  try {
    progress(await firstRun(services, process.env['OWNER_EMAIL']));
  } finally {
    await closeServices(services);
  }
}
