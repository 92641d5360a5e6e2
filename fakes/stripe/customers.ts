import type Stripe from 'stripe';
import { z } from 'zod';
import { freshId } from '../state/ids';
import { noSuch } from './errors';
import { emit } from './events';
import { inRange, pageOf } from './lists';
import { clearable, metadata, paging, range, readParams } from './params';
import type { Route } from './routes';
import type { World } from './world';

const address = z
  .strictObject({
    line1: clearable,
    line2: clearable,
    city: clearable,
    state: clearable,
    postal_code: clearable,
    country: clearable,
  })
  .optional();

const customerSchema = z.strictObject({
  name: clearable,
  email: z.union([z.literal('').transform(() => null), z.email('This is no e-mail address.')]).optional(),
  phone: clearable,
  description: clearable,
  address,
  preferred_locales: z.array(z.string()).optional(),
  metadata,
});

type CustomerInput = Partial<z.output<typeof customerSchema>>;

/** A new customer on file. Call inside a write. */
export function createCustomer(world: World, input: CustomerInput): Stripe.Customer {
  const id = freshId('cus_', 14);
  const customer = {
    id,
    object: 'customer',
    address: fullAddress(input.address),
    balance: 0,
    created: world.now(),
    currency: null,
    customer_account: null,
    default_source: null,
    delinquent: false,
    description: input.description ?? null,
    discount: null,
    email: input.email ?? null,
    invoice_prefix: id.slice(4, 12).toUpperCase(),
    invoice_settings: {
      custom_fields: null,
      default_payment_method: null,
      footer: null,
      rendering_options: null,
    },
    livemode: false,
    metadata: input.metadata ?? {},
    name: input.name ?? null,
    next_invoice_sequence: 1,
    phone: input.phone ?? null,
    preferred_locales: input.preferred_locales ?? [],
    shipping: null,
    tax_exempt: 'none',
    test_clock: null,
  } satisfies Stripe.Customer;
  world.tables.customers.put(id, customer);
  emit(world, 'customer.created', customer);
  return customer;
}

function updateCustomer(world: World, id: string, input: CustomerInput): Stripe.Customer {
  const before = customerOnFile(world, id);
  const { metadata: pairs, address: place, ...fields } = input;
  const given = Object.fromEntries(Object.entries(fields).filter(([, value]) => value !== undefined));
  const after: Stripe.Customer = {
    ...before,
    ...given,
    address: place ? fullAddress(place) : before.address,
    metadata: mergeMetadata(before.metadata, pairs),
  };
  world.tables.customers.put(id, after);
  emit(world, 'customer.updated', after);
  return after;
}

/** The customer with this id. @throws Refusal (404) when there is none. */
export function customerOnFile(world: World, id: string, param?: string): Stripe.Customer {
  const customer = world.tables.customers.get(id);
  if (!customer) throw noSuch('customer', id, param);
  return customer;
}

/** New pairs over old; an empty value takes a pair away; an empty set takes all. */
export function mergeMetadata(
  before: Stripe.Metadata | null,
  given: Record<string, string> | undefined,
): Stripe.Metadata {
  if (!given) return before ?? {};
  if (Object.keys(given).length === 0) return {};
  return Object.fromEntries(Object.entries({ ...before, ...given }).filter(([, value]) => value !== ''));
}

function fullAddress(given: CustomerInput['address']): Stripe.Address | null {
  if (!given) return null;
  const { line1 = null, line2 = null, city = null, state = null, postal_code = null, country = null } = given;
  return { line1, line2, city, state, postal_code, country };
}

const listSchema = z.strictObject({ ...paging, created: range, email: z.string().optional() });

export const customerRoutes: Route[] = [
  {
    method: 'POST',
    path: '/v1/customers',
    run: ({ world, input }) => createCustomer(world, readParams(customerSchema, input)),
  },
  {
    method: 'GET',
    path: '/v1/customers',
    run: ({ world, input }) => {
      const wanted = readParams(listSchema, input);
      const rows = world.tables.customers
        .newest()
        .filter((customer) => inRange(customer.created, wanted.created))
        .filter((customer) => !wanted.email || customer.email === wanted.email);
      return pageOf(rows, wanted, '/v1/customers');
    },
  },
  {
    method: 'GET',
    path: '/v1/customers/:id',
    run: ({ world, id }) => customerOnFile(world, id),
  },
  {
    method: 'POST',
    path: '/v1/customers/:id',
    run: ({ world, id, input }) => updateCustomer(world, id, readParams(customerSchema, input)),
  },
];
