import './runs.css';
import { Link, useParams } from 'react-router-dom';
import type { Arm } from '../../../shared/api/resources';
import type { RunState } from '../../../shared/live/server-messages';
import { errorText } from '../../api/client';
import { useRuns } from '../../api/runs';
import { Message } from '../../components/Message';
import { useArmState } from '../../live/use-live';
import { RunDetail } from './RunDetail';
import { RunTable } from './RunTable';

const PHASE_WORDS: Record<RunState['phase'], string> = {
  heldWaiting: 'waits to be held',
  heldRunning: 'is held',
  countdown: 'moves in a moment',
  running: 'is running',
  pausing: 'is pausing',
  paused: 'is paused',
  stepWaiting: 'waits for the next step',
};

/** Every run of the arm: the live one on top, then the history, and one of them with all its cycles. */
export function RunsPage({ arm }: { arm: Arm }) {
  const runs = useRuns(arm.id);
  const { runId } = useParams();
  const live = useArmState((state) => state?.run ?? null);
  const moving = useArmState((state) => state?.motors === 'moving');
  const chosen = runId ?? runs.data?.[0]?.id ?? null;
  const exportAs = (format: 'csv' | 'json') => `/api/arms/${arm.id}/runs/export?format=${format}`;
  return (
    <main className={`sheet runs ${runId ? 'has-choice' : ''}`}>
      <section className="pane rl" aria-label="History">
        <div className="cap">
          <h1 className="title">Runs</h1>
          <span className="note">{runs.data ? totals(runs.data) : ''}</span>
          <span className="end line">
            <a className="btn sm" href={exportAs('csv')} download>
              Export CSV
            </a>
            <a className="btn sm" href={exportAs('json')} download>
              Export JSON
            </a>
          </span>
        </div>
        <div className="sc">
          {live && (
            <div className="livecard">
              <Message
                kind={moving ? 'moving' : 'plan'}
                action={
                  <Link className="btn sm" to={`/arms/${arm.id}/sequences/${live.sequenceId}`}>
                    Show it
                  </Link>
                }
              >
                <b>
                  {live.sequenceName} {PHASE_WORDS[live.phase]}.
                </b>{' '}
                Cycle <span className="n">{live.cycle}</span>
                {live.cycles === null ? ', until stopped' : ` of ${live.cycles}`}, step{' '}
                <span className="n">{live.stepPath}</span>. {live.reason ?? ''}
              </Message>
            </div>
          )}
          {runs.isError && <Message kind="fault">{errorText(runs.error)}</Message>}
          {runs.data?.length === 0 ? (
            <div className="empty">
              <h2 className="h2">Nothing has run yet</h2>
              <p className="quiet">
                Every run and each of its cycles is kept here: who, which version, how it ended.
              </p>
            </div>
          ) : (
            runs.data && <RunTable armId={arm.id} runs={runs.data} chosen={chosen} />
          )}
        </div>
      </section>
      {chosen ? (
        <RunDetail
          key={chosen}
          arm={arm}
          runId={chosen}
          liveCycles={live?.runId === chosen ? live.cycle - 1 : null}
        />
      ) : (
        <section className="pane detail" aria-label="One run" />
      )}
    </main>
  );
}

function totals(runs: readonly { cyclesDone: number }[]): string {
  const cycles = runs.reduce((sum, run) => sum + run.cyclesDone, 0);
  return `${runs.length} ${runs.length === 1 ? 'run' : 'runs'}, ${cycles} ${cycles === 1 ? 'cycle' : 'cycles'}`;
}
