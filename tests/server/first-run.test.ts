import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { firstRun } from '../../src/launch/first-run';
import { tray } from '../../src/server/db/schema/commissions';
import { invitations } from '../../src/server/db/schema/people';
import { currentRateCard } from '../../src/server/pricing/rates';
import type { Services } from '../../src/server/services';
import { createTestServices } from '../setup/database';

let services: Services;
let drop: () => Promise<void>;

beforeAll(async () => {
  ({ services, drop } = await createTestServices());
});
afterAll(() => drop());

describe('the first start of a real studio', () => {
  test('is refused, in words, while nobody is named as its owner', async () => {
    await expect(firstRun(services, undefined)).rejects.toThrow(/Set OWNER_EMAIL/);
    expect(await services.db.select().from(invitations)).toEqual([]);
  });

  test('invites the owner, puts starting rates in force and says so in the tray', async () => {
    expect(await firstRun(services, ' Founder@Example.org ')).toMatch(/may sign in as owner, starting rates/);
    expect((await services.db.select().from(invitations))[0]).toMatchObject({
      email: 'founder@example.org',
      role: 'owner',
    });
    expect((await currentRateCard(services)).rates.version).toBe('starting-values');
    expect((await services.db.select().from(tray))[0]?.problem.message).toMatch(/starting values/);
  });

  test('changes nothing when it is started again', async () => {
    expect(await firstRun(services, undefined)).toBe('it has its owner and its rates');
    expect(await services.db.select().from(invitations)).toHaveLength(1);
    expect(await services.db.select().from(tray)).toHaveLength(1);
  });
});
