import type { APIRoute } from 'astro';
import { parcelAddressSchema } from '../../../../commission/parcel-address';
import { answer, readInput } from '../../../../server/door';
import { setParcelAddress } from '../../../../server/making/parcel-address';

export const prerender = false;

/** Where the parcel goes. */
export const POST: APIRoute = async (context) => {
  const { services, user } = context.locals;
  const ref = context.params['ref'];
  const page = user?.role === 'owner' ? `/studio/commissions/${ref}` : `/commissions/${ref}`;
  const input = await readInput(context, parcelAddressSchema);
  const outcome = input.ok ? await setParcelAddress(services, user, ref, input.value) : input;
  return answer(context, outcome, { to: `${page}#address`, back: `${page}#address` });
};
