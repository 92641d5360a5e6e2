import { z } from 'zod';
import { sendMail } from '../mail/send';
import { reconcileCheckouts } from '../money/reconcile';
import type { Services } from '../services';
import { sweepSignIns } from '../people/sign-in-sweep';
import { sweepFiles } from '../storage/sweep-files';
import { sweepUploads } from '../uploads/read-upload';
import { lapseDeposits, lapseQuotes, requeueMails } from './clock';

/** Work done outside a request. `payload` is what `queueJob` was given, unchecked. */
export type Job = (services: Services, payload: unknown) => Promise<void>;

const mailPayload = z.object({ mailId: z.uuid() });

/** Every task the worker knows, by the name `queueJob` uses. A room that needs another adds its line here. */
export const TASKS: Record<string, Job> = {
  'send-mail': async (services, payload) => sendMail(services, mailPayload.parse(payload).mailId),
  'lapse-quotes': async (services) => report(services, 'quotes lapsed', await lapseQuotes(services)),
  'lapse-deposits': async (services) => report(services, 'first payments looked at', await lapseDeposits(services)),
  'requeue-mails': async (services) => report(services, 'waiting mails queued again', await requeueMails(services)),
  reconcile: async (services) => report(services, 'payments taken in late', await reconcileCheckouts(services)),
  'sweep-files': async (services) => report(services, 'files nobody needs deleted', await sweepFiles(services)),
  'sweep-sign-ins': async (services) => report(services, 'rows of past sign-ins deleted', await sweepSignIns(services)),
  'sweep-uploads': async (services) => report(services, 'forgotten files deleted', await sweepUploads(services)),
};

/** Tasks that look at the clock: they run at each start and then as written here (minute hour day month weekday, UTC). */
export const CLOCK_TASKS: Record<string, string> = {
  'lapse-quotes': '7 * * * *',
  'lapse-deposits': '17 * * * *',
  'requeue-mails': '*/10 * * * *',
  reconcile: '*/5 * * * *',
  'sweep-sign-ins': '27 * * * *',
  'sweep-files': '37 * * * *',
  'sweep-uploads': '37 * * * *',
};

function report({ log }: Services, what: string, count: number): void {
  if (count > 0) log.info({ count }, what);
}
