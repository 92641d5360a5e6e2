import { afterAll, beforeAll, beforeEach, describe, expect, test } from 'vitest';
import { mails } from '../../../src/server/db/schema/studio';
import { queueMail } from '../../../src/server/outbox';
import { openPostOffice, type PostOffice } from './post-office';
import { jobs, mailRow, queueReceipt } from './rows';
import { SAMPLES } from './sample-letters';

let office: PostOffice;
beforeAll(async () => (office = await openPostOffice()));
afterAll(() => office.close());
beforeEach(async () => {
  await office.services.pool.query('truncate mails; delete from graphile_worker._private_jobs');
});

describe('the outbox', () => {
  test('a change that is rolled back leaves neither a mail nor a job', async () => {
    const { db } = office.services;
    const change = db.transaction(async (tx) => {
      await queueMail(tx, { letter: 'M12', to: 'a@example.org', cause: 'M12:x', at: new Date(), data: SAMPLES.M12 });
      throw new Error('the change failed after all');
    });
    await expect(change).rejects.toThrow('the change failed after all');
    expect(await db.select().from(mails)).toEqual([]);
    expect(await jobs(office.services)).toEqual([]);
  });

  test('twenty at once for one cause make one mail and one job', async () => {
    const ids = await Promise.all(Array.from({ length: 20 }, () => queueReceipt(office.services)));
    expect(ids.filter(Boolean)).toHaveLength(1);
    expect(await office.services.db.select().from(mails)).toHaveLength(1);
    expect(await jobs(office.services)).toHaveLength(1);
  });

  test('data that the letter has no place for is refused before anything is written', async () => {
    const leaky = { ...SAMPLES.M7, costLines: [{ label: 'Bench hours', minor: 76_000 }] };
    const queued = queueMail(office.services.db, {
      letter: 'M7',
      to: 'a@example.org',
      cause: 'M7:x',
      at: new Date(),
      data: leaky,
    });
    await expect(queued).rejects.toThrow('costLines');
    expect(await office.services.db.select().from(mails)).toEqual([]);
  });

  test('a queued mail keeps its data until it is sent', async () => {
    const id = await queueReceipt(office.services);
    expect(await mailRow(office.services, id)).toMatchObject({ state: 'queued', tries: 0, letter: 'M12' });
  });
});
