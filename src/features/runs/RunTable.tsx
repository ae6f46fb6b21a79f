import { flexRender } from '@tanstack/react-table';
import { getCoreRowModel, legacyCreateColumnHelper, useLegacyTable } from '@tanstack/react-table/legacy';
import { Fragment, useMemo } from 'react';
import { Link } from 'react-router-dom';
import type { RunSummary } from '../../../shared/api/resources';
import { clock, duration } from '../../components/when';
import { Ending } from './Ending';
import { dayOf, tookSeconds } from './run-words';

const column = legacyCreateColumnHelper<RunSummary>();
/** So many cycles are drawn one by one; beyond, the figures say it. */
const MOST_MARKS = 12;

function columnsFor(armId: string) {
  return [
    column.display({
      id: 'startedAtMs',
      header: 'Started',
      cell: ({ row: { original } }) => (
        <>
          <span className="n">{clock(original.startedAtMs)}</span>
          <span className="sub">{original.who}</span>
        </>
      ),
    }),
    column.display({
      id: 'sequenceName',
      header: 'Sequence',
      cell: ({ row: { original } }) => (
        <>
          <Link className="link" to={`/arms/${armId}/runs/${original.id}`}>
            <b>{original.sequenceName}</b>
          </Link>
          <span className="sub">
            version {original.version}, {original.trust}
          </span>
        </>
      ),
    }),
    column.display({
      id: 'cycles',
      header: 'One mark a cycle',
      cell: ({ row: { original } }) => <CycleMarks run={original} />,
    }),
    column.display({
      id: 'cyclesDone',
      header: 'Done',
      cell: ({ row: { original } }) => (
        <>
          <span className="n">{original.cyclesDone}</span>
          {original.cyclesAsked !== null && <span className="u">of {original.cyclesAsked}</span>}
        </>
      ),
    }),
    column.display({
      id: 'took',
      header: 'Took',
      cell: ({ row: { original } }) => {
        const seconds = tookSeconds(original);
        if (seconds === null) return <span className="quiet">–</span>;
        const { value, unit } = duration(seconds);
        return (
          <>
            <span className="n">{value}</span>
            <span className="u">{unit}</span>
          </>
        );
      },
    }),
    column.display({
      id: 'how',
      header: 'How it ended',
      cell: ({ row }) => <Ending how={row.original.how} />,
    }),
  ];
}
const RIGHT = new Set(['cyclesDone', 'took']);
const WIDE = new Set(['cycles', 'took']);
const classOf = (id: string) => `${RIGHT.has(id) ? 'r' : ''} ${WIDE.has(id) ? 'wide-only' : ''}`;

/** The history, newest first, under the days. */
export function RunTable({
  armId,
  runs,
  chosen,
}: {
  armId: string;
  runs: readonly RunSummary[];
  chosen: string | null;
}) {
  const columns = useMemo(() => columnsFor(armId), [armId]);
  const data = useMemo(() => [...runs], [runs]);
  const table = useLegacyTable({ data, columns, getCoreRowModel: getCoreRowModel() });
  const rows = table.getRowModel().rows;
  const nowMs = Date.now();
  const days = rows.map((row) => dayOf(row.original.startedAtMs, nowMs));
  return (
    <table aria-label="Runs">
      <thead>
        {table.getHeaderGroups().map((group) => (
          <tr key={group.id}>
            {group.headers.map((header) => (
              <th key={header.id} className={classOf(header.column.id)}>
                {flexRender(header.column.columnDef.header, header.getContext())}
              </th>
            ))}
          </tr>
        ))}
      </thead>
      <tbody>
        {rows.map((row, i) => (
          <Fragment key={row.id}>
            {days[i] !== days[i - 1] && (
              <tr className="day">
                <td colSpan={columns.length}>{days[i]}</td>
              </tr>
            )}
            <tr className={row.original.id === chosen ? 'sel' : ''}>
              {row.getVisibleCells().map((cell) => (
                <td key={cell.id} className={classOf(cell.column.id)}>
                  {flexRender(cell.column.columnDef.cell, cell.getContext())}
                </td>
              ))}
            </tr>
          </Fragment>
        ))}
      </tbody>
    </table>
  );
}

/** A filled bar for each finished cycle, a dash for each that did not come. The figures beside it say the same. */
function CycleMarks({ run }: { run: RunSummary }) {
  const asked = run.cyclesAsked ?? run.cyclesDone;
  if (asked > MOST_MARKS || asked === 0) return <span className="note">{asked === 0 ? '' : 'many'}</span>;
  return (
    <svg viewBox="0 0 108 24" width="108" height="24" aria-hidden="true">
      {Array.from({ length: asked }, (_, i) =>
        i < run.cyclesDone ? (
          <rect key={i} x={i * 9} y="4" width="7" height="18" fill="var(--er-ink)" />
        ) : (
          <path key={i} d={`M${i * 9} 21.5h7`} stroke="var(--er-edge)" fill="none" />
        ),
      )}
    </svg>
  );
}
