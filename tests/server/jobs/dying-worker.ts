import { Resend } from 'resend';
import { readConfig } from '../../../src/server/config';
import { startWorker } from '../../../src/server/jobs/worker';
import { createServices } from '../../../src/server/services';

/**
 * A job worker that is killed the moment the mail service has taken a mail, before the outbox hears of it.
 * Arguments: the database, the mail service.
 */
const [databaseUrl, mailUrl] = process.argv.slice(2);
const config = { ...readConfig({ LOG_LEVEL: 'silent' }), databaseUrl: databaseUrl! };
const resend = new Resend('re_pourwright', { baseUrl: mailUrl });
const send = resend.emails.send.bind(resend.emails);
resend.emails.send = async (...given) => {
  await send(...given);
  process.kill(process.pid, 'SIGKILL');
  return new Promise(() => undefined);
};
await startWorker(createServices(config, { resend }));
