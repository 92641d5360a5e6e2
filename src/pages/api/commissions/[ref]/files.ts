import type { APIRoute } from 'astro';
import { addCommissionFile } from '../../../../server/enquiry/commission-files';
import { answer } from '../../../../server/door';

export const prerender = false;

/** One more file for a commission (multipart: `file`, `clientId`). */
export const POST: APIRoute = async (context) => {
  const { services, user, browserId } = context.locals;
  const ref = context.params['ref'];
  const page = user?.role === 'owner' ? `/studio/commissions/${ref}` : `/commissions/${ref}`;
  const outcome = await addCommissionFile(services, user, browserId, ref, context.request);
  return answer(context, outcome, { to: `${page}#files`, back: `${page}?at=files#files` });
};
