import { errorText } from '../api/client';
import { useOutbox } from '../api/team';
import { Message } from '../components/Message';
import { when } from '../components/when';
import { toast } from '../features/shell/toast';

const LINK = /(https?:\/\/\S+)/;

export function Component() {
  const mails = useOutbox();
  return (
    <main className="sheet listpage">
      <div className="bar">
        <h1 className="title">Outbox</h1>
        <span className="quiet small">
          Mails that left, and mails that wait because no mail server is set.
        </span>
      </div>
      <div className="scroll">
        {mails.isError && <Message kind="fault">{errorText(mails.error)}</Message>}
        {mails.data?.length === 0 && (
          <p className="empty quiet">No mails yet. Invitations appear here when you send them from Team.</p>
        )}
        {mails.data?.map((mail) => {
          const link = LINK.exec(mail.body)?.[1];
          return (
            <article key={mail.id} className="icard" style={{ marginTop: 14 }}>
              <h2 className="name">
                {mail.subject}
                <span className="end note">
                  to {mail.to}, {when(mail.createdAtMs)}, {mail.sent ? 'sent' : 'not sent'}
                </span>
              </h2>
              <pre
                style={{
                  padding: '10px 12px',
                  margin: 0,
                  whiteSpace: 'pre-wrap',
                  font: 'inherit',
                  fontSize: 14,
                }}
              >
                {mail.body}
              </pre>
              {link && (
                <p style={{ padding: '0 12px 12px' }}>
                  <button
                    type="button"
                    className="btn sm"
                    onClick={() => void navigator.clipboard.writeText(link).then(() => toast('Link copied.'))}
                  >
                    Copy the link
                  </button>
                </p>
              )}
            </article>
          );
        })}
      </div>
    </main>
  );
}
