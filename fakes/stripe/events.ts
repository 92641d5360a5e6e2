import type Stripe from 'stripe';
import { z } from 'zod';
import type { Delivery } from '../state/deliveries';
import { freshId } from '../state/ids';
import { noSuch } from './errors';
import { inRange, pageOf, type ListAnswer } from './lists';
import { paging, range, readParams, yesNo } from './params';
import type { Route } from './routes';
import { API_VERSION, type KeptEvent, type World } from './world';

/** An event as the API and the webhooks show it. */
export type EventOnWire = KeptEvent & { pending_webhooks: number };

/**
 * Records that something happened to `object` and queues a webhook for every endpoint that wants to know. Call inside
 * the write that made it happen.
 */
export function emit(world: World, type: Stripe.Event.Type, object: { id: string }): void {
  const id = freshId('evt_');
  world.tables.events.put(id, {
    id,
    object: 'event',
    api_version: API_VERSION,
    created: world.now(),
    data: { object: object as unknown as Stripe.Event.Data.Object },
    livemode: false,
    request: world.cause,
    type,
  });
  for (const endpoint of world.tables.endpoints.all()) {
    if (endpoint.enabled_events.includes('*') || endpoint.enabled_events.includes(type)) {
      for (let copy = 0; copy < world.faults.webhookCopies; copy += 1) world.deliveries.add(id, endpoint.id);
    }
  }
}

/** Queues an event once more for every endpoint there is. Call inside a write. */
export function emitAgain(world: World, id: string): void {
  const event = world.tables.events.get(id);
  if (!event) throw noSuch('event', id);
  for (const endpoint of world.tables.endpoints.all()) world.deliveries.add(id, endpoint.id);
}

/** An event with the number of its webhooks that have not arrived. */
export function eventOnWire(event: KeptEvent, deliveries: Delivery[]): EventOnWire {
  return { ...event, pending_webhooks: deliveries.filter((delivery) => delivery.state !== 'delivered').length };
}

const listSchema = z.strictObject({
  ...paging,
  created: range,
  type: z.string().optional(),
  types: z.array(z.string()).max(20).optional(),
  delivery_success: yesNo.optional(),
});

function list(world: World, input: z.output<typeof listSchema>): ListAnswer<EventOnWire> {
  const wanted = world.tables.events
    .newest()
    .filter((event) => inRange(event.created, input.created))
    .filter((event) => !input.type || matches(event.type, input.type))
    .filter((event) => !input.types || input.types.some((type) => matches(event.type, type)))
    .map((event) => eventOnWire(event, world.deliveries.of(event.id)))
    .filter(
      (event) => input.delivery_success === undefined || (event.pending_webhooks === 0) === input.delivery_success,
    );
  return pageOf(wanted, input, '/v1/events');
}

/** `charge.*` stands for every event about a charge. */
function matches(type: string, pattern: string): boolean {
  return pattern.endsWith('*') ? type.startsWith(pattern.slice(0, -1)) : type === pattern;
}

export const eventRoutes: Route[] = [
  {
    method: 'GET',
    path: '/v1/events',
    run: ({ world, input }) => list(world, readParams(listSchema, input)),
  },
  {
    method: 'GET',
    path: '/v1/events/:id',
    run: ({ world, id }) => {
      const event = world.tables.events.get(id);
      if (!event) throw noSuch('event', id);
      return eventOnWire(event, world.deliveries.of(id));
    },
  },
];
