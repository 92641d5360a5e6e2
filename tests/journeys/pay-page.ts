import { places, type Places } from './studio';

/** Stripe's published test card that every bank accepts. */
export const GOOD_CARD = '4242424242424242';

/** Pays on the hosted page as a plain form does; gives the address it leads back to. */
export async function payOnPage(pageUrl: string): Promise<string> {
  const page = await fetch(pageUrl);
  const email = /name="email"[^>]*value="([^"]+)"/s.exec(await page.text())?.[1] ?? 'payer@example.org';
  const body = new URLSearchParams({ email, choice: GOOD_CARD });
  const paid = await fetch(pageUrl, { method: 'POST', body, redirect: 'manual' });
  const back = paid.headers.get('location');
  if (paid.status !== 303 || !back) throw new Error(`the pay page answered ${paid.status}`);
  return back;
}

/** Holds the payment service's webhooks back, or lets them go. */
export async function holdWebhooks(hold: boolean, { payUrl }: Places = places): Promise<void> {
  const init = { method: 'POST', headers: { 'content-type': 'application/json' } };
  await fetch(`${payUrl}/__control`, { ...init, body: JSON.stringify({ holdWebhooks: hold }) });
}
