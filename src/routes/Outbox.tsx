import '../features/team/team.css';
import { may } from '../../shared/team/roles';
import { useSession } from '../api/session';
import { useOutbox } from '../api/team';
import { QueryState } from '../components/QueryState';
import { useTitle } from '../components/use-title';
import { MailCard } from '../features/team/MailCard';
import { NotForYou } from '../features/team/NotForYou';

export function Component() {
  const session = useSession().data;
  useTitle('Outbox', session?.workshop);
  return may(session?.you?.role ?? 'observer', 'outbox.see') ? (
    <Mails />
  ) : (
    <NotForYou title="Outbox" needs="outbox.see" />
  );
}

function Mails() {
  const mails = useOutbox();
  return (
    <main className="sheet listpage">
      <div className="bar">
        <h1 className="title">Outbox</h1>
        <span className="quiet small">Mails that left, and mails that wait because no server took them.</span>
      </div>
      <div className="scroll stack">
        <QueryState
          query={mails}
          waiting="Looking for mails…"
          empty={mails.data?.length ? null : 'No mails yet. Invitations made on Team appear here.'}
        />
        {mails.data?.map((mail) => (
          <MailCard key={mail.id} mail={mail} />
        ))}
      </div>
    </main>
  );
}
