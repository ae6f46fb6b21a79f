import { and, eq, gt, isNull } from 'drizzle-orm';
import type { Invitation } from '../../shared/api/resources';
import { type Role, roleIncludes } from '../../shared/team/roles';
import type { Database } from '../db/database';
import { invitations } from '../db/schema';
import { HttpProblem } from '../routes/problem';
import { newId, newToken, tokenHash } from './tokens';

const LIFETIME_MS = 7 * 24 * 3600_000;

/** Invitations: a link with a secret that works once, for a week, for one address and role. */
export class Invitations {
  constructor(
    private readonly db: Database,
    private readonly wallMs: () => number,
  ) {}

  pending(): Invitation[] {
    return this.db
      .select()
      .from(invitations)
      .where(and(isNull(invitations.usedAtMs), gt(invitations.expiresAtMs, this.wallMs())))
      .all()
      .map(asInvitation);
  }

  /** Makes an invitation; one already sent to the same address stops working. Returns the secret, which is not stored. */
  make(
    draft: { email: string; name: string; role: Role },
    by: { name: string; role: Role },
  ): { invitation: Invitation; token: string } {
    if (!roleIncludes(by.role, draft.role))
      throw new HttpProblem(403, 'notAllowed', 'Nobody can invite to a role above their own.');
    const token = newToken();
    const now = this.wallMs();
    const row = {
      id: newId(),
      tokenHash: tokenHash(token),
      email: draft.email.toLowerCase(),
      name: draft.name,
      role: draft.role,
      invitedBy: by.name,
      createdAtMs: now,
      expiresAtMs: now + LIFETIME_MS,
      usedAtMs: null,
    };
    this.db.transaction((tx) => {
      tx.delete(invitations)
        .where(and(eq(invitations.email, row.email), isNull(invitations.usedAtMs)))
        .run();
      tx.insert(invitations).values(row).run();
    });
    return { invitation: asInvitation(row), token };
  }

  withdraw(id: string): void {
    const gone = this.db
      .delete(invitations)
      .where(and(eq(invitations.id, id), isNull(invitations.usedAtMs)))
      .run();
    if (gone.changes === 0) throw new HttpProblem(404, 'noSuchInvitation', 'That invitation is not pending.');
  }

  /** What a secret invites to, without using it up. @throws HttpProblem 410 */
  look(token: string): Invitation {
    const row = this.db.select().from(invitations).where(this.open(token)).get();
    if (!row) throw gone();
    return asInvitation(row);
  }

  private open(token: string) {
    return and(
      eq(invitations.tokenHash, tokenHash(token)),
      isNull(invitations.usedAtMs),
      gt(invitations.expiresAtMs, this.wallMs()),
    );
  }

  /** Uses an invitation up; of two people with the same link one comes through. */
  redeem(token: string): Invitation {
    const row = this.db
      .update(invitations)
      .set({ usedAtMs: this.wallMs() })
      .where(this.open(token))
      .returning()
      .get();
    if (!row) throw gone();
    return asInvitation(row);
  }
}

function gone(): HttpProblem {
  return new HttpProblem(
    410,
    'invitationGone',
    'This invitation was used, withdrawn or has run out. Ask for a new one.',
  );
}

function asInvitation(row: typeof invitations.$inferSelect): Invitation {
  const { id, email, name, invitedBy, createdAtMs, expiresAtMs } = row;
  return { id, email, name, role: row.role as Role, invitedBy, createdAtMs, expiresAtMs };
}
