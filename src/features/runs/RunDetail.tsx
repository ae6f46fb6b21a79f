import { lazy, Suspense, useEffect, useMemo } from 'react';
import { Link } from 'react-router-dom';
import type { Arm, Run } from '../../../shared/api/resources';
import { errorText } from '../../api/client';
import { useRun } from '../../api/runs';
import { FaultIcon, MovingIcon, TrustIcon } from '../../components/icons';
import { Message } from '../../components/Message';
import { clock, duration, durationText, when } from '../../components/when';
import { cycleFigures, endedBadly, endingWords, explainEnding } from './run-words';

const CyclePlot = lazy(() => import('./CyclePlot'));
/** More rows help nobody; the export has all. */
const MOST_ROWS = 300;

/** One run: how it ended, every cycle timed. */
export function RunDetail({
  arm,
  runId,
  liveCycles,
}: {
  arm: Arm;
  runId: string;
  /** How many cycles the live run has done; null when this is not the live run. */
  liveCycles: number | null;
}) {
  const run = useRun(arm.id, runId);
  const { refetch } = run;
  // Each finished cycle, and the end, is fetched when the live state speaks of it.
  // biome-ignore lint/correctness/useExhaustiveDependencies: the count is the occasion, not an input
  useEffect(() => {
    void refetch();
  }, [liveCycles, refetch]);
  return (
    <section className="pane detail" aria-label="One run">
      <Link className="btn sm bare phone-only" to={`/arms/${arm.id}/runs`}>
        All runs
      </Link>
      {run.isError ? (
        <Message kind="fault">{errorText(run.error)}</Message>
      ) : run.data ? (
        <Told run={run.data} arm={arm} />
      ) : (
        <p className="quiet">Opening the run…</p>
      )}
    </section>
  );
}

function Told({ run, arm }: { run: Run; arm: Arm }) {
  const why = explainEnding(run, arm.name);
  const bad = endedBadly(run.how);
  return (
    <>
      <div className="hd">
        {bad ? <FaultIcon /> : run.how === null ? <MovingIcon /> : null}
        <h2 className="h2">
          {run.sequenceName} {run.how === null ? 'is under way' : endingWords(run.how)}
        </h2>
        <span className="small quiet">
          {when(run.startedAtMs)}
          {run.endedAtMs === null ? '' : ` to ${clock(run.endedAtMs)}`}, {run.who} in control
        </span>
      </div>
      <p className="facts small">
        <Link className="link" to={`/arms/${arm.id}/sequences/${run.sequenceId}?version=${run.version}`}>
          version {run.version}
        </Link>
        <span className="lk">
          <TrustIcon trust={run.trust} /> position {run.trust} at the start
        </span>
        <span>arm revision {run.armRevision}</span>
      </p>
      {why && (
        <div className={`wmd ${bad ? 'bad' : ''}`}>
          <div>
            <span className="k">What happened</span>
            {why.happened}
          </div>
          <div>
            <span className="k">What it means</span>
            {why.means}
          </div>
          <div>
            <span className="k">What to do</span>
            {why.todo}
          </div>
        </div>
      )}
      <Cycles run={run} />
    </>
  );
}

function Cycles({ run }: { run: Run }) {
  const { cycles, cyclesAsked } = run;
  const figures = useMemo(() => cycleFigures(cycles.map((c) => c.seconds)), [cycles]);
  if (!figures) return <p className="quiet">No cycle was finished{run.how === null ? ' yet' : ''}.</p>;
  const mean = duration(figures.mean);
  const label = `Time of every cycle: ${cycles.length} cycles, from ${durationText(figures.quickest)} to ${durationText(figures.slowest)}, on average ${durationText(figures.mean)}.`;
  const shown = cycles.slice(-MOST_ROWS);
  return (
    <>
      <div className="kp">
        <div>
          <div className="k">Cycles done</div>
          <div className="v">{cycles.length}</div>
          <div className="s quiet">{cyclesAsked === null ? 'until stopped' : `of ${cyclesAsked} asked`}</div>
        </div>
        <div>
          <div className="k">A cycle, on average</div>
          <div className="v">
            {mean.value}
            <span className="u">{mean.unit}</span>
          </div>
          <div className="s quiet">
            {cycles.some((c) => c.held) ? 'held cycles included' : 'none was held'}
          </div>
        </div>
        <div>
          <div className="k">Quickest to slowest</div>
          <div className="v">
            {figures.quickest.toFixed(1)}
            <span className="u">to</span> {figures.slowest.toFixed(1)}
            <span className="u">s</span>
          </div>
        </div>
      </div>
      <div>
        <div className="cap">
          <h3 className="h3">Time of every cycle</h3>
          <span className="note">hollow: held by hand</span>
        </div>
        <Suspense fallback={<span className="note">Drawing…</span>}>
          <CyclePlot cycles={cycles} label={label} />
        </Suspense>
      </div>
      <table aria-label="Cycles">
        <thead>
          <tr>
            <th className="r">Cycle</th>
            <th className="r">Time</th>
            <th className="r">Ended</th>
            <th>How</th>
          </tr>
        </thead>
        <tbody>
          {shown.map((cycle) => (
            <tr key={cycle.cycle}>
              <td className="r n">{cycle.cycle}</td>
              <td className="r n">{cycle.seconds.toFixed(2)} s</td>
              <td className="r n">{clock(cycle.endedAtMs)}</td>
              <td>{cycle.held ? 'held by hand' : 'by itself'}</td>
            </tr>
          ))}
        </tbody>
      </table>
      {shown.length < cycles.length && (
        <p className="note">
          The newest {shown.length} of {cycles.length}. The export has all.
        </p>
      )}
    </>
  );
}
