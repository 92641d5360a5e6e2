import type Stripe from 'stripe';
import type { Delivery } from '../state/deliveries';
import { formFields, seeOther, type FakeRequest, type FakeResponse } from '../web/message';
import { html, moment, page, type Html } from '../web/page';
import { Refusal } from './errors';
import { emitAgain } from './events';
import { STAND_IN, money } from './pay-page';
import { endDebit } from './payments';
import { endRefund, refundWaitsFor } from './refunds';
import { expireSession } from './sessions';
import type { KeptEvent, World } from './world';

const SHOWN = 40;

/** Everything that happened, newest first, with buttons to play the bank and the clock. */
export function overviewPage(world: World, problem?: string): FakeResponse {
  const sessions = world.tables.sessions.newest().slice(0, SHOWN);
  const refunds = world.tables.refunds.newest().slice(0, SHOWN);
  const events = world.tables.events.newest().slice(0, SHOWN);
  return page({
    status: problem ? 400 : 200,
    title: 'Payments on this machine',
    name: world.studio,
    standIn: STAND_IN,
    body: html` <h1>Payments on this machine</h1>
      <p>Every payment page that was asked for, and what was told about it. The buttons play the bank.</p>
      ${problem && html`<p class="said bad" role="alert">${problem}</p>`}
      <h2>Payment pages</h2>
      ${
        sessions.length === 0
          ? html`<p class="muted">None yet. One appears when somebody starts a payment in the studio's pages.</p>`
          : table(
              ['For', 'Payer', 'State', 'Amount', 'Play'],
              sessions.map((session) => sessionRow(world, session)),
            )
      }
      ${
        refunds.length > 0 &&
        html`<h2>Refunds</h2>
          ${table(
            ['Refund', 'State', 'Amount', 'Play'],
            refunds.map((refund) => refundRow(world, refund)),
          )}`
      }
      <h2>Events</h2>
      ${
        events.length === 0
          ? html`<p class="muted">None yet.</p>`
          : table(
              ['Event', 'When', 'Delivery', 'Play'],
              events.map((event) => eventRow(event, world.deliveries.of(event.id))),
            )
      }`,
  });
}

/** Does what a button of the page asks. */
export function act(world: World, request: FakeRequest): FakeResponse {
  const { act: wanted = '', id = '' } = formFields(request);
  const acts: Record<string, () => unknown> = {
    settle: () => endDebit(world, id, true),
    fail: () => endDebit(world, id, false),
    expire: () => expireSession(world, id),
    resend: () => emitAgain(world, id),
    'refund-arrives': () => endRefund(world, id, true),
    'refund-fails': () => endRefund(world, id, false),
  };
  try {
    const play = acts[wanted];
    if (!play) return overviewPage(world, 'This button is not known here. Load the page again.');
    world.store.write(play);
  } catch (error) {
    if (error instanceof Refusal) return overviewPage(world, error.message);
    throw error;
  }
  world.deliveries.wake();
  return seeOther('/');
}

function table(heads: string[], rows: Html[]): Html {
  return html`<table class="lines stack">
    <thead>
      <tr>
        ${heads.map((head) => html`<th scope="col" class="${head === 'Amount' ? 'money' : ''}">${head}</th>`)}
      </tr>
    </thead>
    <tbody>
      ${rows}
    </tbody>
  </table>`;
}

function sessionRow(world: World, session: Stripe.Checkout.Session): Html {
  const lines = world.tables.notes.get(session.id)?.lines ?? [];
  const state = sessionState(world, session);
  return html`<tr>
    <td>${lines.map((line) => line.description).join(', ')}</td>
    <td>${session.customer_details?.email ?? 'not said yet'}</td>
    <td><span class="state ${state.mood}">${state.text}</span></td>
    <td class="money">${money(session.amount_total, session.currency)}</td>
    <td>
      <div class="acts">
        ${session.status === 'open' && html`<a href="/pay/${session.id}">Open the pay page</a>${button('expire', session.id, 'Expire it')}`}
        ${state.underWay && html`${button('settle', session.id, 'Let the money arrive')}${button('fail', session.id, 'Let the debit fail')}`}
      </div>
    </td>
  </tr>`;
}

function sessionState(
  world: World,
  session: Stripe.Checkout.Session,
): { text: string; mood: string; underWay: boolean } {
  const intent =
    typeof session.payment_intent === 'string' ? world.tables.intents.get(session.payment_intent) : undefined;
  const state = (text: string, mood = '', underWay = false) => ({ text, mood, underWay });
  if (session.status === 'expired') return state('expired');
  if (session.status === 'open')
    return intent?.last_payment_error ? state('declined, still open', 'bad') : state('open');
  if (session.payment_status === 'paid') return state('paid', 'good');
  return intent?.status === 'processing' ? state('debit under way', '', true) : state('debit failed', 'bad');
}

function refundRow(world: World, refund: Stripe.Refund): Html {
  const waits = refundWaitsFor(world, refund);
  return html`<tr>
    <td>${refund.id}</td>
    <td>
      <span class="state ${refund.status === 'failed' ? 'bad' : refund.status === 'succeeded' ? 'good' : ''}"
        >${refund.status ?? ''}</span
      >
    </td>
    <td class="money">${money(refund.amount, refund.currency)}</td>
    <td>
      <div class="acts">
        ${waits === 'arrive' && button('refund-arrives', refund.id, 'Let it arrive')}${waits && button('refund-fails', refund.id, 'Let it fail')}
      </div>
    </td>
  </tr>`;
}

function eventRow(event: KeptEvent, deliveries: Delivery[]): Html {
  return html`<tr>
    <td><b>${event.type}</b><br /><span class="muted">${event.id}</span></td>
    <td>${moment(new Date(event.created * 1000))}</td>
    <td>${deliveries.length === 0 ? 'nobody listens' : deliveries.map(deliveryState)}</td>
    <td>${deliveries.length > 0 && html`<div class="acts">${button('resend', event.id, 'Send it again')}</div>`}</td>
  </tr>`;
}

function deliveryState(delivery: Delivery): Html {
  const { state, attempts, lastStatus, lastError } = delivery;
  const tries = attempts > 1 ? ` after ${attempts} tries` : '';
  if (state === 'delivered') return html`<div class="state good">arrived${tries}</div>`;
  const why = lastStatus === null ? lastError : `answer ${lastStatus}`;
  if (state === 'given-up') return html`<div class="state bad">given up${why && `: ${why}`}</div>`;
  return html`<div class="state">waiting${why && ` (${why}, tried ${attempts} times)`}</div>`;
}

function button(wanted: string, id: string, label: string): Html {
  return html`<form method="post" action="/act">
    <input type="hidden" name="id" value="${id}" /><button class="plain" name="act" value="${wanted}">${label}</button>
  </form>`;
}
