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
  const stream = newsStream((listener) => watchCommission(services, found.value.id, listener), request.signal);
  return new Response(stream, {
    headers: { 'content-type': 'text/event-stream', 'cache-control': 'no-store', 'x-accel-buffering': 'no' },
  });
};

/** The stream of one reader: it ends, and lets go of everything, when the reader leaves or the news cannot be had. */
function newsStream(watch: (listener: () => void) => Promise<() => void>, left: AbortSignal) {
  const encoder = new TextEncoder();
  const ends: (() => void)[] = [];
  let over = false;
  const end = () => {
    over = true;
    for (const each of ends.splice(0)) each();
  };
  return new ReadableStream<Uint8Array>({
    async start(controller) {
      const say = (text: string) => {
        if (!over) controller.enqueue(encoder.encode(text));
      };
      const unwatch = await watch(() => say('event: news\ndata: {}\n\n'));
      const beat = setInterval(() => say(': still here\n\n'), BEAT_MS);
      ends.push(unwatch, () => clearInterval(beat));
      if (over || left.aborted) return end();
      left.addEventListener('abort', end, { once: true });
      say('retry: 2000\nevent: ready\ndata: {}\n\n');
    },
    cancel: end,
  });
}
