import { z } from 'zod';

/**
 * One plain mail address: the grammar of the HTML standard's `<input type=email>` (html.spec.whatwg.org, "valid
 * e-mail address"), narrowed to no backtick and at least one dot in the domain. No names, no lists, no comments.
 */
const PLAIN = /^[a-z0-9.!#$%&'*+/=?^_{|}~-]{1,64}@(?:[a-z0-9](?:[a-z0-9-]{0,61}[a-z0-9])?\.)+[a-z0-9-]{1,62}[a-z0-9]$/;

/** The one spelling an address is kept and compared in, or null when it is not exactly one plain address. */
export function normaliseAddress(typed: string): string | null {
  const address = typed.normalize('NFKC').trim().toLowerCase();
  return address.length <= 254 && PLAIN.test(address) ? address : null;
}

/** A typed address, normalised. */
export const addressSchema = z
  .string({ error: 'Type your mail address; we send the link and the code there.' })
  .max(400, { error: 'This is longer than a mail address can be.' })
  .transform((typed, context) => {
    const address = normaliseAddress(typed);
    if (address) return address;
    context.addIssue({
      code: 'custom',
      message: 'This is not one mail address. It should look like name@example.org, without commas or spaces.',
    });
    return z.NEVER;
  });
