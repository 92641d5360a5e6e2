import type { APIRoute } from 'astro';
import { findCommission } from '../../../../server/commissions';
import { jsonProblem } from '../../../../server/door';
import { watchCommission } from '../../../../server/live';

export const prerender = false;

const BEAT_MS = 25_000;

/** Server-sent events: one `news` event each time this commission's history grows; the page then reads itself again. */
export const GET: APIRoute = async ({ params, locals, request }) => {
  const { services, user } = locals;
  const found = await findCommission(services, user, params['ref'], 'commission:read');
  if (!found.ok) return jsonProblem(found.problem);
  const commissionId = found.value.id;
  const encoder = new TextEncoder();
  let stop = () => {};
  const body = new ReadableStream<Uint8Array>({
    async start(controller) {
      const say = (text: string) => controller.enqueue(encoder.encode(text));
      const beat = setInterval(() => say(': still here\n\n'), BEAT_MS);
      const unwatch = await watchCommission(services, commissionId, () => say('event: news\ndata: {}\n\n'));
      stop = () => {
        clearInterval(beat);
        unwatch();
      };
      if (request.signal.aborted) return stop();
      request.signal.addEventListener('abort', stop, { once: true });
      say('retry: 2000\nevent: ready\ndata: {}\n\n');
    },
    cancel() {
      stop();
    },
  });
  return new Response(body, {
    headers: { 'content-type': 'text/event-stream', 'cache-control': 'no-store', 'x-accel-buffering': 'no' },
  });
};
