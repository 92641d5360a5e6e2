import type { APIRoute } from 'astro';
import { answer } from '../../../../server/door';
import { benchPage } from '../../../../server/making/bench-page';
import { addPhoto } from '../../../../server/making/receive-photo';

export const prerender = false;

/** A photo from the bench (multipart: file, clientId, stage, caption, alt, piece, takenAt). */
export const POST: APIRoute = async (context) => {
  const page = benchPage(context.params['ref'], context.url);
  const outcome = await addPhoto(context.locals.services, context.locals.user, context.params['ref'], context.request);
  return answer(context, outcome, { to: page, back: page });
};
