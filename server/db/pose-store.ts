import { and, desc, eq } from 'drizzle-orm';
import type { Pose, PoseRevision } from '../../shared/api/resources';
import type { Trust } from '../../shared/arm/trust';
import { newId } from '../auth/tokens';
import { HttpProblem } from '../routes/problem';
import type { Database } from './database';
import { poseRevisions, poses } from './schema';

/** Where the arm was, how sure, and who says so. q: rad, m. */
export interface PosePosition {
  q: number[];
  gripper: number | null;
  trust: Trust;
  origin: Pose['origin'];
  by: string;
  armRevision: number;
}
export interface PoseLabel {
  name: string;
  note: string;
  tags: string[];
}

/** Poses of an arm; every re-teaching is a revision that can come back. */
export class PoseStore {
  constructor(
    private readonly db: Database,
    private readonly wallMs: () => number,
  ) {}

  /** Without deleted ones unless asked: a sequence may still name them. */
  list(armId: string, withDeleted = false): Pose[] {
    return this.db
      .select()
      .from(poses)
      .innerJoin(
        poseRevisions,
        and(eq(poseRevisions.poseId, poses.id), eq(poseRevisions.revision, poses.revision)),
      )
      .where(and(eq(poses.armId, armId), withDeleted ? undefined : eq(poses.deleted, false)))
      .orderBy(desc(poseRevisions.atMs))
      .all()
      .map((row) => asPose(row.poses, row.pose_revisions));
  }

  /** @throws HttpProblem 404, also for a pose of another arm */
  get(armId: string, poseId: string): Pose {
    const row = this.db
      .select()
      .from(poses)
      .innerJoin(
        poseRevisions,
        and(eq(poseRevisions.poseId, poses.id), eq(poseRevisions.revision, poses.revision)),
      )
      .where(and(eq(poses.armId, armId), eq(poses.id, poseId)))
      .get();
    if (!row) throw new HttpProblem(404, 'noSuchPose', 'There is no such pose on this arm.');
    return asPose(row.poses, row.pose_revisions);
  }

  add(armId: string, label: PoseLabel, position: PosePosition): Pose {
    return this.addAll(armId, [{ label, position }])[0]!;
  }

  /** All or none. */
  addAll(armId: string, drafts: readonly { label: PoseLabel; position: PosePosition }[]): Pose[] {
    const now = this.wallMs();
    const ids = drafts.map(() => newId());
    this.db.transaction((tx) => {
      for (const [i, { label, position }] of drafts.entries()) {
        tx.insert(poses)
          .values({ id: ids[i]!, armId, ...label, revision: 1 })
          .run();
        tx.insert(poseRevisions)
          .values({ poseId: ids[i]!, revision: 1, ...position, atMs: now })
          .run();
      }
    });
    return ids.map((id) => this.get(armId, id));
  }

  relabel(armId: string, poseId: string, change: Partial<PoseLabel>): Pose {
    this.get(armId, poseId);
    if (Object.keys(change).length > 0) this.db.update(poses).set(change).where(eq(poses.id, poseId)).run();
    return this.get(armId, poseId);
  }

  reteach(armId: string, poseId: string, position: PosePosition): Pose {
    const { revision } = this.get(armId, poseId);
    this.db.transaction((tx) => {
      tx.insert(poseRevisions)
        .values({ poseId, revision: revision + 1, ...position, atMs: this.wallMs() })
        .run();
      tx.update(poses)
        .set({ revision: revision + 1 })
        .where(eq(poses.id, poseId))
        .run();
    });
    return this.get(armId, poseId);
  }

  revisions(armId: string, poseId: string): PoseRevision[] {
    this.get(armId, poseId);
    return this.db
      .select()
      .from(poseRevisions)
      .where(eq(poseRevisions.poseId, poseId))
      .orderBy(desc(poseRevisions.revision))
      .all()
      .map(({ revision, q, gripper, trust, origin, by, atMs }) => ({
        revision,
        q,
        gripper: gripper ?? null,
        trust: trust as Trust,
        origin: origin as Pose['origin'],
        by,
        atMs,
      }));
  }

  /** An old revision comes back as a new one; nothing is overwritten. */
  restore(armId: string, poseId: string, revision: number, by: string, armRevision: number): Pose {
    const old = this.revisions(armId, poseId).find((r) => r.revision === revision);
    if (!old) throw new HttpProblem(404, 'noSuchRevision', 'There is no such revision of this pose.');
    const { q, gripper, trust, origin } = old;
    return this.reteach(armId, poseId, { q, gripper, trust, origin, by, armRevision });
  }

  setDeleted(armId: string, poseId: string, deleted: boolean): Pose {
    this.get(armId, poseId);
    this.db.update(poses).set({ deleted }).where(eq(poses.id, poseId)).run();
    return this.get(armId, poseId);
  }
}

function asPose(row: typeof poses.$inferSelect, at: typeof poseRevisions.$inferSelect): Pose {
  return {
    id: row.id,
    name: row.name,
    note: row.note,
    tags: row.tags,
    revision: row.revision,
    q: at.q,
    gripper: at.gripper ?? null,
    trust: at.trust as Trust,
    origin: at.origin as Pose['origin'],
    by: at.by,
    atMs: at.atMs,
    armRevision: at.armRevision,
    deleted: row.deleted,
  };
}
