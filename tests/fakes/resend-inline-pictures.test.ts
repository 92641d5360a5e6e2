import { Resend } from 'resend';
import { expect, test } from 'vitest';
import { startResendFake } from '../../fakes/start';

test('a picture enclosed by content id shows in the inbox, and its bytes stay out of the lists', async () => {
  const running = await startResendFake();
  try {
    const resend = new Resend('re_pourwright', { baseUrl: running.url });
    const content = Buffer.from('not really a jpeg');
    const { data } = await resend.emails.send({
      from: 'Studio <studio@example.org>',
      to: 'isolde@example.org',
      subject: 'A photo',
      html: '<img src="cid:tip" alt="The tip">',
      attachments: [{ filename: 'tip.jpg', content, contentType: 'image/jpeg', contentId: 'tip' }],
    });
    const page = await (await fetch(`${running.url}/mail/${data?.id}`)).text();
    expect(page).toContain(`data:image/jpeg;base64,${content.toString('base64')}`);
    const inbox = (await (await fetch(`${running.url}/__inbox`)).json()) as { attachments: object[] }[];
    expect(inbox[0]?.attachments).toEqual([{ filename: 'tip.jpg', bytes: content.length }]);
  } finally {
    await running.close();
  }
});
