import { and, desc, eq } from 'drizzle-orm';
import type { ArmRevision } from '../../shared/api/resources';
import { ArmModel } from '../../shared/arm/model';
import { newId } from '../auth/tokens';
import type { TrustMemory } from '../control/process-messages';
import { HttpProblem } from '../routes/problem';
import type { Database } from './database';
import { armRevisions, arms } from './schema';

export interface StoredArm {
  id: string;
  name: string;
  revision: number;
  unattended: boolean;
  lastSeen: TrustMemory | null;
  updatedAtMs: number;
  model: ArmModel;
}

/** Arms and every revision of their models. */
export class ArmStore {
  constructor(
    private readonly db: Database,
    private readonly wallMs: () => number,
  ) {}

  list(): StoredArm[] {
    return this.db
      .select()
      .from(arms)
      .innerJoin(armRevisions, and(eq(armRevisions.armId, arms.id), eq(armRevisions.revision, arms.revision)))
      .where(eq(arms.deleted, false))
      .orderBy(arms.name)
      .all()
      .map((row) => stored(row.arms, row.arm_revisions.model));
  }

  /** Null when there is no such arm. */
  find(id: string): StoredArm | null {
    const row = this.db
      .select()
      .from(arms)
      .innerJoin(armRevisions, and(eq(armRevisions.armId, arms.id), eq(armRevisions.revision, arms.revision)))
      .where(and(eq(arms.id, id), eq(arms.deleted, false)))
      .get();
    return row ? stored(row.arms, row.arm_revisions.model) : null;
  }

  /** @throws HttpProblem 404 */
  get(id: string): StoredArm {
    const arm = this.find(id);
    if (!arm) throw new HttpProblem(404, 'noSuchArm', 'There is no such arm.');
    return arm;
  }

  add(model: ArmModel, by: string, note: string): StoredArm {
    const id = newId();
    const now = this.wallMs();
    this.db.transaction((tx) => {
      tx.insert(arms).values({ id, name: model.name, revision: 1, updatedAtMs: now }).run();
      tx.insert(armRevisions).values({ armId: id, revision: 1, model, note, by, atMs: now }).run();
    });
    return this.get(id);
  }

  /** Adds a revision. @throws HttpProblem 409 when somebody saved since `baseRevision` */
  change(id: string, model: ArmModel, baseRevision: number, by: string, note: string): StoredArm {
    const now = this.wallMs();
    this.db.transaction((tx) => {
      const row = tx
        .select()
        .from(arms)
        .where(and(eq(arms.id, id), eq(arms.deleted, false)))
        .get();
      if (!row) throw new HttpProblem(404, 'noSuchArm', 'There is no such arm.');
      if (row.revision !== baseRevision)
        throw new HttpProblem(
          409,
          'changedMeanwhile',
          `Somebody saved revision ${row.revision} of this arm meanwhile. Nothing of yours is lost: load theirs, then apply yours again.`,
        );
      const revision = row.revision + 1;
      tx.update(arms).set({ name: model.name, revision, updatedAtMs: now }).where(eq(arms.id, id)).run();
      tx.insert(armRevisions).values({ armId: id, revision, model, note, by, atMs: now }).run();
    });
    return this.get(id);
  }

  revisions(id: string): ArmRevision[] {
    return this.db
      .select({
        revision: armRevisions.revision,
        note: armRevisions.note,
        by: armRevisions.by,
        atMs: armRevisions.atMs,
      })
      .from(armRevisions)
      .where(eq(armRevisions.armId, id))
      .orderBy(desc(armRevisions.revision))
      .all();
  }

  /** @throws HttpProblem 404 */
  modelAt(id: string, revision: number): ArmModel {
    const row = this.db
      .select({ model: armRevisions.model })
      .from(armRevisions)
      .where(and(eq(armRevisions.armId, id), eq(armRevisions.revision, revision)))
      .get();
    if (!row) throw new HttpProblem(404, 'noSuchRevision', 'There is no such revision of this arm.');
    return ArmModel.parse(row.model);
  }

  setUnattended(id: string, unattended: boolean): void {
    this.db.update(arms).set({ unattended }).where(eq(arms.id, id)).run();
  }

  setLastSeen(id: string, lastSeen: TrustMemory): void {
    this.db.update(arms).set({ lastSeen }).where(eq(arms.id, id)).run();
  }

  remove(id: string): void {
    this.db.update(arms).set({ deleted: true }).where(eq(arms.id, id)).run();
  }
}

function stored(row: typeof arms.$inferSelect, model: unknown): StoredArm {
  const { id, name, revision, unattended, updatedAtMs } = row;
  return {
    id,
    name,
    revision,
    unattended,
    lastSeen: row.lastSeen as TrustMemory | null,
    updatedAtMs,
    model: ArmModel.parse(model),
  };
}
