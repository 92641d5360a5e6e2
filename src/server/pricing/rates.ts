import { readdir, readFile, stat } from 'node:fs/promises';
import { join } from 'node:path';
import { and, count, desc, gt, inArray, lte, sql } from 'drizzle-orm';
import { uuidv7 } from 'uuidv7';
import type { RateCard } from '../../commission/pricing/estimate-request';
import { formSchema, pricedFormSchema, type PricedForm } from '../../commission/pricing/form';
import { may, type Actor } from '../../commission/permissions';
import { done, refuse, type Outcome } from '../../commission/problem';
import { studioRatesSchema, type StudioRates } from '../../commission/pricing/rates';
import { applyRates, type RatesForm } from '../../commission/pricing/rates-form';
import type { Db } from '../db/client';
import { attempts } from '../db/schema/making';
import { rateVersions } from '../db/schema/studio';
import type { Services } from '../services';

type Reader = Pick<Services, 'db' | 'config'>;

const FORMS = new Map<string, { seen: string; forms: PricedForm[] }>();

/**
 * The rates in force and the priced part of every form: what estimates are reckoned from. Forms are read again
 * when a file under `<content>/forms` changes.
 *
 * @throws when no rates were ever set, or when a form's file is not a form: both are faults of the installation
 */
export async function currentRateCard({ db, config }: Reader): Promise<RateCard> {
  const rates = await currentRates(db);
  return { rates, forms: await readForms(join(config.contentFolder, 'forms')) };
}

/**
 * The rates in force: the newest version, its families' pours carried on with the castings that were broken out at the
 * bench since. Those are told in the version's name: "2026-12-01.1+3" is that version and three pours.
 */
export async function currentRates(db: Db): Promise<StudioRates> {
  const newest = await newestVersion(db);
  return withPours(newest.rates, await countPours(db, newest.createdAt));
}

async function newestVersion(db: Db) {
  const [row] = await db
    .select()
    .from(rateVersions)
    .orderBy(desc(rateVersions.createdAt), desc(rateVersions.id))
    .limit(1);
  if (!row) throw new Error('no rates are set: the table rate_versions is empty');
  return row;
}

interface Pours {
  family: string;
  result: 'sound' | 'scrapped' | 'second' | null;
  pours: number;
}

function countPours(db: Db, after: Date, until?: Date): Promise<Pours[]> {
  return db
    .select({ family: attempts.family, result: attempts.result, pours: count() })
    .from(attempts)
    .where(
      and(
        inArray(attempts.result, ['sound', 'scrapped', 'second']),
        gt(attempts.closedAt, after),
        until ? lte(attempts.closedAt, until) : undefined,
      ),
    )
    .groupBy(attempts.family, attempts.result);
}

function withPours(rates: StudioRates, pours: readonly Pours[]): StudioRates {
  const of = (family: string, isSound: boolean) =>
    pours
      .filter((row) => row.family === family && (row.result === 'sound') === isSound)
      .reduce((sum, row) => sum + row.pours, 0);
  const families = rates.families.map((family) => ({
    ...family,
    sound: family.sound + of(family.code, true),
    failed: family.failed + of(family.code, false),
  }));
  const added = pours.reduce((sum, row) => sum + row.pours, 0);
  return added === 0 ? rates : { ...rates, families, version: `${rates.version}+${added}` };
}

async function readForms(folder: string): Promise<PricedForm[]> {
  const names = (await readdir(folder)).filter((name) => name.endsWith('.json')).sort();
  const stats = await Promise.all(names.map((name) => stat(join(folder, name))));
  const seen = names.map((name, index) => `${name}:${stats[index]!.mtimeMs}:${stats[index]!.size}`).join('|');
  const known = FORMS.get(folder);
  if (known?.seen === seen) return known.forms;
  const forms = await Promise.all(
    names.map(async (name) => {
      const form = formSchema.parse(JSON.parse(await readFile(join(folder, name), 'utf8')));
      return pricedFormSchema.parse(form);
    }),
  );
  FORMS.set(folder, { seen, forms });
  return forms;
}

/** One version of the rates as its list shows it. */
export interface RatesVersion {
  id: string;
  version: string;
  createdAt: Date;
}

/** Earlier and present versions of the rates, the newest first. */
export async function listRates(services: Services, actor: Actor): Promise<Outcome<RatesVersion[]>> {
  if (!may(actor, 'rates:write')) return refuse('not-allowed', 'Only the owners see and set the studio’s rates.');
  const rows = await services.db.select().from(rateVersions).orderBy(desc(rateVersions.createdAt)).limit(50);
  return done(rows.map(({ id, rates, createdAt }) => ({ id, version: rates.version, createdAt })));
}

/**
 * Puts a new version of the rates in force. It names the version it was typed from, so that two owners cannot overwrite
 * each other in silence. Quotes and estimates that exist keep the numbers they were priced with.
 */
export async function setRates(
  services: Services,
  actor: Actor,
  input: RatesForm,
): Promise<Outcome<{ version: string }>> {
  if (!may(actor, 'rates:write')) return refuse('not-allowed', 'Only the owners set the studio’s rates.');
  return services.db.transaction(async (tx) => {
    await tx.execute(sql`select pg_advisory_xact_lock(hashtext('rate_versions'))`);
    const newest = await newestVersion(tx);
    const at = services.now();
    if (newest.rates.version !== input.from.split('+')[0])
      return refuse(
        'stale',
        `The rates were changed to version ${newest.rates.version} while you typed. Compare them below and save again.`,
      );
    const version = nextVersion(newest.rates.version, at);
    const typed = applyRates(newest.rates, input);
    const meanwhile = await countPours(tx, new Date(input.shownAt), at);
    const rates = studioRatesSchema.parse({ ...withPours(typed, meanwhile), version });
    await tx.insert(rateVersions).values({ id: uuidv7(), rates, setBy: actor!.id, createdAt: at });
    return done({ version });
  });
}

function nextVersion(before: string, at: Date): string {
  const day = at.toISOString().slice(0, 10);
  const [, count] = before.startsWith(`${day}.`) ? before.split('.') : [];
  return `${day}.${Number(count ?? 0) + 1}`;
}
