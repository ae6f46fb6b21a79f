import { desc } from 'drizzle-orm';
import { createTransport, type Transporter } from 'nodemailer';
import type { Mail } from '../../shared/api/resources';
import { newId } from '../auth/tokens';
import type { Database } from '../db/database';
import { mails } from '../db/schema';

/** A mail server that does not answer must not keep the page waiting for minutes. */
const PATIENCE = { connectionTimeout: 8000, greetingTimeout: 8000, socketTimeout: 15_000 };

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
    this.transport = options.smtpUrl ? createTransport({ url: options.smtpUrl, ...PATIENCE }) : null;
  }

  /**
   * Returns whether the mail left; if not, it waits in the Outbox. `secret` is the part of the body that opens
   * something: it is kept only where the Outbox is the one way to pass it on.
   */
  async send({
    secret,
    ...mail
  }: {
    to: string;
    subject: string;
    body: string;
    secret?: string;
  }): Promise<boolean> {
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
    const body = sent && secret ? mail.body.replaceAll(secret, '(sent)') : mail.body;
    this.db
      .insert(mails)
      .values({ id: newId(), ...mail, body, createdAtMs: this.options.wallMs(), sent })
      .run();
    return sent;
  }

  list(): Mail[] {
    return this.db.select().from(mails).orderBy(desc(mails.createdAtMs)).limit(200).all();
  }
}
