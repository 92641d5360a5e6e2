import { badParam } from './errors';
import { pageOf } from './lists';
import type { World } from './world';

type Thing = Record<string, unknown>;

/** Stripe opens ids up to four levels deep. */
const DEEPEST = 4;

/**
 * Opens ids into the objects they name, as `expand[]=payment_intent.latest_charge` asks; in lists, paths begin with
 * `data`.
 * @throws Refusal for a path that names nothing that can be opened.
 */
export function expandAnswer(world: World, answer: object, paths: string[]): object {
  return paths.reduce<object>((grown, path) => {
    const steps = path.split('.');
    const depth = steps[0] === 'data' ? steps.length - 1 : steps.length;
    if (depth > DEEPEST) throw badParam('expand', `You cannot expand more than ${DEEPEST} levels of a property.`);
    return open(world, grown as Thing, steps, path);
  }, answer);
}

function open(world: World, thing: Thing, [step = '', ...rest]: string[], path: string): Thing {
  const value = thing[step] === undefined ? hidden(world, thing, step) : thing[step];
  if (value === undefined) throw badParam('expand', `This property cannot be expanded (${path}).`);
  if (value === null) return thing;
  if (Array.isArray(value)) {
    return { ...thing, [step]: value.map((row: Thing) => (rest.length ? open(world, row, rest, path) : row)) };
  }
  const opened = typeof value === 'string' ? lookUp(world, value) : (value as Thing);
  if (!opened) throw badParam('expand', `This property cannot be expanded (${path}).`);
  return { ...thing, [step]: rest.length ? open(world, opened, rest, path) : opened };
}

/** Fields that are left out of an object unless somebody asks to see them. */
function hidden(world: World, thing: Thing, step: string): unknown {
  const id = String(thing['id']);
  if (thing['object'] === 'checkout.session' && step === 'line_items') {
    return pageOf(world.tables.notes.get(id)?.lines ?? [], {}, `/v1/checkout/sessions/${id}/line_items`);
  }
  if (thing['object'] === 'charge' && step === 'refunds') {
    const refunds = world.tables.refunds.newest().filter((refund) => refund.charge === id);
    return pageOf(refunds, {}, `/v1/charges/${id}/refunds`);
  }
  return undefined;
}

function lookUp(world: World, id: string): Thing | undefined {
  const { customers, sessions, intents, charges, refunds, balance } = world.tables;
  const tables = { cus: customers, cs: sessions, pi: intents, ch: charges, py: charges, re: refunds, txn: balance };
  const prefix = id.slice(0, id.indexOf('_'));
  if (!(prefix in tables)) return undefined;
  return tables[prefix as keyof typeof tables].get(id) as Thing | undefined;
}
