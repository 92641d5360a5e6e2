import type { APIRoute } from 'astro';
import { answer } from '../../../../server/door';
import { recordDelivery } from '../../../../server/making/finishing';

export const prerender = false;

/** The parcel arrived, says the customer or the owner. */
export const POST: APIRoute = async (context) => {
  const { services, user } = context.locals;
  const ref = context.params['ref'];
  const page = user?.role === 'owner' ? `/studio/commissions/${ref}` : `/commissions/${ref}`;
  return answer(context, await recordDelivery(services, user, ref), { to: page, back: page });
};
