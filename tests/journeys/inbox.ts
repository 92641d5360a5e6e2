import { places, until, type Places } from './studio';

/** A mail as the inbox holds it. */
export interface ReceivedMail {
  id: string;
  to: string[];
  subject: string;
  html: string;
  text: string;
  created_at: string;
  tags: { name: string; value: string }[];
}

/** All mails to exactly this address, oldest first. */
export async function mailsTo(address: string, { inboxUrl }: Places = places): Promise<ReceivedMail[]> {
  const response = await fetch(`${inboxUrl}/__inbox?to=${encodeURIComponent(address)}`);
  return ((await response.json()) as ReceivedMail[]).reverse();
}

/** The catalogue id of a mail's letter, such as "M12". */
export function letterOf(mail: ReceivedMail): string {
  return mail.tags.find((tag) => tag.name === 'letter')?.value ?? '';
}

/** The newest mail of a letter to this address, once it is there; `count` of them must be. */
export function mailOf(address: string, letter: string, count = 1, where: Places = places): Promise<ReceivedMail> {
  return until(`mail ${letter} number ${count} to ${address}`, async () => {
    const mails = (await mailsTo(address, where)).filter((mail) => letterOf(mail) === letter);
    return mails.length >= count && mails.at(-1);
  });
}

/** The link and the code of a sign-in mail. */
export function signInParts(mail: ReceivedMail): { link: string; code: string } {
  const link = /https?:\/\/\S+\/sign-in\/confirm\?\S+/.exec(mail.text)?.[0];
  const code = /\b(\d{3}) ?(\d{3})\b/.exec(mail.text);
  if (!link || !code) throw new Error(`the mail "${mail.subject}" carries no link or no code:\n${mail.text}`);
  return { link, code: `${code[1]}${code[2]}` };
}

/** The first link of a mail that leads to a path beginning with `path`. */
export function linkTo(mail: ReceivedMail, path: string): string {
  const links = mail.text.match(/https?:\/\/[^\s)\]>]+/g) ?? [];
  const found = links.find((link) => new URL(link).pathname.startsWith(path));
  if (!found) throw new Error(`the mail "${mail.subject}" has no link to ${path}:\n${mail.text}`);
  return found;
}
