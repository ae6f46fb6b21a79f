import { desc } from 'drizzle-orm';
import { createTransport, type Transporter } from 'nodemailer';
import type { Mail } from '../../shared/api/resources';
import { newId } from '../auth/tokens';
import type { Database } from '../db/database';
import { mails } from '../db/schema';

/** Sends mails over SMTP when a server is named; every mail is kept, and unsent ones wait on the Outbox page. */
export class Mailer {
  private readonly transport: Transporter | null;

  constructor(
    private readonly db: Database,
    private readonly options: {
      smtpUrl: string | null;
      from: string;
      wallMs: () => number;
      log: { warn(message: string): void };
    },
  ) {
    this.transport = options.smtpUrl ? createTransport(options.smtpUrl) : null;
  }

  /** Returns whether the mail left; if not, it waits in the Outbox. */
  async send(mail: { to: string; subject: string; body: string }): Promise<boolean> {
    let sent = false;
    if (this.transport) {
      try {
        await this.transport.sendMail({
          from: this.options.from,
          to: mail.to,
          subject: mail.subject,
          text: mail.body,
        });
        sent = true;
      } catch (error) {
        this.options.log.warn(`a mail could not be sent and waits in the Outbox: ${String(error)}`);
      }
    }
    this.db
      .insert(mails)
      .values({ id: newId(), ...mail, createdAtMs: this.options.wallMs(), sent })
      .run();
    return sent;
  }

  list(): Mail[] {
    return this.db.select().from(mails).orderBy(desc(mails.createdAtMs)).limit(200).all();
  }
}
