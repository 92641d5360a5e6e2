import type Stripe from 'stripe';
import type { FakeResponse } from '../web/message';
import { html, page, type Html } from '../web/page';
import { TEST_CARDS } from './cards';
import type { SessionNotes } from './world';

export const STAND_IN = 'Local stand-in for Stripe. No money moves.';

/** What somebody typed and chose, shown again when it could not be taken. */
export type PayForm = { choice: string; email: string; problem?: string };

type Shown = { session: Stripe.Checkout.Session; notes: SessionNotes };

/** An amount in minor units as "£297.00". */
export function money(amount: number | null, currency: string | null): string {
  const format = new Intl.NumberFormat('en-GB', { style: 'currency', currency: (currency ?? 'gbp').toUpperCase() });
  const digits = format.resolvedOptions().maximumFractionDigits ?? 2;
  return format.format((amount ?? 0) / 10 ** digits);
}

/** The form that pays an open session. */
export function payForm({ session, notes }: Shown, form: PayForm): FakeResponse {
  const total = money(session.amount_total, session.currency);
  const known = session.customer_details?.email ?? null;
  const debit = session.payment_method_types.some((method) => method !== 'card');
  const cards = session.payment_method_types.includes('card') ? TEST_CARDS : [];
  return payPage(
    notes,
    form.problem ? 402 : 200,
    `Pay ${total}`,
    html` <h1>Pay ${notes.studio}</h1>
      ${form.problem && html`<p class="said bad" role="alert">${form.problem} Nothing was taken. Choose another way to pay below.</p>`}
      ${lines(notes, total)}
      <form method="post" action="/pay/${session.id}">
        <label
          ><span class="label">E-mail for the receipt</span>
          <input
            type="email"
            name="email"
            required
            autocomplete="email"
            value="${known ?? form.email}"
            ${known && html` readonly`}
        /></label>
        <fieldset>
          <legend>How to pay</legend>
          <p class="muted">These are test cards: choose what the bank should do.</p>
          ${cards.map((card) => choice(card.number, card.label, card.detail, form.choice === card.number))}
          ${debit && choice('debit', 'Bank debit', 'Accepted now; the money arrives or fails later.', form.choice === 'debit')}
        </fieldset>
        <div class="acts">
          <button class="main">Pay ${total}</button>
          ${session.cancel_url && html`<a href="${session.cancel_url}">Go back without paying</a>`}
        </div>
      </form>`,
  );
}

/** The second step of a card whose bank asks. */
export function confirmForm({ session, notes }: Shown): FakeResponse {
  const total = money(session.amount_total, session.currency);
  return payPage(
    notes,
    200,
    'Confirm the payment',
    html` <h1>Your bank asks: is this payment yours?</h1>
      <p>${total} to ${notes.studio}. This page plays the part of your bank.</p>
      <form method="post" action="/pay/${session.id}/confirm">
        <div class="acts">
          <button class="main" name="answer" value="yes">Confirm ${total}</button>
          <button class="plain" name="answer" value="no">This is not mine: refuse it</button>
        </div>
      </form>`,
  );
}

/** A page that only says something, with the way back to the studio. */
export function sayOnPay(
  notes: SessionNotes,
  said: { status: number; title: string; text: string; back: string | null },
): FakeResponse {
  return payPage(
    notes,
    said.status,
    said.title,
    html` <h1>${said.title}</h1>
      <p>${said.text}</p>
      ${said.back && html`<div class="acts"><a class="button" href="${said.back}">Back to ${notes.studio}</a></div>`}`,
  );
}

/** For an address that belongs to no session. */
export function unknownPay(studio: string): FakeResponse {
  const title = 'There is no such payment page';
  return page({
    status: 404,
    title,
    name: studio,
    standIn: STAND_IN,
    narrow: true,
    body: html` <h1>${title}</h1>
      <p>
        The address is not complete, or it comes from before this stand-in was emptied. Open the payment again from the
        studio's page.
      </p>`,
  });
}

function payPage(notes: SessionNotes, status: number, title: string, body: Html): FakeResponse {
  return page({
    status,
    title: `${title}, ${notes.studio}`,
    name: notes.studio,
    standIn: STAND_IN,
    narrow: true,
    body,
  });
}

function lines(notes: SessionNotes, total: string): Html {
  const row = (line: SessionNotes['lines'][number]): Html =>
    html`<tr>
      <td>
        ${line.description}${line.quantity !== 1 && html`<br /><span class="muted">${line.quantity} at ${money(line.price?.unit_amount ?? 0, line.currency)} each</span>`}
      </td>
      <td class="money">${money(line.amount_total, line.currency)}</td>
    </tr>`;
  return html`<table class="lines">
    <tbody>
      ${notes.lines.map(row)}
      <tr class="total">
        <th scope="row">To pay now</th>
        <td class="money">${total}</td>
      </tr>
    </tbody>
  </table>`;
}

function choice(value: string, label: string, detail: string, chosen: boolean): Html {
  return html`<label class="choice"
    ><input type="radio" name="choice" value="${value}" required${chosen && html` checked`} /><b>${label}</b
    ><span>${detail}</span></label
  >`;
}
