import type Stripe from 'stripe';
import { z } from 'zod';
import { formFields, seeOther, type FakeRequest, type FakeResponse } from '../web/message';
import { TEST_CARDS } from './cards';
import { confirmForm, payForm, sayOnPay, unknownPay, type PayForm } from './pay-page';
import { answerBank, pay, type Outcome } from './payments';
import type { SessionNotes, World } from './world';

type Open = { session: Stripe.Checkout.Session; notes: SessionNotes };

const emailSchema = z.email();

/** Answers the pages under `/pay/<session id>`; everything works by plain forms. */
export function answerPay(world: World, request: FakeRequest): FakeResponse {
  const [, , id = '', step = ''] = request.url.pathname.split('/');
  const session = world.tables.sessions.get(id);
  const notes = world.tables.notes.get(id);
  if (!session || !notes || !['', 'confirm'].includes(step)) return unknownPay(world.studio);
  const open = { session, notes };
  if (request.method === 'POST')
    return step === 'confirm' ? confirmed(world, open, request) : pressed(world, open, request);
  if (session.status !== 'open') return over(open);
  if (step === 'confirm') return confirmForm(open);
  const refused = request.url.searchParams.get('refused') !== null;
  return payForm(open, { ...emptyForm(session), problem: refused ? lastProblem(world, session) : undefined });
}

function pressed(world: World, open: Open, request: FakeRequest): FakeResponse {
  const { session } = open;
  if (session.status !== 'open') return afterwards(open);
  const fields = formFields(request);
  const email = session.customer_details?.email ?? (fields['email'] ?? '').trim();
  const form: PayForm = { choice: fields['choice'] ?? '', email };
  if (!emailSchema.safeParse(email).success) {
    return payForm(open, { ...form, problem: 'The e-mail address needs the form name@example.org.' });
  }
  return follow(
    world,
    open,
    form,
    world.store.write(() => pay(world, session.id, form.choice, email)),
  );
}

function confirmed(world: World, open: Open, request: FakeRequest): FakeResponse {
  if (open.session.status !== 'open') return afterwards(open);
  const yes = formFields(request)['answer'] === 'yes';
  const outcome = world.store.write(() => answerBank(world, open.session.id, yes));
  if (outcome.kind === 'refused') {
    world.deliveries.wake();
    return seeOther(`/pay/${open.session.id}?refused`);
  }
  return follow(world, open, emptyForm(open.session), outcome);
}

function follow(world: World, open: Open, form: PayForm, outcome: Outcome): FakeResponse {
  world.deliveries.wake();
  if (outcome.kind === 'confirm') return seeOther(`/pay/${open.session.id}/confirm`);
  if (outcome.kind === 'done') return seeOther(successUrl(open.session));
  return payForm(open, { ...form, problem: outcome.message });
}

/** The second press of a double click ends where the first did. */
function afterwards(open: Open): FakeResponse {
  return open.session.status === 'complete' ? seeOther(successUrl(open.session)) : over(open);
}

/** What stands on the page of a session that has ended. */
function over({ session, notes }: Open): FakeResponse {
  if (session.status === 'complete') {
    const text =
      session.payment_status === 'paid'
        ? 'Nothing is left to pay here.'
        : 'Your bank has the debit; the money is on its way.';
    return sayOnPay(notes, { status: 200, title: 'This payment is made', text, back: successUrl(session) });
  }
  const text =
    'It was open for a limited time and nothing was taken. Open the payment again from the studio to get a fresh page.';
  return sayOnPay(notes, { status: 410, title: 'This payment page has expired', text, back: session.cancel_url });
}

function successUrl(session: Stripe.Checkout.Session): string {
  return (session.success_url ?? '/').replaceAll('{CHECKOUT_SESSION_ID}', session.id);
}

function emptyForm(session: Stripe.Checkout.Session): PayForm {
  return { choice: TEST_CARDS[0]?.number ?? '', email: session.customer_details?.email ?? '' };
}

function lastProblem(world: World, session: Stripe.Checkout.Session): string | undefined {
  const intent =
    typeof session.payment_intent === 'string' ? world.tables.intents.get(session.payment_intent) : undefined;
  return intent?.last_payment_error?.message;
}
