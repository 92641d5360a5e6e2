import type { APIRoute } from 'astro';
import { z } from 'zod';
import { deskSchema } from '../../../../commission/pricing/desk';
import { answer, json, jsonProblem, readInput } from '../../../../server/door';
import { openDesk, repriceDraft, saveDraft } from '../../../../server/quote/quote-desk';

export const prerender = false;

/** Which of the form's buttons was pressed: save, save and look at what will be frozen, or take today's rates. */
const pressedSchema = z.object({
  act: z.enum(['save', 'review', 'reprice']).default('save'),
  version: z.coerce.number().int().min(0).default(0),
});

/** The draft as it is saved now, for a window that was overtaken by another. */
export const GET: APIRoute = async ({ params, locals }) => {
  const desk = await openDesk(locals.services, locals.user, params['ref']);
  if (!desk.ok) return jsonProblem(desk.problem);
  const { draft, version, revision } = desk.value;
  return json({ ok: true, value: { draft, version, revision } });
};

/** Saves the desk, or puts today's rates into the saved draft. */
export const POST: APIRoute = async (context) => {
  const { services, user } = context.locals;
  const ref = context.params['ref'];
  const page = `/studio/commissions/${ref}/quote`;
  const pressed = await readInput(context, pressedSchema);
  if (!pressed.ok) return answer(context, pressed, { to: page, back: page });
  if (pressed.value.act === 'reprice')
    return answer(context, await repriceDraft(services, user, ref, pressed.value), { to: page, back: page });
  const input = await readInput(context, deskSchema);
  const outcome = input.ok ? await saveDraft(services, user, ref, input.value) : input;
  return answer(context, outcome, { to: pressed.value.act === 'review' ? `${page}?review=1#send` : page, back: page });
};
