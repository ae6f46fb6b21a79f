import { EventEmitter } from 'node:events';
import type { IncomingHttpHeaders } from 'node:http';
import { eq, lt, or } from 'drizzle-orm';
import type { Role } from '../../shared/team/roles';
import type { Database } from '../db/database';
import { people, sessions } from '../db/schema';
import { newId, newToken, tokenHash } from './tokens';

/** A session ends this long after it was last used, and in any case this long after sign-in. */
const IDLE_MS = 7 * 24 * 3600_000;
const LIFETIME_MS = 30 * 24 * 3600_000;
/** How often "last used" is written: not on every request. */
const TOUCH_MS = 60_000;

export interface SignedIn {
  sessionId: string;
  person: { id: string; name: string; email: string; role: Role };
}

/** Who is signed in where. The cookie holds a random token; the table only its hash. */
export class Sessions {
  private readonly ended = new EventEmitter().setMaxListeners(50);

  constructor(
    private readonly db: Database,
    private readonly wallMs: () => number,
    /** `__Host-` and Secure need TLS; plain HTTP on loopback has neither. */
    private readonly secure: boolean,
    private readonly log: { warn(message: string): void },
  ) {}

  private get cookieName(): string {
    return this.secure ? '__Host-elbowroom' : 'elbowroom';
  }

  /** Called with the id of every session that ends, by whatever cause. */
  onEnded(listener: (sessionId: string) => void): void {
    this.ended.on('ended', listener);
  }

  /** Returns the Set-Cookie line of a new session. */
  begin(personId: string, address: string): string {
    const token = newToken();
    const now = this.wallMs();
    this.db.transaction((tx) => {
      tx.insert(sessions)
        .values({
          id: newId(),
          tokenHash: tokenHash(token),
          personId,
          createdAtMs: now,
          usedAtMs: now,
          expiresAtMs: now + LIFETIME_MS,
          address,
        })
        .run();
      tx.update(people).set({ lastSeenMs: now }).where(eq(people.id, personId)).run();
    });
    return this.cookie(token, Math.floor(LIFETIME_MS / 1000));
  }

  /** The Set-Cookie line that takes the cookie away. */
  farewellCookie(): string {
    return this.cookie('', 0);
  }

  private cookie(value: string, maxAgeS: number): string {
    const secure = this.secure ? '; Secure' : '';
    return `${this.cookieName}=${value}; Path=/; HttpOnly; SameSite=Strict; Max-Age=${maxAgeS}${secure}`;
  }

  find(headers: IncomingHttpHeaders): SignedIn | null {
    const token = cookieValue(headers.cookie, this.cookieName);
    if (!token) return null;
    const row = this.db
      .select({
        sessionId: sessions.id,
        usedAtMs: sessions.usedAtMs,
        expiresAtMs: sessions.expiresAtMs,
        id: people.id,
        name: people.name,
        email: people.email,
        role: people.role,
        disabled: people.disabled,
      })
      .from(sessions)
      .innerJoin(people, eq(people.id, sessions.personId))
      .where(eq(sessions.tokenHash, tokenHash(token)))
      .get();
    if (!row || row.disabled) return null;
    const now = this.wallMs();
    if (now > row.expiresAtMs || now - row.usedAtMs > IDLE_MS) return null;
    if (now - row.usedAtMs > TOUCH_MS) this.touch(row.sessionId, row.id, now);
    const { sessionId, id, name, email } = row;
    return { sessionId, person: { id, name, email, role: row.role as Role } };
  }

  /** A full disk must not keep a signed-in person from stopping an arm, so failing to note the time is no failure. */
  private touch(sessionId: string, personId: string, now: number): void {
    try {
      this.db.transaction((tx) => {
        tx.update(sessions).set({ usedAtMs: now }).where(eq(sessions.id, sessionId)).run();
        tx.update(people).set({ lastSeenMs: now }).where(eq(people.id, personId)).run();
      });
    } catch (error) {
      this.log.warn(`the time of last use could not be written: ${String(error)}`);
    }
  }

  /** Ends every session of a person: sign-out, disabling, a new role. */
  endAllOf(personId: string): void {
    const gone = this.db
      .delete(sessions)
      .where(eq(sessions.personId, personId))
      .returning({ id: sessions.id })
      .all();
    for (const { id } of gone) this.ended.emit('ended', id);
  }

  /** Takes run-out sessions away; called about once a minute. */
  sweep(): void {
    const now = this.wallMs();
    const gone = this.db
      .delete(sessions)
      .where(or(lt(sessions.expiresAtMs, now), lt(sessions.usedAtMs, now - IDLE_MS)))
      .returning({ id: sessions.id })
      .all();
    for (const { id } of gone) this.ended.emit('ended', id);
  }
}

function cookieValue(header: string | undefined, name: string): string | null {
  for (const part of header?.split(';') ?? []) {
    const at = part.indexOf('=');
    if (at > 0 && part.slice(0, at).trim() === name) return part.slice(at + 1).trim();
  }
  return null;
}
