import './runs.css';
import './runs-more.css';
import { flexRender } from '@tanstack/react-table';
import { getCoreRowModel, legacyCreateColumnHelper, useLegacyTable } from '@tanstack/react-table/legacy';
import { lazy, Suspense, useEffect, useMemo } from 'react';
import { Link, useParams } from 'react-router-dom';
import type { Arm, RunSummary } from '../../../shared/api/resources';
import { errorText } from '../../api/client';
import { useRun, useRuns } from '../../api/runs';
import { FaultIcon, MovingIcon, StandingIcon, TrustIcon } from '../../components/icons';
import { Message } from '../../components/Message';
import { durationText, when } from '../../components/when';
import { useArmState } from '../../live/use-live';

const CyclePlot = lazy(() => import('./CyclePlot'));

function Ending({ run }: { run: RunSummary }) {
  const bad = run.how === 'faulted' || run.how === 'lost control' || run.how === 'server restarted';
  return (
    <span className={`end ${bad ? 'red' : ''}`}>
      {run.how === null ? <MovingIcon /> : bad ? <FaultIcon /> : <StandingIcon />}
      {run.how ?? 'under way'}
    </span>
  );
}

const column = legacyCreateColumnHelper<RunSummary>();

export function RunsPage({ arm }: { arm: Arm }) {
  const runs = useRuns(arm.id);
  const { runId } = useParams();
  const live = useArmState((state) => state?.run ?? null);
  const chosen = runId ?? runs.data?.[0]?.id ?? null;
  const columns = useMemo(
    () => [
      column.display({
        id: 'started',
        header: 'Started',
        cell: ({ row }) => <span className="n">{when(row.original.startedAtMs)}</span>,
      }),
      column.display({
        id: 'what',
        header: 'Sequence',
        cell: ({ row }) => (
          <>
            <Link className="link" to={`/arms/${arm.id}/runs/${row.original.id}`}>
              <b>{row.original.sequenceName}</b>
            </Link>
            <span className="sub">
              version {row.original.version}, {row.original.who}, {row.original.trust}
            </span>
          </>
        ),
      }),
      column.display({
        id: 'cycles',
        header: 'Cycles',
        cell: ({ row }) => (
          <span className="n">
            {row.original.cyclesDone}
            {row.original.cyclesAsked === null ? '' : ` / ${row.original.cyclesAsked}`}
          </span>
        ),
      }),
      column.display({ id: 'how', header: 'Ended', cell: ({ row }) => <Ending run={row.original} /> }),
    ],
    [arm.id],
  );
  const data = useMemo(() => runs.data ?? [], [runs.data]);
  const table = useLegacyTable({ data, columns, getCoreRowModel: getCoreRowModel() });
  return (
    <main className="sheet runs">
      <section className="pane rl" aria-label="History">
        <div className="cap">
          <h1 className="title">Runs</h1>
          <span className="end line">
            <a className="link small" href={`/api/arms/${arm.id}/runs/export?format=csv`}>
              Export CSV
            </a>
            <a className="link small" href={`/api/arms/${arm.id}/runs/export?format=json`}>
              JSON
            </a>
          </span>
        </div>
        <div className="sc">
          {live && (
            <Message kind="moving">
              <b>{live.sequenceName}</b>,{' '}
              {live.phase === 'running' || live.phase === 'heldRunning' ? 'running' : live.phase}: cycle{' '}
              <span className="n">{live.cycle}</span>
              {live.cycles ? ` of ${live.cycles}` : ''}, step <span className="n">{live.stepPath}</span>.{' '}
              <Link to={`/arms/${arm.id}/sequences/${live.sequenceId}`}>Open it</Link>
            </Message>
          )}
          {runs.isError && <Message kind="fault">{errorText(runs.error)}</Message>}
          {runs.data?.length === 0 ? (
            <div className="empty">
              <h2 className="h2">Nothing has run yet.</h2>
              <p className="quiet">
                Every run and each of its cycles is kept here: who, which version, how it ended.
              </p>
            </div>
          ) : (
            <table>
              <thead>
                {table.getHeaderGroups().map((group) => (
                  <tr key={group.id}>
                    {group.headers.map((header) => (
                      <th key={header.id}>
                        {flexRender(header.column.columnDef.header, header.getContext())}
                      </th>
                    ))}
                  </tr>
                ))}
              </thead>
              <tbody>
                {table.getRowModel().rows.map((row) => (
                  <tr key={row.id} className={row.original.id === chosen ? 'sel' : ''}>
                    {row.getVisibleCells().map((cell) => (
                      <td key={cell.id}>{flexRender(cell.column.columnDef.cell, cell.getContext())}</td>
                    ))}
                  </tr>
                ))}
              </tbody>
            </table>
          )}
        </div>
      </section>
      {chosen && <RunDetail armId={arm.id} runId={chosen} live={live?.runId === chosen} />}
    </main>
  );
}

function RunDetail({ armId, runId, live }: { armId: string; runId: string; live: boolean }) {
  const run = useRun(armId, runId);
  const { refetch } = run;
  // The end of a live run arrives as a change; its cycles do too.
  useEffect(() => {
    if (!live) void refetch();
  }, [live, refetch]);
  if (run.isPending) return <section className="pane detail">Opening the run…</section>;
  if (run.isError)
    return (
      <section className="pane detail">
        <Message kind="fault">{errorText(run.error)}</Message>
      </section>
    );
  const { data } = run;
  const times = data.cycles.map((c) => c.seconds);
  const mean = times.length > 0 ? times.reduce((a, b) => a + b, 0) / times.length : null;
  return (
    <section className="pane detail" aria-label="One run">
      <div className="cap">
        <h2 className="h2">{data.sequenceName}</h2>
        <span className="note">
          version {data.version}, started {when(data.startedAtMs)} by {data.who}
        </span>
      </div>
      <div className="line">
        <Ending run={data} />
        <span className="lk">
          <TrustIcon trust={data.trust} /> position {data.trust}
        </span>
        <span className="note">arm revision {data.armRevision}</span>
      </div>
      {data.detail && <p className="small">{data.detail}</p>}
      {mean !== null ? (
        <>
          <p>
            <span className="n">{data.cycles.length}</span> cycles, on average{' '}
            <span className="n">{durationText(mean)}</span>, quickest{' '}
            <span className="n">{durationText(Math.min(...times))}</span>, slowest{' '}
            <span className="n">{durationText(Math.max(...times))}</span>
          </p>
          <Suspense fallback={<span className="note">Drawing…</span>}>
            <CyclePlot cycles={data.cycles} />
          </Suspense>
          <table aria-label="Cycles">
            <thead>
              <tr>
                <th className="r">Cycle</th>
                <th className="r">Time</th>
                <th>Ended</th>
                <th>How</th>
              </tr>
            </thead>
            <tbody>
              {data.cycles.map((cycle) => (
                <tr key={cycle.cycle}>
                  <td className="r n">{cycle.cycle}</td>
                  <td className="r n">{cycle.seconds.toFixed(2)} s</td>
                  <td className="n">{when(cycle.endedAtMs)}</td>
                  <td>{cycle.held ? 'held' : 'by itself'}</td>
                </tr>
              ))}
            </tbody>
          </table>
        </>
      ) : (
        <p className="quiet">No cycle was finished.</p>
      )}
    </section>
  );
}
