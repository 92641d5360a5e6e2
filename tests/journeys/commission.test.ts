import { eq } from 'drizzle-orm';
import type { Browser, Page } from 'playwright-core';
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { events } from '../../src/server/db/schema/commissions';
import { readPieces } from '../../src/server/making/pieces';
import { commission } from '../server/deal/deal-setting';
import { Complaints, DESK, openChromium, openContext, PHONE, shoot } from './chromium';
import { letterOf, linkTo, mailOf, mailsTo, signInParts } from './inbox';
import { benchPhoto } from './sample-files';
import { personOf, signedIn } from './scene';
import { servicesOf } from './studio';
import * as collector from './walk/collector';
import * as maker from './walk/maker';
import * as owner from './walk/owner';
import { signInByCode, signInByLink } from './walk/sign-in';

const COLLECTOR = { name: 'Sabine Ferrowick', email: 'sabine.ferrowick@example.org' };
const WREN = 'wren.addlecombe@example.org';
const JUNO = 'juno.askerby@example.org';

const services = servicesOf();
const complaints = new Complaints();
let browser: Browser;
let phone: Page;
let watching: Page;
let desk: Page;
let bench: Page;
let ref: string;

beforeAll(async () => {
  browser = await openChromium();
  const open = async (who: string, viewport: { width: number; height: number }) =>
    (await openContext(browser, { who, viewport, complaints })).newPage();
  phone = await open('collector', PHONE);
  watching = await open('collector’s second window', DESK);
  desk = await open('owner', DESK);
  bench = await open('maker', PHONE);
});

// Each step stands on the one before: after a failure the rest could only wait in vain.
let broken = false;
beforeEach((context) => {
  if (broken) context.skip('an earlier step failed');
  context.onTestFailed(() => {
    broken = true;
  });
});

afterEach(() => expect(complaints.all.splice(0), 'the browser complained').toEqual([]));

afterAll(async () => {
  await browser.close();
  await services.pool.end();
});

/** Waits until the window that was never reloaded shows this. */
async function seesLive(words: string | RegExp): Promise<void> {
  await watching.locator('main').getByText(words).filter({ visible: true }).first().waitFor();
  expect(await watching.evaluate(() => document.documentElement.dataset['opened'])).toBe('once');
}

/** Waits until the runner of that window shows a stage as done, or as the one in hand. */
async function seesStage(name: string, state: 'done' | 'now'): Promise<void> {
  await watching
    .locator('main li')
    .filter({ hasText: `${name}, ${state}` })
    .first()
    .waitFor();
  expect(await watching.evaluate(() => document.documentElement.dataset['opened'])).toBe('once');
}

const photo = (name: string) => benchPhoto(`${name}.jpg`, name === 'pattern' ? '#b9a27a' : '#b07a3c');
const pageOf = () => `/commissions/${ref}`;

describe('a commission from a wish to a piece on its way', () => {
  it('is priced, with the figures moving as sizes are typed', async () => {
    await collector.priceSword(phone);
    await shoot(phone, '01-price');
    await phone.getByRole('button', { name: 'Ask for a firm quote' }).click();
    await phone.waitForURL('**/price/enquire?**');
  });

  it('is asked for with a 3D file and a PDF, and counts once its address is confirmed', async () => {
    await collector.sendEnquiry(phone, COLLECTOR);
    await shoot(phone, '02-enquire');
    await phone.getByRole('button', { name: 'Send the enquiry' }).click();
    await phone.waitForURL('**/price/sent?ref=*');
    await shoot(phone, '03-confirm');
    const { link, code } = signInParts(await mailOf(COLLECTOR.email, 'M0'));
    await phone.getByLabel('Six-digit code').fill(code);
    await phone.getByRole('button', { name: 'Confirm the enquiry' }).click();
    await phone.waitForURL('**/commissions/MF-*');
    ref = new URL(phone.url()).pathname.split('/').at(-1)!;
    expect((await commission({ services }, ref)).email).toBe(COLLECTOR.email);
    await mailOf(COLLECTOR.email, 'M1');
    await shoot(phone, '04-enquired');
    // The link of the same mail is spent with its code.
    await watching.goto(link);
    await watching.getByRole('heading', { name: 'This link is no longer good' }).waitFor();
  });

  it('can be watched from a second device', async () => {
    const { link } = signInParts(
      await (async () => {
        await watching.goto('/sign-in');
        await watching.getByLabel('Mail address').fill(COLLECTOR.email);
        await watching.getByRole('button', { name: 'Mail me a link and a code' }).click();
        return mailOf(COLLECTOR.email, 'M0', 2);
      })(),
    );
    await signInByLink(watching, link);
    await watching.goto(pageOf());
    await watching.evaluate(() => (document.documentElement.dataset['opened'] = 'once'));
  });

  it('gets one question from the owner, and its answer', async () => {
    await signInByCode(desk, WREN);
    await shoot(desk, '05-whose-turn');
    await owner.askOne(desk, ref, {
      text: 'Shall the rivet holes be drilled, or cast in?',
      why: 'Cast holes need six small cores.',
    });
    await shoot(desk, '06-asked');
    await seesLive('It is your turn');
    await seesLive('Shall the rivet holes be drilled, or cast in?');
    await phone.goto(linkTo(await mailOf(COLLECTOR.email, 'M3'), pageOf()));
    await phone.getByLabel('Shall the rivet holes be drilled, or cast in?').fill('Drilled, please; six of 5 mm.');
    await shoot(phone, '07-question');
    await phone.getByRole('button', { name: 'Send the answers' }).click();
    await phone.getByText('It is our turn').waitFor();
    await desk.goto(`/studio/commissions/${ref}`);
    await desk.getByText('Drilled, please; six of 5 mm.').waitFor();
  });

  it('is quoted twice, and the first revision can be neither accepted nor paid', async () => {
    await owner.workOnQuote(desk, ref, { label: 'Fettling', hours: '7.5' });
    await shoot(desk, '08-quote-desk');
    await owner.sendRevision(desk, 1);
    const first = linkTo(await mailOf(COLLECTOR.email, 'M7'), pageOf());
    await phone.goto(first);
    await shoot(phone, '09-revision-1');
    await owner.workOnQuote(desk, ref, { label: 'Fettling', hours: '8' });
    await owner.sendRevision(desk, 2);
    await shoot(desk, '10-revision-2-sent');
    await seesLive('Read and accept revision 2');

    await collector.acceptRefused(phone, COLLECTOR);
    await shoot(phone, '11-revision-1-withdrawn');
    const visitor = await signedIn(services, await personOf(services, COLLECTOR.email));
    const ticks = { typedName: COLLECTOR.name, terms: 'on', bespoke: 'on', mark: 'on', adult: 'on' };
    const accepted = await visitor.postJson(`/api/commissions/${ref}/accept`, { revision: 1, ...ticks });
    expect(accepted.status).toBe(409);
    await phone.goto(first);
    await phone.getByText('This revision is no longer in force.').waitFor();
    expect(await phone.getByRole('button', { name: /accept|pay/i }).count()).toBe(0);
  });

  it('is accepted by typed name and declarations, and the first payment books its place', async () => {
    await phone.goto(linkTo(await mailOf(COLLECTOR.email, 'M8'), pageOf()));
    await shoot(phone, '12-revision-2');
    await collector.acceptQuote(phone, COLLECTOR);
    await shoot(phone, '13-agreed');
    await collector.payDue(phone, ref);
    await shoot(phone, '14-paid');
    await mailOf(COLLECTOR.email, 'M11');
    await mailOf(COLLECTOR.email, 'M12');
    await seesLive('Paid');
    expect((await commission({ services }, ref)).deal).toBe('booked');
  });

  it('is looked at and approved as a pattern', async () => {
    await signInByCode(bench, JUNO);
    await shoot(bench, '15-in-hand');
    await bench.goto(`/bench/${ref}`);
    await maker.sendPhoto(bench, await photo('pattern'), 'The pattern beside a scale');
    await seesLive('The pattern beside a scale');
    await maker.reach(bench, 'Pattern ready');
    await shoot(bench, '16-bench-pattern');
    await seesLive('Look at the pattern before the mould is made');
    await phone.goto(linkTo(await mailOf(COLLECTOR.email, 'M15'), pageOf()));
    await shoot(phone, '17-gate');
    await phone.getByRole('button', { name: 'Approve these pictures' }).click();
    await phone.getByRole('button', { name: 'Approve these pictures' }).waitFor({ state: 'detached' });
    await mailOf(COLLECTOR.email, 'M16');
    await collector.payDue(phone, ref);
    await mailOf(COLLECTOR.email, 'M12', 2);
  });

  it('is poured, scrapped for a misrun and poured again, seen without a reload', async () => {
    await bench.goto(`/bench/${ref}`);
    await maker.reach(bench, 'Mould ready');
    await seesStage('Mould', 'done');
    await maker.reach(bench, 'Poured');
    await maker.sendPhoto(bench, await photo('misrun'), 'The tip did not fill');
    await seesLive('The tip did not fill');
    await shoot(bench, '18-bench-poured');
    await maker.scrap(bench, 'Misrun', 'The last 30 mm are missing.');
    await shoot(bench, '19-bench-scrapped');
    await seesLive(/misrun/i);
    await mailOf(COLLECTOR.email, 'M20');
    await shoot(watching, '20-scrapped-live');
    await maker.reach(bench, 'Mould ready');
    await maker.reach(bench, 'Poured');
    await maker.reach(bench, 'Sound');
    await seesStage('Pour', 'done');
    await maker.sendPhoto(bench, await photo('sound'), 'Sound, gates cut off');
    await seesLive('Sound, gates cut off');
    await shoot(watching, '21-sound-live');
  });

  it('is finished, inspected and told of', async () => {
    const { id } = await commission({ services }, ref);
    const route = (await readPieces(services.db, id))[0]!.route;
    const acts = { fettled: 'Fettled', hardened: 'Edges hardened', finished: 'Finished', patinated: 'Patinated' };
    for (const [stage, act] of Object.entries({ ...acts, hafted: 'Hafted' })) {
      if (route.some((each) => each === stage)) await maker.reach(bench, act);
    }
    await maker.sendPhoto(bench, await photo('finished'), 'Finished, on the scales');
    const target = (await readPieces(services.db, id))[0]!.targetMassG!;
    await maker.inspect(bench, target + 4);
    await shoot(bench, '22-bench-inspected');
    await bench.getByRole('button', { name: 'Finished, tell the customer' }).click();
    await bench.getByRole('button', { name: 'Finished, tell the customer' }).waitFor({ state: 'detached' });
    await mailOf(COLLECTOR.email, 'M23');
    await seesLive(`${target + 4} g`);
  });

  it('leaves once its balance is paid, with an adult’s signature, and arrives', async () => {
    await collector.payDue(phone, ref);
    await mailOf(COLLECTOR.email, 'M12', 3);
    await collector.giveAddress(phone, ref);
    await seesLive('3 Withy Lane');
    await bench.goto(`/bench/${ref}`);
    await maker.reach(bench, 'Packed');
    await owner.dispatch(desk, ref);
    await shoot(desk, '23-dispatched');
    await mailOf(COLLECTOR.email, 'M24');
    await seesLive('The carrier has it');
    await shoot(watching, '24-on-its-way');
    await desk.getByRole('button', { name: 'It has arrived' }).click();
    await mailOf(COLLECTOR.email, 'M26');
    expect((await commission({ services }, ref)).deal).toBe('delivered');
    await phone.goto(pageOf());
    await shoot(phone, '25-delivered');
  });

  it('sent the customer each mail exactly once', async () => {
    const mails = await mailsTo(COLLECTOR.email);
    const ids = mails.map((mail) => mail.tags.find((tag) => tag.name === 'mail')?.value);
    expect(new Set(ids)).toHaveLength(mails.length);
    const counts: Record<string, number> = {};
    for (const mail of mails) counts[letterOf(mail)] = (counts[letterOf(mail)] ?? 0) + 1;
    const { M0: signIns, M19: progress, ...once } = counts;
    expect(signIns).toBe(2);
    const history = await services.db
      .select()
      .from(events)
      .where(eq(events.commissionId, (await commission({ services }, ref)).id));
    const told = /^stage-(mould|poured|sound|fettled|hardened|finished|patinated|hafted)$/;
    expect(progress).toBe(history.filter((event) => told.test(event.code)).length);
    expect(once).toEqual({
      M1: 1,
      M3: 1,
      M7: 1,
      M8: 1,
      M11: 1,
      M12: 3,
      M14: 1,
      M15: 1,
      M16: 1,
      M20: 1,
      M23: 1,
      M24: 1,
      M26: 1,
    });
    expect(new Set(mails.map((mail) => `${letterOf(mail)} ${mail.subject}`)).size).toBeGreaterThan(14);
  });
});
