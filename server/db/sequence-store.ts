import { and, desc, eq, isNotNull } from 'drizzle-orm';
import { z } from 'zod';
import type { SequenceDraft } from '../../shared/api/resources';
import { Step } from '../../shared/sequence/steps';
import { newId } from '../auth/tokens';
import { HttpProblem } from '../routes/problem';
import type { Database } from './database';
import { provenPrograms, sequences, sequenceVersions } from './schema';

export interface StoredVersion {
  sequenceId: string;
  version: number;
  name: string;
  note: string;
  steps: Step[];
  by: string;
  atMs: number;
  approval: { by: string; atMs: number; fingerprint: string } | null;
}

/** Sequences, every version of them, their approvals, and the programs that were watched through once. */
export class SequenceStore {
  constructor(
    private readonly db: Database,
    private readonly wallMs: () => number,
  ) {}

  /** Newest version of each. */
  list(armId: string): StoredVersion[] {
    return this.db
      .select()
      .from(sequences)
      .innerJoin(
        sequenceVersions,
        and(eq(sequenceVersions.sequenceId, sequences.id), eq(sequenceVersions.version, sequences.version)),
      )
      .where(and(eq(sequences.armId, armId), eq(sequences.deleted, false)))
      .orderBy(desc(sequenceVersions.atMs))
      .all()
      .map((row) => stored(row.sequence_versions));
  }

  /** The newest version, or the one asked for. @throws HttpProblem 404 */
  get(armId: string, sequenceId: string, version?: number): StoredVersion {
    const row = this.db
      .select()
      .from(sequences)
      .innerJoin(sequenceVersions, eq(sequenceVersions.sequenceId, sequences.id))
      .where(
        and(
          eq(sequences.armId, armId),
          eq(sequences.id, sequenceId),
          eq(sequences.deleted, false),
          eq(sequenceVersions.version, version ?? sequences.version),
        ),
      )
      .get();
    if (!row)
      throw new HttpProblem(404, 'noSuchSequence', 'There is no such sequence (or version) on this arm.');
    return stored(row.sequence_versions);
  }

  versions(armId: string, sequenceId: string): StoredVersion[] {
    this.get(armId, sequenceId);
    return this.db
      .select()
      .from(sequenceVersions)
      .where(eq(sequenceVersions.sequenceId, sequenceId))
      .orderBy(desc(sequenceVersions.version))
      .all()
      .map(stored);
  }

  /** The approved version, newest approval first; null without one. */
  approved(sequenceId: string): StoredVersion | null {
    const row = this.db
      .select()
      .from(sequenceVersions)
      .where(
        and(eq(sequenceVersions.sequenceId, sequenceId), isNotNull(sequenceVersions.approvedFingerprint)),
      )
      .orderBy(desc(sequenceVersions.version))
      .get();
    return row ? stored(row) : null;
  }

  add(armId: string, draft: SequenceDraft, by: string): StoredVersion {
    const id = newId();
    this.db.transaction((tx) => {
      tx.insert(sequences).values({ id, armId, version: 1 }).run();
      tx.insert(sequenceVersions)
        .values({ sequenceId: id, version: 1, ...draft, by, atMs: this.wallMs() })
        .run();
    });
    return this.get(armId, id);
  }

  /** Adds a version. @throws HttpProblem 409 when somebody saved since `baseVersion` */
  change(
    armId: string,
    sequenceId: string,
    draft: SequenceDraft,
    baseVersion: number,
    by: string,
  ): StoredVersion {
    const { version } = this.get(armId, sequenceId);
    if (version !== baseVersion)
      throw new HttpProblem(
        409,
        'changedMeanwhile',
        `Somebody saved version ${version} meanwhile. Yours is not lost: look at theirs, then save yours again.`,
      );
    this.db.transaction((tx) => {
      tx.insert(sequenceVersions)
        .values({ sequenceId, version: version + 1, ...draft, by, atMs: this.wallMs() })
        .run();
      tx.update(sequences)
        .set({ version: version + 1 })
        .where(eq(sequences.id, sequenceId))
        .run();
    });
    return this.get(armId, sequenceId);
  }

  remove(armId: string, sequenceId: string): void {
    this.get(armId, sequenceId);
    this.db.update(sequences).set({ deleted: true }).where(eq(sequences.id, sequenceId)).run();
  }

  /** Exactly one version of a sequence is approved at a time. */
  approve(armId: string, sequenceId: string, version: number, by: string, fingerprint: string): void {
    this.get(armId, sequenceId, version);
    this.db.transaction((tx) => {
      tx.update(sequenceVersions)
        .set({ approvedBy: null, approvedAtMs: null, approvedFingerprint: null })
        .where(eq(sequenceVersions.sequenceId, sequenceId))
        .run();
      tx.update(sequenceVersions)
        .set({ approvedBy: by, approvedAtMs: this.wallMs(), approvedFingerprint: fingerprint })
        .where(and(eq(sequenceVersions.sequenceId, sequenceId), eq(sequenceVersions.version, version)))
        .run();
    });
  }

  withdraw(armId: string, sequenceId: string): void {
    this.get(armId, sequenceId);
    this.db
      .update(sequenceVersions)
      .set({ approvedBy: null, approvedAtMs: null, approvedFingerprint: null })
      .where(eq(sequenceVersions.sequenceId, sequenceId))
      .run();
  }

  isProven(armId: string, fingerprint: string): boolean {
    return (
      this.db
        .select({ who: provenPrograms.who })
        .from(provenPrograms)
        .where(and(eq(provenPrograms.armId, armId), eq(provenPrograms.fingerprint, fingerprint)))
        .get() !== undefined
    );
  }

  setProven(armId: string, fingerprint: string, who: string): void {
    this.db
      .insert(provenPrograms)
      .values({ armId, fingerprint, who, atMs: this.wallMs() })
      .onConflictDoNothing()
      .run();
  }
}

function stored(row: typeof sequenceVersions.$inferSelect): StoredVersion {
  const { sequenceId, version, name, note, by, atMs, approvedBy, approvedAtMs, approvedFingerprint } = row;
  return {
    sequenceId,
    version,
    name,
    note,
    steps: z.array(Step).parse(row.steps),
    by,
    atMs,
    approval:
      approvedBy !== null && approvedAtMs !== null && approvedFingerprint !== null
        ? { by: approvedBy, atMs: approvedAtMs, fingerprint: approvedFingerprint }
        : null,
  };
}
