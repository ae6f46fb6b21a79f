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

  /** @throws HttpProblem when the password is too common or the address is taken */
  async add(draft: { name: string; email: string; role: Role; password: string }): Promise<Person> {
    const objection = passwordObjection(draft.password, draft.email);
    if (objection)
      throw new HttpProblem(400, 'weakPassword', objection, [{ path: 'password', message: objection }]);
    const email = draft.email.toLowerCase();
    if (this.db.select().from(people).where(eq(people.email, email)).get())
      throw new HttpProblem(409, 'emailTaken', 'Somebody with this e-mail address is already on the team.');
    const row = {
      id: newId(),
      name: draft.name,
      email,
      role: draft.role,
      passwordHash: await hashPassword(draft.password),
      createdAtMs: this.wallMs(),
    };
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
  change(id: string, change: { role?: Role; disabled?: boolean }): Person {
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
      tx.update(people).set(change).where(eq(people.id, id)).run();
      return asPerson({ ...row, ...change });
    });
  }
}

/** A hash nothing fits, so that an unknown address costs as much time as a known one. */
const NOBODY = `scrypt:${Buffer.alloc(16).toString('base64url')}:${Buffer.alloc(32).toString('base64url')}`;

function asPerson(row: typeof people.$inferSelect): Person {
  const { id, name, email, disabled, lastSeenMs } = row;
  return { id, name, email, role: row.role as Role, disabled, lastSeenMs };
}
