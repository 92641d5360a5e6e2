import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { ne } from 'drizzle-orm';
import { STUDIO } from '../../src/commission/studio';
import { commissions } from '../../src/server/db/schema/commissions';
import { ledgerEntries, stagePayments } from '../../src/server/db/schema/quotes';
import { users } from '../../src/server/db/schema/people';
import { expectedAnswer, type Expected } from './routes/expected';
import { routeFiles, type Method, type RouteFile } from './routes/route-files';
import { RULES, type Rule } from './routes/rules.table';
import { fillIn, isAboutSomething, NOWHERE, placesOf, type Named } from './routes/targets';
import { newPerson, personOf, signedIn, type Person } from './scene';
import { servicesOf } from './studio';
import { Visitor, type Answer } from './visitor';

const OWN = 'MF-0181';
const OTHERS = 'MF-0180';
const FILES = routeFiles();

const services = servicesOf();
const who = new Map<string, Person | null>();
let everyPlace: Named[];

beforeAll(async () => {
  who.set('guest', null);
  who.set('customer', await personOf(services, 'isolde.wintermere@example.org'));
  who.set('another customer', await newPerson(services, 'Perrin Oakhanger'));
  who.set('maker', await personOf(services, 'juno.askerby@example.org'));
  who.set('owner', await personOf(services, 'tobias.marlhythe@example.org'));
  who.set('bookkeeper', await personOf(services, 'nessa.holtwick@example.org'));
  everyPlace = [await placesOf(services, OWN, 'own'), await placesOf(services, OTHERS, 'other'), NOWHERE];
});
afterAll(() => services.pool.end());

/** One request of the matrix and what came back. */
interface Case {
  name: string;
  role: string;
  path: string;
  expected: Expected;
  sends: 'nothing' | 'an empty form' | 'empty JSON' | 'what would do something';
  answer: Answer;
}

const visitorAs = (person: Person | null) => (person ? signedIn(services, person) : Promise.resolve(new Visitor()));

async function casesOf(file: RouteFile, method: Method): Promise<Case[]> {
  const rule = RULES[file.pattern]?.[method];
  if (!rule) return [];
  return (await Promise.all([...who].map((whom) => casesAs(whom, file.pattern, method, rule)))).flat();
}

async function casesAs(whom: [string, Person | null], pattern: string, method: Method, rule: Rule): Promise<Case[]> {
  const [role, person] = whom;
  const about = isAboutSomething(pattern);
  // A session of its own for each route: some routes end it.
  const visitor = await visitorAs(person);
  const cases: Case[] = [];
  for (const named of about ? everyPlace : [NOWHERE]) {
    const path = await fillIn(services, `${pattern}${rule.query ?? ''}`, named);
    const customerId = about ? named.customerId : undefined;
    const expected = expectedAnswer({ rule, isDoor: pattern.startsWith('/api/'), actor: person, customerId });
    for (const { sends, answer } of await ask(visitor, method, path, rule, expected)) {
      cases.push({ name: `${method} ${path} by ${role}, sending ${sends}`, role, path, expected, sends, answer });
    }
  }
  return cases;
}

async function ask(visitor: Visitor, method: Method, path: string, rule: Rule, expected: Expected) {
  const asked: { sends: Case['sends']; answer: Answer }[] = [];
  const put = (sends: Case['sends'], answer: Answer) => asked.push({ sends, answer });
  if (method !== 'POST') {
    put('nothing', await visitor.send(method, path, { headers: { accept: 'text/html' } }));
    const turnsAway = expected !== 'allowed' && rule.open === undefined && !path.startsWith('/api/');
    if (turnsAway) put('an empty form', await visitor.postForm(path, {}));
    return asked;
  }
  put('empty JSON', await visitor.postJson(path, {}));
  if (expected === 'allowed' || rule.open !== undefined) return asked;
  put('an empty form', await visitor.postForm(path, {}));
  put('what would do something', await visitor.postJson(path, rule.body ?? {}));
  return asked;
}

/** What is wrong with an answer; null when it is as the table asks. */
function fault({ expected, sends, answer }: Case): string | null {
  const { status, location } = answer;
  if (status >= 500 && status !== expected) return `answered ${status}`;
  if (expected === 'allowed') return [401, 403, 404].includes(status) ? `was refused with ${status}` : null;
  // An empty sending may be told what is missing before it is told anything else; a form is led back with the refusal.
  if (sends === 'empty JSON' && expected >= 400 && status === 422) return null;
  if (sends === 'an empty form') {
    const back =
      status === 303 &&
      /[?&]again=|^\/sign-in|^\/studio\/commissions\/|^\/(studio|bench|studio\/money)$/.test(location ?? '');
    return back || [400, 401, 403, 404, 422].includes(status) ? null : `answered ${status} to ${location}`;
  }
  if (status !== expected) return `answered ${status}, not ${expected}`;
  return null;
}

describe('every route', () => {
  it('stands in the table of rules, and every rule has its route', () => {
    const made = FILES.flatMap(({ pattern, methods }) => methods.map((method) => `${method} ${pattern}`));
    const ruled = Object.entries(RULES).flatMap(([pattern, rules]) =>
      Object.keys(rules).map((method) => `${method} ${pattern}`),
    );
    expect(made.sort()).toEqual(ruled.sort());
  });

  it('answers each role about its own, another’s and nothing as the permissions say', async () => {
    const cases: Case[] = [];
    for (const file of FILES) for (const method of file.methods) cases.push(...(await casesOf(file, method)));
    const faults = cases.flatMap((each) => {
      const found = fault(each);
      return found ? [`${each.name}: ${found}`] : [];
    });
    expect.soft(faults).toEqual([]);
    expect.soft(await slips(cases)).toEqual([]);
    expect(cases.length).toBeGreaterThan(1000);
  });
});

/** Words that must not have been told: prices and surnames to makers, other people to customers. */
async function slips(cases: Case[]): Promise<string[]> {
  const customers = await services.db.select().from(users).where(ne(users.role, 'owner'));
  const named = customers.filter((each) => each.role === 'customer' && each.name);
  const prices = await priceWords();
  const streets = await addressLines();
  const found: string[] = [];
  for (const { name, role, path, answer } of cases) {
    const tell = (words: string[]) => words.filter((word) => answer.body.includes(word));
    const isPublic = RULES[FILES.find((file) => fits(file.pattern, path))!.pattern]!.GET?.open !== undefined;
    if (role === 'maker' && !isPublic) {
      const surnames = named.flatMap((each) => [each.name!, each.email]);
      found.push(...tell(['£', '€', ...prices, ...surnames, ...streets]).map((word) => `${name} tells "${word}"`));
    }
    const isCustomer = role === 'customer' || role === 'another customer';
    if (isCustomer || role === 'guest') {
      const self = who.get(role)?.id;
      const others = named.filter((each) => each.id !== self).flatMap((each) => [each.name!, each.email]);
      found.push(...tell(others).map((word) => `${name} tells "${word}"`));
    }
  }
  return found;
}

const fits = (pattern: string, path: string) =>
  new RegExp(`^${pattern.replace(/\[\.\.\.\w+\]/g, '.+').replace(/\[\w+\]/g, '[^/]+')}$`).test(path.split('?')[0]!);

async function priceWords(): Promise<string[]> {
  const stages = await services.db.select().from(stagePayments);
  const entries = await services.db.select().from(ledgerEntries);
  const minors = new Set([...stages.map((row) => row.grossMinor), ...entries.map((row) => row.amountMinor)]);
  const asMoney = new Intl.NumberFormat('en-GB', { minimumFractionDigits: 2 });
  return [...minors].filter((minor) => minor >= 10_000).flatMap((minor) => [asMoney.format(minor / 100), `:${minor},`]);
}

async function addressLines(): Promise<string[]> {
  const rows = await services.db.select({ shipping: commissions.shipping }).from(commissions);
  const lines = rows.flatMap((row) => row.shipping?.lines ?? []);
  // Some live in the studio's own town, which stands at the foot of every page.
  return lines.filter((line) => line.length > 3 && !STUDIO.place.includes(line));
}
