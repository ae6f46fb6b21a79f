import { createHash, randomBytes } from 'node:crypto';

/** 256 random bits, for a cookie, a link or a code. */
export function newToken(): string {
  return randomBytes(32).toString('base64url');
}

/** Only this is stored, so that a copy of the database opens nothing. */
export function tokenHash(token: string): string {
  return createHash('sha256').update(token).digest('hex');
}

export function newId(): string {
  return randomBytes(12).toString('base64url');
}
