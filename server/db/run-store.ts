import { and, desc, eq, isNull } from 'drizzle-orm';
import type { RUN_ENDINGS, Run, RunSummary } from '../../shared/api/resources';
import type { Trust } from '../../shared/arm/trust';
import type { ArmRecord } from '../control/process-messages';
import { HttpProblem } from '../routes/problem';
import type { Database } from './database';
import { runCycles, runs } from './schema';

type Started = Extract<ArmRecord, { kind: 'runStarted' }>;
type Cycle = Extract<ArmRecord, { kind: 'runCycle' }>;
type Ended = Extract<ArmRecord, { kind: 'runEnded' }>;

/** How many runs the history shows. */
const SHOWN = 500;

/** Every run and every cycle of it. */
export class RunStore {
  constructor(
    private readonly db: Database,
    private readonly wallMs: () => number,
  ) {}

  start(armId: string, armRevision: number, r: Started): void {
    this.db
      .insert(runs)
      .values({
        id: r.runId,
        armId,
        sequenceId: r.sequenceId,
        sequenceName: r.sequenceName,
        version: r.version,
        who: r.who,
        trust: r.trust,
        armRevision,
        startedAtMs: r.startedAtMs,
        cyclesAsked: r.cyclesAsked,
      })
      .run();
  }

  cycle({ runId, cycle, seconds, held, endedAtMs }: Cycle): void {
    this.db.transaction((tx) => {
      tx.insert(runCycles).values({ runId, cycle, seconds, held, endedAtMs }).run();
      tx.update(runs).set({ cyclesDone: cycle }).where(eq(runs.id, runId)).run();
    });
  }

  end({ runId, how, detail, cyclesDone, endedAtMs }: Ended): void {
    this.db
      .update(runs)
      .set({ how, detail, cyclesDone, endedAtMs })
      .where(and(eq(runs.id, runId), isNull(runs.how)))
      .run();
  }

  /** Runs that were under way when the server went down: nothing resumes them. */
  closeOpen(): void {
    this.db
      .update(runs)
      .set({
        how: 'server restarted',
        detail: 'The server went down during the run.',
        endedAtMs: this.wallMs(),
      })
      .where(isNull(runs.how))
      .run();
  }

  list(armId: string): RunSummary[] {
    return this.db
      .select()
      .from(runs)
      .where(eq(runs.armId, armId))
      .orderBy(desc(runs.startedAtMs))
      .limit(SHOWN)
      .all()
      .map(summary);
  }

  /** @throws HttpProblem 404 */
  get(armId: string, runId: string): Run {
    const row = this.db
      .select()
      .from(runs)
      .where(and(eq(runs.armId, armId), eq(runs.id, runId)))
      .get();
    if (!row) throw new HttpProblem(404, 'noSuchRun', 'There is no such run on this arm.');
    const cycles = this.db
      .select()
      .from(runCycles)
      .where(eq(runCycles.runId, runId))
      .orderBy(runCycles.cycle)
      .all();
    return {
      ...summary(row),
      cycles: cycles.map(({ cycle, seconds, held, endedAtMs }) => ({ cycle, seconds, held, endedAtMs })),
    };
  }
}

function summary(row: typeof runs.$inferSelect): RunSummary {
  const { armId: _armId, ...rest } = row;
  return { ...rest, trust: row.trust as Trust, how: row.how as (typeof RUN_ENDINGS)[number] | null };
}
