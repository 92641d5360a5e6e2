import type { GetEmailResponseSuccess, GetWebhookResponseSuccess, WebhookEvent, WebhookEventPayload } from 'resend';
import type { DeliveryQueue } from '../state/deliveries';
import type { FaultSwitches } from '../state/faults';
import type { Store, Table } from '../state/store';

/** A mail as kept: what the API shows of it, and what only the inbox page shows. */
export type Mail = GetEmailResponseSuccess & {
  headers: Record<string, string>;
  /** `inline` is what the HTML shows by `cid:`, kept so that the inbox can show it too. */
  attachments: { filename: string; bytes: number; inline?: { contentId: string; dataUri: string } }[];
  /** What became of it, oldest first. */
  history: { event: WebhookEvent; at: string }[];
  /** Unix milliseconds at which the receiving side answers; null once it has. */
  outcomeAt: number | null;
};

export type KeptEvent = { id: string; payload: WebhookEventPayload };

export type Tables = {
  mails: Table<Mail>;
  events: Table<KeptEvent>;
  webhooks: Table<GetWebhookResponseSuccess>;
};

/** Everything a request may touch. */
export type World = {
  store: Store;
  tables: Tables;
  deliveries: DeliveryQueue;
  faults: FaultSwitches;
  now: () => Date;
  /** Milliseconds between the sending of a mail and the answer of the receiving side. */
  outcomeAfterMs: number;
};
