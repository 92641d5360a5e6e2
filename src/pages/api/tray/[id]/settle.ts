import type { APIRoute } from 'astro';
import { answer } from '../../../../server/door';
import { settleTrayItem } from '../../../../server/tray';

export const prerender = false;

/** The owner has dealt with something in the tray. */
export const POST: APIRoute = async (context) => {
  const outcome = await settleTrayItem(context.locals.services, context.locals.user, context.params['id']);
  return answer(context, outcome, { to: '/studio/tray', back: '/studio/tray' });
};
