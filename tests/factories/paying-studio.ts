import type { APIContext } from 'astro';
import { eq } from 'drizzle-orm';
import Stripe from 'stripe';
import { startStripeFake } from '../../fakes/start';
import type { Parcel } from '../../fakes/state/deliveries';
import { acceptSchema } from '../../src/commission/enquiry/triage';
import type { QuoteDraft } from '../../src/commission/pricing/quote-draft';
import { POST as webhook } from '../../src/pages/api/stripe/webhook';
import { acceptQuote } from '../../src/server/quote/acceptance';
import { startCheckout, type CheckoutPage } from '../../src/server/money/checkout';
import { checkoutSessions, ledgerEntries } from '../../src/server/db/schema/quotes';
import { events, tray } from '../../src/server/db/schema/commissions';
import { readBalance } from '../../src/server/money/ledger';
import { openDesk } from '../../src/server/quote/quote-desk';
import { sendQuote } from '../../src/server/quote/quotes';
import { commission, newEnquiry, openSetting, putDraft, type Setting } from '../server/deal/deal-setting';

export const CARD = '4242424242424242';
export const DECLINED = '4000000000000002';

/** The setting of the deal's tests with a Stripe fake behind the official client; its webhooks wait in `parcels`. */
export interface PayingStudio extends Setting {
  parcels: Parcel[];
  stripeUrl: string;
  fake: Awaited<ReturnType<typeof startStripeFake>>['fake'];
}

export async function openPayingStudio(): Promise<PayingStudio> {
  const setting = await openSetting();
  const parcels: Parcel[] = [];
  const secret = setting.services.config.stripeWebhookSecret;
  const running = await startStripeFake({
    clock: () => setting.clock.now,
    webhook: { url: 'http://localhost/api/stripe/webhook', secret },
    send: async (parcel) => {
      parcels.push(parcel);
      return 200;
    },
  });
  const stripe = new Stripe('sk_test_pourwright', {
    host: '127.0.0.1',
    port: running.port,
    protocol: 'http',
    telemetry: false,
    maxNetworkRetries: 2,
  });
  const drop = async () => {
    await running.close();
    await setting.drop();
  };
  return {
    ...setting,
    services: { ...setting.services, stripe },
    parcels,
    stripeUrl: running.url,
    fake: running.fake,
    drop,
  };
}

/** A commission of the setting's customer that is agreed: quoted by the desk's draft with `change`, and accepted. */
export async function agreed(
  setting: Setting,
  change: (draft: QuoteDraft) => QuoteDraft = (draft) => draft,
  asked: Record<string, unknown> = {},
): Promise<string> {
  const ref = await newEnquiry(setting, asked);
  const desk = await openDesk(setting.services, setting.owner, ref);
  if (!desk.ok) throw new Error(desk.problem.message);
  const versions = await putDraft(setting, ref, change(desk.value.draft));
  const sent = await sendQuote(setting.services, setting.owner, ref, { ...versions, freeze: true });
  if (!sent.ok) throw new Error(sent.problem.message);
  const yes = acceptSchema.parse({
    revision: '1',
    typedName: 'Isolde Wintermere',
    terms: 'yes',
    bespoke: 'yes',
    mark: 'yes',
    adult: 'yes',
  });
  const accepted = await acceptQuote(setting.services, setting.customer, ref, yes, '192.0.2.5');
  if (!accepted.ok) throw new Error(accepted.problem.message);
  return ref;
}

export async function balance(setting: Pick<Setting, 'services'>, ref: string) {
  const { services } = setting;
  return readBalance(services.db, (await commission(setting, ref)).id, services.now());
}

/** The stage that can be paid now. */
export async function dueStage(setting: Pick<Setting, 'services'>, ref: string) {
  const stage = (await balance(setting, ref)).stages.find((each) => each.state === 'due' || each.state === 'overdue');
  if (!stage) throw new Error(`nothing is due on ${ref}`);
  return stage;
}

/** The page for the stage that is due; throws when it is refused. */
export async function openPage(studio: PayingStudio, ref: string): Promise<CheckoutPage> {
  const { id } = await dueStage(studio, ref);
  const page = await startCheckout(studio.services, studio.customer, ref, { stage: id });
  if (!page.ok) throw new Error(page.problem.message);
  return page.value;
}

/** Pays at the pay page as a browser without scripts does; `choice` is a card number or "debit". */
export async function payAt(studio: PayingStudio, url: string, choice: string = CARD): Promise<number> {
  const answer = await fetch(url, { method: 'POST', body: new URLSearchParams({ choice }), redirect: 'manual' });
  await studio.fake.webhooksSettled();
  return answer.status;
}

/** Presses a button of the bank: `settle` or `fail` of a delayed payment, `expire` of an open page. */
export async function bank(studio: PayingStudio, act: string, id: string): Promise<void> {
  const form = new URLSearchParams({ act, id });
  await fetch(`${studio.stripeUrl}/act`, { method: 'POST', body: form, redirect: 'manual' });
  await studio.fake.webhooksSettled();
}

/** Posts one webhook to the real endpoint; the answer's status and body. */
export async function post(studio: Setting, parcel: Pick<Parcel, 'headers' | 'body'>) {
  const request = new Request('http://localhost/api/stripe/webhook', {
    method: 'POST',
    headers: parcel.headers,
    body: parcel.body,
  });
  const context = { request, locals: { services: studio.services } };
  const answer = await webhook(context as unknown as APIContext);
  return { status: answer.status, body: (await answer.json()) as { outcome?: string } };
}

export const typeOf = (parcel: Parcel): string => (JSON.parse(parcel.body) as { type: string }).type;

/** The waiting webhooks of one session, oldest first, taken out of the queue. */
export function takeSessionEvents(studio: PayingStudio): Parcel[] {
  return studio.parcels.splice(0).filter((parcel) => typeOf(parcel).startsWith('checkout.session.'));
}

/** Delivers every waiting webhook once. */
export async function deliverAll(studio: PayingStudio): Promise<void> {
  for (const parcel of studio.parcels.splice(0)) {
    const { status } = await post(studio, parcel);
    if (status !== 200) throw new Error(`the webhook answered ${status}`);
  }
}

/** Pays what is due by card, webhook and all. */
export async function payDue(studio: PayingStudio, ref: string): Promise<void> {
  await payAt(studio, (await openPage(studio, ref)).url);
  await deliverAll(studio);
}

export async function ledgerOf(setting: Pick<Setting, 'services'>, ref: string) {
  const { id } = await commission(setting, ref);
  return setting.services.db
    .select()
    .from(ledgerEntries)
    .where(eq(ledgerEntries.commissionId, id))
    .orderBy(ledgerEntries.receiptNo);
}

export async function sessionsOf(setting: Pick<Setting, 'services'>, ref: string) {
  const { id } = await commission(setting, ref);
  return setting.services.db.select().from(checkoutSessions).where(eq(checkoutSessions.commissionId, id));
}

export async function trayOf(setting: Pick<Setting, 'services'>, ref: string) {
  const { id } = await commission(setting, ref);
  return setting.services.db.select().from(tray).where(eq(tray.commissionId, id));
}

/** Codes of the history, oldest first. */
export async function historyOf(setting: Pick<Setting, 'services'>, ref: string): Promise<string[]> {
  const { id } = await commission(setting, ref);
  const rows = await setting.services.db.select().from(events).where(eq(events.commissionId, id)).orderBy(events.id);
  return rows.map((row) => row.code);
}

/** How many of a list begin so. */
export const countOf = (list: string[], wanted: string): number =>
  list.filter((each) => each.startsWith(wanted)).length;

/** A paid first stage whose webhook has not come yet. */
export async function paidUnseen(studio: PayingStudio) {
  const ref = await agreed(studio);
  const stage = await dueStage(studio, ref);
  await payAt(studio, (await openPage(studio, ref)).url);
  const [completed] = takeSessionEvents(studio);
  return { ref, stage, completed: completed! };
}
