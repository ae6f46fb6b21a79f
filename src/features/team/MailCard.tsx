import { useRef, useState } from 'react';
import type { Mail } from '../../../shared/api/resources';
import { when } from '../../components/when';

const LINK = /(https?:\/\/\S+)/;

/** A mail as it was written; its link can be taken by hand where no mail server carries it. */
export function MailCard({ mail }: { mail: Mail }) {
  const link = LINK.exec(mail.body)?.[1];
  return (
    <article className="icard mail" aria-label={`${mail.subject}, to ${mail.to}`}>
      <h2 className="name">
        {mail.subject}
        <span className={`end tag ${mail.sent ? '' : 'unsent'}`}>{mail.sent ? 'sent' : 'not sent'}</span>
      </h2>
      <p className="note">
        to {mail.to}, {when(mail.createdAtMs)}
      </p>
      <p className="body">{mail.body}</p>
      {link && <CopyLink link={link} />}
    </article>
  );
}

/** Copying by script needs a secure page; without one the link is selected, to be copied by hand. */
function CopyLink({ link }: { link: string }) {
  const field = useRef<HTMLInputElement>(null);
  const [said, setSaid] = useState('');
  const copy = async () => {
    try {
      await navigator.clipboard.writeText(link);
      setSaid('Copied. It works once; hand it only to the person it is for.');
    } catch {
      field.current?.select();
      setSaid('Selected: copy it with the keyboard or the menu.');
    }
  };
  return (
    <div className="copy">
      <div className="entry text">
        <input ref={field} readOnly value={link} aria-label="Link in the mail" />
      </div>
      <button type="button" className="btn" onClick={() => void copy()}>
        Copy the link
      </button>
      <span className="note" role="status">
        {said}
      </span>
    </div>
  );
}
