// What a person and a test read in the inbox of this machine.
import { expect, test } from 'vitest';
import type { Mail } from '../../fakes/resend/world';
import { runResend } from './rig';

const from = 'Marrowfen Casting House <studio@example.org>';

test('the inbox shows mails newest first and those to one address', async () => {
  const { resend, url } = await runResend();
  await resend.emails.send({ from, to: 'isolde@example.org', subject: 'First letter', text: 'One' });
  await resend.emails.send({ from, to: 'Rafe <Rafe@example.org>', subject: 'Second letter', text: 'Two' });
  await resend.emails.send({ from, to: 'isolde@example.org', subject: 'Third letter', text: 'Three' });
  const all = await (await fetch(url)).text();
  expect([...all.matchAll(/(First|Second|Third) letter/g)].map((found) => found[1])).toEqual([
    'Third',
    'Second',
    'First',
  ]);
  const some = await (await fetch(`${url}/?to=RAFE`)).text();
  expect([...some.matchAll(/(First|Second|Third) letter/g)].map((found) => found[1])).toEqual(['Second']);
  const json = (await (await fetch(`${url}/__inbox?to=rafe@example.org`)).json()) as Mail[];
  expect(json.map((mail) => [mail.subject, mail.text, mail.last_event])).toEqual([
    ['Second letter', 'Two', 'delivered'],
  ]);
});

test('a mail is shown in a frame without scripts, as text, with its head', async () => {
  const { resend, url } = await runResend();
  const html =
    '<p style="color:teal">Ready: <a href="http://localhost:4321/q">see "it"</a></p><script>alert(1)</script>';
  const sent = await resend.emails.send({
    from,
    to: 'bounce@example.org',
    subject: 'Quote <2>',
    html,
    text: 'Ready <now>',
    headers: { 'X-Commission': 'MF-0181' },
    attachments: [{ filename: 'quote.pdf', content: Buffer.alloc(2048) }],
  });
  const answer = await fetch(`${url}/mail/${sent.data?.id}`);
  const page = await answer.text();
  expect(page).toMatch(/<iframe[^>]*sandbox="allow-popups allow-popups-to-escape-sandbox"/);
  expect(page).toContain('&#60;base target=&#34;_blank&#34;&#62;');
  expect(page).not.toContain('<script');
  expect(page).toContain('Quote &#60;2&#62;');
  expect(page).toContain('Ready &#60;now&#62;');
  expect(page).toContain('quote.pdf, 2 kB');
  expect(page).toContain('MF-0181');
  expect(page).toContain('bounced');
  expect(page).toContain('No mail leaves this machine');
  expect(answer.headers.get('content-security-policy')).toContain("default-src 'none'");
  expect((await fetch(`${url}/mail/none`)).status).toBe(404);
});

test('a long inbox goes on to older mails', async () => {
  const { resend, url } = await runResend();
  const many = Array.from({ length: 60 }, (_, index) => ({
    from,
    to: 'a@example.org',
    subject: `Letter ${index}.`,
    text: 'x',
  }));
  await resend.batch.send(many);
  const first = await (await fetch(url)).text();
  expect(first).toContain('60 mails');
  expect(first).not.toContain('Letter 9.');
  const older = /href="([^"]*)">Older mails/.exec(first)?.[1]?.replaceAll('&#38;', '&');
  expect(await (await fetch(`${url}${older}`)).text()).toContain('Letter 9.');
});
