import '../features/team/team.css';
import { useState } from 'react';
import { may } from '../../shared/team/roles';
import { useSession } from '../api/session';
import { useAudit } from '../api/team';
import { QueryState } from '../components/QueryState';
import { useTitle } from '../components/use-title';
import { when } from '../components/when';
import { actWords, mentions } from '../features/team/act-words';
import { NotForYou } from '../features/team/NotForYou';

export function Component() {
  const session = useSession().data;
  useTitle('Audit', session?.workshop);
  return may(session?.you?.role ?? 'observer', 'audit.see') ? (
    <AuditLog />
  ) : (
    <NotForYou title="Audit" needs="audit.see" />
  );
}

function AuditLog() {
  const audit = useAudit();
  const [typed, setTyped] = useState('');
  const all = audit.data?.pages.flat() ?? [];
  const entries = all.filter((entry) => mentions(entry, typed));
  const filtered = typed.trim() !== '';
  return (
    <main className="sheet listpage">
      <div className="bar">
        <h1 className="title">Audit</h1>
        <div className="entry text find">
          <input
            type="search"
            aria-label="Find in the log"
            placeholder="Find…"
            value={typed}
            onChange={(event) => setTyped(event.target.value)}
          />
        </div>
        <span className="quiet small" role="status">
          {filtered
            ? `${entries.length} of the ${all.length} newest entries`
            : 'Who did what, newest first. Entries are never changed.'}
        </span>
      </div>
      {/* biome-ignore lint/a11y/noNoninteractiveTabindex: a region that scrolls has to be reachable by keyboard */}
      <section className="scroll" tabIndex={0} aria-label="Entries">
        <QueryState
          query={audit}
          waiting="Opening the log…"
          empty={all.length === 0 ? 'Nothing has happened yet.' : null}
        />
        {entries.length > 0 && (
          <table className="audit">
            <thead>
              <tr>
                <th>When</th>
                <th>Who</th>
                <th>Did</th>
                <th>Arm</th>
                <th>What exactly</th>
                <th>Result</th>
                <th>From</th>
              </tr>
            </thead>
            <tbody>
              {entries.map(({ seq, atMs, who, act, arm, detail, result, address }) => (
                <tr key={seq}>
                  <td className="at">{when(atMs)}</td>
                  <td>{who}</td>
                  <td>{actWords(act)}</td>
                  <td>{arm}</td>
                  <td className="detail">{detail}</td>
                  <td>{result === 'done' ? <span className="quiet">done</span> : <b>{result}</b>}</td>
                  <td className="n quiet">{address}</td>
                </tr>
              ))}
            </tbody>
          </table>
        )}
        {filtered && all.length > 0 && entries.length === 0 && (
          <p className="empty quiet">
            No entry among the {all.length} newest mentions that.
            {audit.hasNextPage && ' Look further back with Earlier entries.'}
          </p>
        )}
        {audit.hasNextPage && (
          <p className="earlier">
            <button
              type="button"
              className="btn"
              disabled={audit.isFetchingNextPage}
              onClick={() => void audit.fetchNextPage()}
            >
              {audit.isFetchingNextPage ? 'Looking…' : 'Earlier entries'}
            </button>
          </p>
        )}
      </section>
    </main>
  );
}
