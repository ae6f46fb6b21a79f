import { randomBytes, scrypt, timingSafeEqual } from 'node:crypto';

/** scrypt with OWASP's figures (N = 2^16, r = 8, p = 1: 64 MiB), RFC 7914. */
const N = 2 ** 16;
const R = 8;
const P = 1;
const KEY_BYTES = 32;
const MAX_MEMORY = 256 * N * R;

function derive(password: string, salt: Buffer): Promise<Buffer> {
  return new Promise((resolve, reject) => {
    scrypt(
      password.normalize('NFKC'),
      salt,
      KEY_BYTES,
      { N, r: R, p: P, maxmem: MAX_MEMORY },
      (error, key) => (error ? reject(error) : resolve(key)),
    );
  });
}

export async function hashPassword(password: string): Promise<string> {
  const salt = randomBytes(16);
  const key = await derive(password, salt);
  return `scrypt:${salt.toString('base64url')}:${key.toString('base64url')}`;
}

export async function passwordFits(password: string, stored: string): Promise<boolean> {
  const [kind, salt, key] = stored.split(':');
  if (kind !== 'scrypt' || !salt || !key) return false;
  const expected = Buffer.from(key, 'base64url');
  const actual = await derive(password, Buffer.from(salt, 'base64url'));
  return expected.length === actual.length && timingSafeEqual(expected, actual);
}

/** What is tried first everywhere; more than these is the rate limit's business. From memory of published lists. */
const COMMON = new Set([
  'password',
  'password1',
  'password12',
  'password123',
  'password1234',
  'passw0rd',
  'p@ssw0rd',
  'qwertyuiop',
  'qwerty12345',
  'qwerty1234',
  '1234567890',
  '12345678910',
  '123456789012',
  '0123456789',
  '0987654321',
  '1111111111',
  '0000000000',
  'iloveyou12',
  'iloveyou123',
  'letmein123',
  'welcome123',
  'welcome1234',
  'admin12345',
  'administrator',
  'changeme123',
  'changeme1234',
  'football123',
  'baseball123',
  'superman123',
  'sunshine123',
  'princess123',
  'dragon12345',
  'monkey12345',
  'trustno1234',
  'abcdefghij',
  'abcdefghijk',
  'abc1234567',
  'asdfghjkl1',
  'zaq12wsxcde',
  '1q2w3e4r5t',
  '1qaz2wsx3edc',
  'qazwsxedcrfv',
  'elbowroom1',
  'elbowroom123',
]);

/** A shorter e-mail name stands in too many good passwords by chance. */
const SHORTEST_TELLTALE = 4;

/** Why a new password is not accepted, or null. Length is the schema's matter. */
export function passwordObjection(password: string, email: string): string | null {
  const plain = password.toLowerCase();
  if (COMMON.has(plain) || /^(.)\1+$/.test(plain))
    return 'This password is on every list of common ones. Choose another.';
  const mailName = email.split('@')[0]!.toLowerCase();
  if (mailName.length >= SHORTEST_TELLTALE && plain.includes(mailName) && plain.length < 16)
    return 'This password contains your e-mail name. Choose another.';
  return null;
}
