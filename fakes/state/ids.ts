import { randomBytes } from 'node:crypto';

const LETTERS = 'ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz0123456789';

/** A fresh id: the prefix followed by `length` random letters and digits, such as `pi_3Xk…`. */
export function freshId(prefix: string, length = 24): string {
  let id = prefix;
  // 248 is the largest multiple of 62 in a byte: bytes from there on are passed over, so no letter is likelier.
  while (id.length < prefix.length + length) {
    for (const byte of randomBytes(length)) {
      if (byte < 248 && id.length < prefix.length + length) id += LETTERS[byte % 62];
    }
  }
  return id;
}
