import type { Permission, Role } from '../../../src/commission/permissions';
import type { Method } from './route-files';

/**
 * Who may come to a route. `open`: everybody, with that status. `signedIn`: whoever is signed in. `may`: who holds the
 * permission; about one commission when the pattern names one or its parts. `hides`: a refusal looks like nothing there.
 * `leads`: roles that are sent on to their own page. `body`: a sending that would do something if it were let through.
 */
export interface Rule {
  open?: number;
  signedIn?: true;
  may?: Permission;
  hides?: true;
  leads?: Role[];
  body?: Record<string, unknown>;
  query?: string;
}

const ID = '01890000-0000-7000-8000-000000000001';
const CLIENT = 'matrix-of-routes-0001';
const page = (rule: Rule): Partial<Record<Method, Rule>> => ({ GET: rule });
const door = (may: Permission, body: Record<string, unknown>): Partial<Record<Method, Rule>> => ({
  POST: { may, body },
});
const opened = page({ open: 200 });
const nobodysPost = (body: Record<string, unknown>): Partial<Record<Method, Rule>> => ({ POST: { open: 422, body } });
const step = { clientId: CLIENT, piece: 1, from: 'waiting', to: 'pattern' };

export const RULES: Record<string, Partial<Record<Method, Rule>>> = {
  '/': opened,
  '/401': page({ open: 401 }),
  '/403': page({ open: 403 }),
  '/404': page({ open: 404 }),
  '/500': page({ open: 500 }),
  '/care': opened,
  '/forms': opened,
  '/forms/[form]': opened,
  '/forms/plates.json': opened,
  '/how-it-works': opened,
  '/law': opened,
  '/metals': opened,
  '/metals/[alloy]': opened,
  '/privacy': opened,
  '/safety': opened,
  '/terms': opened,
  '/health': opened,
  '/price': opened,
  '/price/enquire': opened,
  '/price/sent': opened,
  '/sign-in': opened,
  '/sign-in/code': opened,
  '/sign-in/confirm': opened,
  '/sign-out': opened,

  '/account': page({ signedIn: true }),
  '/commissions': page({ signedIn: true, leads: ['owner', 'maker', 'bookkeeper'] }),
  '/commissions/[ref]': page({ may: 'commission:read', leads: ['owner'] }),
  '/commissions/[ref]/pay/return': { GET: { may: 'payment:pay', query: '?session=[session]' } },
  '/commissions/[ref]/quote/[revision]': page({ may: 'quote:read' }),
  '/commissions/[ref]/receipts/[no]': page({ may: 'money:read' }),
  '/bench': page({ may: 'bench:read' }),
  '/bench/[ref]': page({ may: 'bench:read' }),
  '/studio': page({ may: 'commission:triage' }),
  '/studio/commissions/[ref]': page({ may: 'commission:triage' }),
  '/studio/commissions/[ref]/quote': page({ may: 'quote:write' }),
  '/studio/enquiries': page({ may: 'commission:triage' }),
  '/studio/mail': page({ may: 'mail:read' }),
  '/studio/making': page({ may: 'commission:triage' }),
  '/studio/money': page({ may: 'money:read' }),
  '/studio/rates': page({ may: 'rates:write' }),
  '/studio/people': page({ may: 'people:manage' }),
  '/studio/tray': page({ may: 'payment:record' }),

  '/api/account': { POST: { signedIn: true, body: { name: 'Somebody Else', givenName: 'Some', phone: '' } } },
  '/api/auth/[...auth]': { GET: { open: 200 }, POST: { open: 404, body: {} } },
  '/api/bench/[ref]/finish': door('bench:work', {}),
  '/api/bench/[ref]/minutes': door('bench:work', { clientId: CLIENT, operation: 'Fettling', minutes: 15 }),
  '/api/bench/[ref]/photos': door('bench:work', {}),
  '/api/bench/[ref]/scrap': door('bench:work', { clientId: CLIENT, piece: 1, from: 'poured', cause: 'misrun' }),
  '/api/bench/[ref]/stage': door('bench:work', step),
  '/api/bench/[ref]/timer': door('bench:work', { action: 'start', operation: 'Fettling' }),
  '/api/commissions/[ref]/accept': door('quote:accept', {
    revision: 1,
    typedName: 'Somebody Else',
    terms: 'on',
    bespoke: 'on',
    mark: 'on',
    adult: 'on',
  }),
  '/api/commissions/[ref]/address': door('commission:write-message', {
    lines: 'Somebody Else\nNowhere',
    country: 'GB',
    phone: '+44 1632 960100',
  }),
  '/api/commissions/[ref]/answers': door('commission:answer', { send: 'send', [`answers.${ID}`]: 'Yes.' }),
  '/api/commissions/[ref]/decline': door('commission:triage', { reason: 'capacity' }),
  '/api/commissions/[ref]/delivered': door('commission:read', {}),
  '/api/commissions/[ref]/dispatch': door('dispatch:send', {
    carrier: 'Somebody with a cart',
    tracking: 'XX-1',
    adultSignature: 'on',
    parcel: 'A long box',
  }),
  '/api/commissions/[ref]/estimate': door('commission:triage', {
    lowMinor: '10',
    highMinor: '20',
    drivers: 'Nothing',
    assumptions: 'None',
    earliestWeeks: 1,
    latestWeeks: 2,
  }),
  '/api/commissions/[ref]/files': door('commission:write-message', {}),
  '/api/commissions/[ref]/gate': door('gate:decide', { photoSet: '0'.repeat(64), decision: 'approve' }),
  '/api/commissions/[ref]/live': page({ may: 'commission:read' }),
  '/api/commissions/[ref]/messages': door('commission:write-message', { clientId: CLIENT, body: 'Hello.' }),
  '/api/commissions/[ref]/pay': door('payment:pay', { stage: ID }),
  '/api/commissions/[ref]/questions': door('commission:triage', {
    'questions.0.text': 'How long is it?',
    'questions.0.why': 'It decides the mould.',
  }),
  '/api/commissions/[ref]/quote-draft': {
    GET: { may: 'quote:write' },
    POST: { may: 'quote:write', body: { act: 'reprice', version: 0 } },
  },
  '/api/commissions/[ref]/buyer-terms': door('commission:triage', { poNumber: 'PO 7', netDays: '30' }),
  '/api/commissions/[ref]/quotes': door('quote:write', { version: 1, revision: 1, freeze: 'on' }),
  '/api/commissions/[ref]/quotes/[revision]/withdraw': door('quote:write', { reason: 'None.' }),
  '/api/commissions/[ref]/rights': door('commission:triage', { designSource: 'own', rightsNote: 'They said so.' }),
  '/api/enquiries': door('enquiry:send', {
    clientId: CLIENT,
    what: 'form',
    form: 'palstave',
    name: 'Somebody Else',
    email: 'somebody.else@example.org',
    wish: 'One to hold while I read about them.',
    use: 'display',
    designSource: 'studio-form',
    adult: 'on',
    consent: 'on',
  }),
  '/api/estimates': { POST: { may: 'estimate:make', body: { what: 'form', form: 'palstave' } } },
  '/api/mails/[id]/again': door('mail:read', { again: 0 }),
  '/api/me': opened,
  '/api/people': door('people:manage', { name: 'Somebody', email: 'somebody@example.org', role: 'owner' }),
  '/api/people/[id]/active': door('people:manage', { active: 'no' }),
  '/api/people/[id]/role': door('people:manage', { role: 'owner' }),
  '/api/people/withdraw': door('people:manage', { email: 'somebody@example.org' }),
  '/api/photos/[id]/[size]': page({ may: 'photo:read', hides: true }),
  '/api/rates/card': opened,
  '/api/rates/from-prices': opened,
  '/api/resend/webhook': { POST: { open: 422, body: {} } },
  '/api/sign-in': nobodysPost({}),
  '/api/sign-in/code': nobodysPost({}),
  '/api/sign-in/spend': nobodysPost({}),
  '/api/sign-out': { POST: { open: 200, body: {} } },
  '/api/sign-out/everywhere': { POST: { signedIn: true, body: {} } },
  '/api/stripe/webhook': { POST: { open: 400, body: {} } },
  '/api/studio/rates': door('rates:write', {}),
  '/api/tray/[id]/settle': door('payment:record', {}),
  '/api/uploads': { POST: { may: 'upload:send', body: {} } },
  '/api/uploads/[id]': { GET: { may: 'upload:read', hides: true }, DELETE: { open: 404 } },
  '/api/uploads/[id]/thumb': page({ may: 'upload:read', hides: true }),
  '/api/uploads/mine': opened,
};
