import { createHmac } from 'node:crypto';
import { z } from 'zod';
import type { Delivery, Parcel } from '../state/deliveries';
import { freshId } from '../state/ids';
import { without } from '../state/rows';
import { mergeMetadata } from './customers';
import { noSuch } from './errors';
import { eventOnWire } from './events';
import { pageOf } from './lists';
import { clearable, metadata, paging, readParams, yesNo } from './params';
import type { Route } from './routes';
import { API_VERSION, type World } from './world';

const address = z.string().refine((text) => /^https?:\/\//.test(text) && URL.canParse(text), 'Not a valid URL');
const createSchema = z.strictObject({
  url: address,
  enabled_events: z.array(z.string().min(1)).min(1),
  description: clearable,
  metadata,
  api_version: z.literal(API_VERSION, `This stand-in writes events of ${API_VERSION} only.`).optional(),
});
const updateSchema = z.strictObject({
  url: address.optional(),
  enabled_events: z.array(z.string().min(1)).min(1).optional(),
  description: clearable,
  metadata,
  disabled: yesNo.optional(),
});

type Endpoint = ReturnType<World['tables']['endpoints']['all']>[number];

function createEndpoint(world: World, input: z.output<typeof createSchema>): Endpoint {
  const id = freshId('we_1');
  return world.tables.endpoints.put(id, {
    ...describe(id, input.url, input.enabled_events, world.now()),
    api_version: input.api_version ?? null,
    description: input.description ?? null,
    metadata: input.metadata ?? {},
    secret: freshId('whsec_', 32),
  });
}

function describe(id: string, url: string, events: string[], now: number) {
  return {
    id,
    object: 'webhook_endpoint' as const,
    api_version: null,
    application: null,
    created: now,
    description: null,
    enabled_events: events,
    livemode: false,
    metadata: {},
    status: 'enabled',
    url,
  };
}

/** The endpoint named at start: keeps its id, so what waited for it goes to the new address. */
export function setStartEndpoint(world: World, url: string, secret: string): void {
  const id = 'we_named_at_start';
  const endpoint = { ...describe(id, url, ['*'], world.now()), secret };
  world.store.write(() => world.tables.endpoints.put(id, endpoint));
}

/** Addresses and signs one attempt: `t=<seconds>,v1=<HMAC-SHA-256 of "t.body">`, which the SDK checks. */
export function packEvent(world: World, delivery: Delivery): Parcel | null {
  const endpoint = world.tables.endpoints.get(delivery.endpoint);
  const event = world.tables.events.get(delivery.event);
  if (!endpoint || !event || endpoint.status !== 'enabled') return null;
  const body = JSON.stringify(eventOnWire(event, world.deliveries.of(event.id)), null, 2);
  const seconds = Math.floor(Date.now() / 1000);
  const signature = createHmac('sha256', endpoint.secret).update(`${seconds}.${body}`).digest('hex');
  const headers = {
    'content-type': 'application/json; charset=utf-8',
    'stripe-signature': `t=${seconds},v1=${signature}`,
    'user-agent': 'Stripe/1.0 (local stand-in)',
  };
  return { url: endpoint.url, headers, body };
}

/** The secret is shown once, in the answer to the creation. */
function withoutSecret(endpoint: Endpoint): Omit<Endpoint, 'secret'> {
  return without(endpoint, 'secret');
}

function endpointOnFile(world: World, id: string): Endpoint {
  const endpoint = world.tables.endpoints.get(id);
  if (!endpoint) throw noSuch('webhook endpoint', id);
  return endpoint;
}

function updateEndpoint(world: World, id: string, input: z.output<typeof updateSchema>): Endpoint {
  const before = endpointOnFile(world, id);
  return world.tables.endpoints.put(id, {
    ...before,
    url: input.url ?? before.url,
    enabled_events: input.enabled_events ?? before.enabled_events,
    description: input.description === undefined ? before.description : input.description,
    metadata: mergeMetadata(before.metadata, input.metadata),
    status: input.disabled === undefined ? before.status : input.disabled ? 'disabled' : 'enabled',
  });
}

export const endpointRoutes: Route[] = [
  {
    method: 'POST',
    path: '/v1/webhook_endpoints',
    run: ({ world, input }) => createEndpoint(world, readParams(createSchema, input)),
  },
  {
    method: 'GET',
    path: '/v1/webhook_endpoints',
    run: ({ world, input }) =>
      pageOf(
        world.tables.endpoints.newest().map(withoutSecret),
        readParams(z.strictObject(paging), input),
        '/v1/webhook_endpoints',
      ),
  },
  {
    method: 'GET',
    path: '/v1/webhook_endpoints/:id',
    run: ({ world, id }) => withoutSecret(endpointOnFile(world, id)),
  },
  {
    method: 'POST',
    path: '/v1/webhook_endpoints/:id',
    run: ({ world, id, input }) => withoutSecret(updateEndpoint(world, id, readParams(updateSchema, input))),
  },
  {
    method: 'DELETE',
    path: '/v1/webhook_endpoints/:id',
    run: ({ world, id }) => {
      endpointOnFile(world, id);
      world.tables.endpoints.remove(id);
      return { id, object: 'webhook_endpoint', deleted: true };
    },
  },
];
