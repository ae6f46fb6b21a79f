import { createHash } from 'node:crypto';
import { desc, lt } from 'drizzle-orm';
import type { AuditEntry } from '../../shared/api/resources';
import type { Database } from '../db/database';
import { auditLog } from '../db/schema';

export interface AuditFact {
  who: string;
  act: string;
  arm?: string | null;
  detail?: string;
  result?: string;
  address?: string;
}

const PAGE = 100;
const MOST_DETAIL = 500;

/** Who did what, when. Entries are chained by hash, so that a changed or missing one shows. */
export class AuditLog {
  constructor(
    private readonly db: Database,
    private readonly wallMs: () => number,
    private readonly log: { warn(message: string): void },
  ) {}

  /** Never throws: what is being audited (a stop, say) must not depend on the disk. */
  append(fact: AuditFact): void {
    try {
      this.db.transaction((tx) => {
        const last = tx
          .select({ hash: auditLog.hash })
          .from(auditLog)
          .orderBy(desc(auditLog.seq))
          .limit(1)
          .get();
        const entry = {
          atMs: this.wallMs(),
          who: oneLine(fact.who),
          act: oneLine(fact.act),
          arm: fact.arm ? oneLine(fact.arm) : null,
          detail: oneLine(fact.detail ?? ''),
          result: oneLine(fact.result ?? 'done'),
          address: oneLine(fact.address ?? ''),
        };
        tx.insert(auditLog)
          .values({ ...entry, hash: chainHash(last?.hash ?? '', entry) })
          .run();
      });
    } catch (error) {
      this.log.warn(`the audit log could not be written: ${String(error)}`);
    }
  }

  /** Newest first. */
  page(before?: number): AuditEntry[] {
    return this.db
      .select()
      .from(auditLog)
      .where(before === undefined ? undefined : lt(auditLog.seq, before))
      .orderBy(desc(auditLog.seq))
      .limit(PAGE)
      .all()
      .map(({ hash: _hash, ...entry }) => entry);
  }

  /** The first entry whose hash does not fit the one before it, or null. */
  firstBroken(): number | null {
    let before = '';
    for (const { seq, hash, ...entry } of this.db.select().from(auditLog).orderBy(auditLog.seq).all()) {
      if (hash !== chainHash(before, entry)) return seq;
      before = hash;
    }
    return null;
  }
}

type Hashed = Omit<AuditEntry, 'seq'>;

function chainHash(before: string, e: Hashed): string {
  const text = JSON.stringify([before, e.atMs, e.who, e.act, e.arm, e.detail, e.result, e.address]);
  return createHash('sha256').update(text).digest('hex');
}

/** Line breaks and control characters must not forge entries where the log is printed. */
function oneLine(text: string): string {
  // biome-ignore lint/suspicious/noControlCharactersInRegex: they are what is taken out
  return text.replace(/[\u0000-\u001f\u007f\u2028\u2029]+/g, ' ').slice(0, MOST_DETAIL);
}
