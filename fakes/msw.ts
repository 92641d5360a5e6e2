import { http, type HttpHandler } from 'msw';
import { createResendFake, type ResendFake, type ResendFakeOptions } from './resend/fake';
import { createStripeFake, type StripeFake, type StripeFakeOptions } from './stripe/fake';
import { fromFetch, toFetch, type Handle } from './web/message';

export type FakedServices = {
  handlers: HttpHandler[];
  stripe: StripeFake;
  resend: ResendFake;
  close: () => Promise<void>;
};

/**
 * Both fakes in this process behind the services' real hosts, for `setupServer(...handlers)`: nothing listens and
 * nothing leaves. Give `send` to see the webhooks.
 */
export function fakeServices(options: { stripe?: StripeFakeOptions; resend?: ResendFakeOptions } = {}): FakedServices {
  const stripe = createStripeFake(options.stripe);
  const resend = createResendFake(options.resend);
  return {
    handlers: [route('https://api.stripe.com/*', stripe.handle), route('https://api.resend.com/*', resend.handle)],
    stripe,
    resend,
    close: async () => {
      await Promise.all([stripe.close(), resend.close()]);
    },
  };
}

function route(address: string, handle: Handle): HttpHandler {
  return http.all(address, async ({ request }) => toFetch(await handle(await fromFetch(request))));
}
