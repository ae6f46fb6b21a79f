import { randomBytes, timingSafeEqual } from 'node:crypto';
import { tokenHash } from './tokens';

/** The one-time code for the first owner: printed by the server, gone with it, useless once there is an owner. */
export class SetupCode {
  private readonly hash: string;
  /** In groups, for reading off a terminal. */
  readonly shown: string;
  private used = false;

  constructor() {
    const code = randomBytes(16).toString('hex');
    this.shown = code.match(/.{4}/g)!.join('-');
    this.hash = tokenHash(code);
  }

  fits(typed: string): boolean {
    if (this.used) return false;
    const given = tokenHash(typed.toLowerCase().replace(/[^0-9a-f]/g, ''));
    return timingSafeEqual(Buffer.from(given), Buffer.from(this.hash));
  }

  spend(): void {
    this.used = true;
  }
}
