import { Resend } from 'resend';
import { startResendFake } from '../../../fakes/start';
import type { ResendFakeOptions } from '../../../fakes/resend/fake';
import type { Services } from '../../../src/server/services';
import { createTestServices } from '../../setup/database';

const WEBHOOK_SECRET = 'whsec_cG91cndyaWdodC1kZW1v';

/** A mail as the local mail service's inbox lists it. */
export interface InboxMail {
  id: string;
  to: string[];
  subject: string;
  html: string;
  text: string;
  reply_to: string[] | null;
  tags: { name: string; value: string }[];
  last_event: string;
}

/** An event as it was posted to us, kept instead of being sent. */
export interface Posted {
  body: string;
  headers: Headers;
}

/** Services over an empty database, with a mail service of this test alone. The clock stands until it is moved. */
export async function openPostOffice(options: ResendFakeOptions = {}) {
  const posted: Posted[] = [];
  const running = await startResendFake({
    webhook: { url: 'http://127.0.0.1:9/api/resend/webhook', secret: WEBHOOK_SECRET },
    send: (parcel) => {
      posted.push({ body: parcel.body, headers: new Headers(parcel.headers) });
      return Promise.resolve(200);
    },
    outcomeAfterMs: 1,
    ...options,
  });
  let now = new Date();
  const { services, drop } = await createTestServices({
    resend: new Resend('re_pourwright', { baseUrl: running.url }),
    now: () => now,
  });
  return {
    services: services satisfies Services,
    posted,
    faults: running.fake.faults,
    url: running.url,
    inbox: async () => (await (await fetch(`${running.url}/__inbox`)).json()) as InboxMail[],
    setNow: (instant: Date) => (now = instant),
    close: async () => {
      await running.close();
      await drop();
    },
  };
}
export type PostOffice = Awaited<ReturnType<typeof openPostOffice>>;
