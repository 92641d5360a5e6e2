import { sql } from 'drizzle-orm';
import { uuidv7 } from 'uuidv7';
import { z } from 'zod';
import { done, type Outcome } from '../../commission/problem';
import { addressSchema } from '../auth/address';
import { isKnownBrowser } from '../auth/known-browser';
import { limit } from '../auth/limit';
import { safeNext } from '../auth/next-path';
import { hashMailedToken, keyedHash, newCode, newToken, seal } from '../auth/secrets';
import type { Visitor } from '../auth/visitor';
import type { Db } from '../db/client';
import { signInRequests, verificationTokens } from '../db/schema/people';
import type { LetterData } from '../mail/letter-data';
import { queueMail } from '../outbox';
import type { Services } from '../services';

/** For so long a mailed link and its code can be used (ASVS 5.0, 6.5.5: ten minutes at most). */
export const LINK_MINUTES = 10;
export const CODE_TRIES = 5;

export const signInSchema = z.object({
  email: addressSchema,
  next: z.string().optional().transform(safeNext),
});

/**
 * Mails a link and a code to an address. Every address is treated alike, whether somebody is registered under it or
 * not: an unknown one becomes a customer when its link is used, so there is nothing here to be found out.
 */
export async function requestSignIn(
  services: Services,
  visitor: Visitor,
  input: z.output<typeof signInSchema>,
): Promise<Outcome<{ minutes: number }>> {
  const known = isKnownBrowser(services.config.authSecret, input.email, visitor.knownBrowser);
  const fromClient = await limit(services, 'link-client', visitor.client);
  if (!fromClient.ok) return fromClient;
  const toAddress = await limit(services, known ? 'link-known-browser' : 'link-address', input.email);
  if (!toAddress.ok) return toAddress;
  await services.db.transaction((tx) => mailSignIn(tx, services, input));
  return done({ minutes: LINK_MINUTES });
}

/** An address to be signed in, and what the mail says beside the link. */
export interface SignInMail extends Pick<LetterData['M0'], 'enquiry' | 'invitedAs'> {
  /** Normalised, as `normaliseAddress` gives it. */
  email: string;
  /** Page to land on, as `safeNext` gives it; blank means the role's own first page. */
  next: string;
}

/**
 * Writes the token, its code and the mail M0 in the caller's transaction. The table keeps the token hashed for
 * Auth.js and sealed for the code; in clear it is in the mail alone, whose row is wiped once sent.
 */
export async function mailSignIn(tx: Db, services: Services, mail: SignInMail): Promise<void> {
  const { authSecret, publicUrl } = services.config;
  const [id, token, code] = [uuidv7(), newToken(), newCode()];
  const expiresAt = sql`now() + make_interval(mins => ${LINK_MINUTES})`;
  await tx.insert(signInRequests).values({
    id,
    email: mail.email,
    codeHash: hashCode(authSecret, id, code),
    sealedToken: seal(authSecret, token, id),
    next: mail.next,
    triesLeft: CODE_TRIES,
    expiresAt,
  });
  await tx
    .insert(verificationTokens)
    .values({ identifier: mail.email, token: hashMailedToken(authSecret, token), expires: expiresAt });
  await queueMail(tx, {
    letter: 'M0',
    to: mail.email,
    cause: `M0:${id}`,
    data: {
      link: `${publicUrl}/sign-in/confirm?request=${id}&token=${token}`,
      code,
      minutes: LINK_MINUTES,
      ...(mail.enquiry && { enquiry: mail.enquiry }),
      ...(mail.invitedAs && { invitedAs: mail.invitedAs }),
    },
    at: services.now(),
  });
}

/** How a code is kept: hashed under the server's key, for its own request alone. */
export function hashCode(secret: string, requestId: string, code: string): string {
  return keyedHash(secret, 'code', `${requestId} ${code}`);
}
