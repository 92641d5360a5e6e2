import {
  createCipheriv,
  createDecipheriv,
  createHash,
  createHmac,
  hkdfSync,
  randomBytes,
  randomInt,
} from 'node:crypto';

type Purpose = 'code' | 'token' | 'limit' | 'browser';

/** A key of its own for each purpose, drawn from the server's secret by HKDF (RFC 5869). */
function keyFor(secret: string, purpose: Purpose): Buffer {
  return Buffer.from(hkdfSync('sha256', secret, '', `pourwright ${purpose}`, 32));
}

/** A keyed hash: without the server's secret nobody can try values against it. */
export function keyedHash(secret: string, purpose: Purpose, text: string): string {
  return createHmac('sha256', keyFor(secret, purpose)).update(text).digest('base64url');
}

/** A random token of 256 bits for a link or a session. */
export function newToken(): string {
  return randomBytes(32).toString('base64url');
}

/** Six random digits, to be typed from a mail. */
export function newCode(): string {
  return String(randomInt(1_000_000)).padStart(6, '0');
}

/** How Auth.js keeps a mailed token: SHA-256 over token and secret. */
export function hashMailedToken(secret: string, token: string): string {
  return createHash('sha256').update(`${token}${secret}`).digest('hex');
}

/** How a session's token is kept: whoever reads the table, or a copy of it, cannot use it as a cookie. */
export function hashSessionToken(token: string): string {
  return createHash('sha256').update(token).digest('base64url');
}

/** Encrypts a token with AES-256-GCM; `about` must be given again to open it. */
export function seal(secret: string, token: string, about: string): string {
  const iv = randomBytes(12);
  const cipher = createCipheriv('aes-256-gcm', keyFor(secret, 'token'), iv).setAAD(Buffer.from(about));
  const body = Buffer.concat([cipher.update(token, 'utf8'), cipher.final()]);
  return Buffer.concat([iv, cipher.getAuthTag(), body]).toString('base64url');
}

/** Opens what `seal` closed; throws when anything was changed or the secret is another. */
export function unseal(secret: string, sealed: string, about: string): string {
  const bytes = Buffer.from(sealed, 'base64url');
  const decipher = createDecipheriv('aes-256-gcm', keyFor(secret, 'token'), bytes.subarray(0, 12));
  decipher.setAAD(Buffer.from(about)).setAuthTag(bytes.subarray(12, 28));
  return Buffer.concat([decipher.update(bytes.subarray(28)), decipher.final()]).toString('utf8');
}
