import { useState } from 'react';
import { errorText } from '../api/client';
import { useAudit } from '../api/team';
import { Message } from '../components/Message';
import { when } from '../components/when';

export function Component() {
  const audit = useAudit();
  const [filter, setFilter] = useState('');
  const wanted = filter.trim().toLowerCase();
  const entries = (audit.data?.pages.flat() ?? []).filter(
    (e) =>
      !wanted || `${e.who} ${e.act} ${e.arm ?? ''} ${e.detail} ${e.result}`.toLowerCase().includes(wanted),
  );
  return (
    <main className="sheet listpage">
      <div className="bar">
        <h1 className="title">Audit</h1>
        <div className="entry text" style={{ width: 260 }}>
          <input
            aria-label="Find in the log"
            placeholder="Find…"
            value={filter}
            onChange={(e) => setFilter(e.target.value)}
          />
        </div>
        <span className="quiet small">Who did what, newest first. Entries are never changed.</span>
      </div>
      <div className="scroll">
        {audit.isError && <Message kind="fault">{errorText(audit.error)}</Message>}
        <table>
          <thead>
            <tr>
              <th>When</th>
              <th>Who</th>
              <th>Act</th>
              <th>Arm</th>
              <th>Detail</th>
              <th className="wide-only">Result</th>
            </tr>
          </thead>
          <tbody>
            {entries.map((entry) => (
              <tr key={entry.seq}>
                <td className="n">{when(entry.atMs)}</td>
                <td>{entry.who}</td>
                <td>{entry.act}</td>
                <td>{entry.arm ?? ''}</td>
                <td>{entry.detail}</td>
                <td className="wide-only">{entry.result}</td>
              </tr>
            ))}
          </tbody>
        </table>
        {entries.length === 0 && !audit.isPending && <p className="empty quiet">Nothing matches.</p>}
        {audit.hasNextPage && (
          <button
            type="button"
            className="btn"
            style={{ marginTop: 12 }}
            onClick={() => void audit.fetchNextPage()}
          >
            Earlier entries
          </button>
        )}
      </div>
    </main>
  );
}
