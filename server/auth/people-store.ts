import { and, count, eq, ne } from 'drizzle-orm';
import type { Person } from '../../shared/api/resources';
import type { Role } from '../../shared/team/roles';
import type { Database } from '../db/database';
import { people } from '../db/schema';
import { HttpProblem } from '../routes/problem';
import { hashPassword, passwordFits, passwordObjection } from './passwords';
import { newId } from './tokens';

/** The people of the workshop. */
export class PeopleStore {
  constructor(
    private readonly db: Database,
    private readonly wallMs: () => number,
  ) {}

  any(): boolean {
    return (this.db.select({ n: count() }).from(people).get()?.n ?? 0) > 0;
  }

  list(): Person[] {
    return this.db.select().from(people).orderBy(people.name).all().map(asPerson);
  }

  byId(id: string): Person | null {
    const row = this.db.select().from(people).where(eq(people.id, id)).get();
    return row ? asPerson(row) : null;
  }

  /** @throws HttpProblem when the address is taken */
  refuseTaken(email: string): void {
    if (this.db.select().from(people).where(eq(people.email, email.toLowerCase())).get())
      throw new HttpProblem(409, 'emailTaken', 'Somebody with this e-mail address is already on the team.');
  }

  /** Adds a person at once, so that it can be part of a transaction. @throws HttpProblem when the address is taken */
  add(draft: { name: string; email: string; role: Role; passwordHash: string }): Person {
    this.refuseTaken(draft.email);
    const row = { ...draft, id: newId(), email: draft.email.toLowerCase(), createdAtMs: this.wallMs() };
    this.db.insert(people).values(row).run();
    return this.byId(row.id)!;
  }

  /** The person whose e-mail and password fit, or null; takes as long either way. */
  async check(email: string, password: string): Promise<Person | null> {
    const row = this.db.select().from(people).where(eq(people.email, email.toLowerCase())).get();
    const fits = await passwordFits(password, row?.passwordHash ?? NOBODY);
    return row && fits && !row.disabled ? asPerson(row) : null;
  }

  /** @throws HttpProblem when it would leave the workshop without an owner */
  change(id: string, change: { role?: Role; disabled?: boolean }): { person: Person; changed: boolean } {
    return this.db.transaction((tx) => {
      const row = tx.select().from(people).where(eq(people.id, id)).get();
      if (!row) throw new HttpProblem(404, 'noSuchPerson', 'That person is not on the team.');
      const loses = (change.role !== undefined && change.role !== 'owner') || change.disabled === true;
      if (row.role === 'owner' && loses) {
        const others = tx
          .select({ n: count() })
          .from(people)
          .where(and(eq(people.role, 'owner'), eq(people.disabled, false), ne(people.id, id)))
          .get();
        if (!others?.n)
          throw new HttpProblem(
            409,
            'lastOwner',
            'A workshop needs an owner. Make somebody else owner first.',
          );
      }
      const next = { role: change.role ?? row.role, disabled: change.disabled ?? row.disabled };
      tx.update(people).set(next).where(eq(people.id, id)).run();
      const changed = next.role !== row.role || next.disabled !== row.disabled;
      return { person: asPerson({ ...row, ...next }), changed };
    });
  }
}

/**
 * What is stored of a new password.
 * @throws HttpProblem when it is too common
 */
export async function hashNewPassword(password: string, email: string): Promise<string> {
  const objection = passwordObjection(password, email);
  if (objection)
    throw new HttpProblem(400, 'weakPassword', objection, [{ path: 'password', message: objection }]);
  return hashPassword(password);
}

/** A hash nothing fits, so that an unknown address costs as much time as a known one. */
const NOBODY = `scrypt:${Buffer.alloc(16).toString('base64url')}:${Buffer.alloc(32).toString('base64url')}`;

function asPerson(row: typeof people.$inferSelect): Person {
  const { id, name, email, disabled, lastSeenMs } = row;
  return { id, name, email, role: row.role as Role, disabled, lastSeenMs };
}
