import { existsSync } from 'node:fs';
import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { freeBasePort } from '../../src/launch/ports';
import { ledgerEntries } from '../../src/server/db/schema/quotes';
import type { Services } from '../../src/server/services';
import { commission, type Setting } from '../server/deal/deal-setting';
import { furnishFolder } from '../setup/furnished-folder';
import { startStudio, type StudioProcess } from '../setup/studio-process';
import { temporaryDataFolder } from '../setup/temporary-folder';
import { mailOf } from './inbox';
import { holdWebhooks, payOnPage } from './pay-page';
import { agreedCommission, settingOf, signedIn } from './scene';
import { placesOn, servicesOf, until, type Places } from './studio';

const { folder, remove } = temporaryDataFolder();
let studio: StudioProcess;
let places: Places;
let setting: Setting;

beforeAll(async () => {
  const port = await freeBasePort();
  const shared = servicesOf();
  await furnishFolder(folder, shared.config.databaseUrl, port + 3);
  await shared.pool.end();
  studio = startStudio(port, folder);
  await studio.ready();
  places = placesOn(studio.port);
  setting = await settingOf(servicesOf(studio.port, folder), 'Linnet Overbury');
});

afterAll(async () => {
  await setting.services.pool.end();
  await studio.end();
  remove();
});

/** Pays the first stage of a new commission while no webhook leaves; what was paid, and for what. */
async function payUnheard(): Promise<{ ref: string; id: string; amountMinor: number }> {
  const { ref, id, stage } = await agreedCommission(setting);
  const visitor = await signedIn(setting.services, setting.customer, places.url);
  const answer = await visitor.postJson(`/api/commissions/${ref}/pay`, { stage });
  const { url, amountMinor } = (JSON.parse(answer.body) as { value: { url: string; amountMinor: number } }).value;
  await holdWebhooks(true, places);
  const back = await payOnPage(url);
  expect(back).toContain(`/commissions/${ref}/pay/return`);
  expect(await booked(setting.services, id)).toEqual([]);
  return { ref, id, amountMinor };
}

async function booked({ db }: Services, id: string): Promise<number[]> {
  const rows = await db.select().from(ledgerEntries).where(eq(ledgerEntries.commissionId, id));
  return rows.map((row) => row.amountMinor);
}

function bookedSoon(id: string): Promise<number[]> {
  return until('the deposit to be booked', async () => {
    const amounts = await booked(setting.services, id);
    return amounts.length > 0 && amounts;
  });
}

describe('a kill -9 between the payment and its webhook', () => {
  it('of the web server loses nothing: the webhook comes again and the deposit is booked', async () => {
    const { ref, id, amountMinor } = await payUnheard();
    const pid = studio.serverPid();
    process.kill(pid, 'SIGKILL');
    await until('the server to be gone', () => Promise.resolve(!existsSync(`/proc/${pid}`)));
    await holdWebhooks(false, places);
    expect(await bookedSoon(id)).toEqual([amountMinor]);
    expect((await commission(setting, ref)).deal).toBe('booked');
    expect(studio.output()).toContain('The web server died; starting it again.');
    await mailOf(setting.customer.email, 'M12', 1, places);
  });

  it('of everything loses nothing: a second start within seconds books the deposit', async () => {
    const { id, amountMinor } = await payUnheard();
    const { customer, owner } = setting;
    await setting.services.pool.end();
    await studio.end('SIGKILL');
    studio = startStudio(studio.port, folder);
    await studio.ready();
    setting = { ...setting, services: servicesOf(studio.port, folder), customer, owner };
    expect(await bookedSoon(id)).toEqual([amountMinor]);
    const mail = await mailOf(customer.email, 'M12', 2, places);
    expect(mail.to).toEqual([customer.email]);
  });
});
