import type { AuditLog } from '../audit/audit-log';
import type { ArmRecord } from '../control/process-messages';
import type { ArmStore } from '../db/arm-store';
import type { RunStore } from '../db/run-store';
import type { SequenceStore } from '../db/sequence-store';

/** Writes down what an arm process reports. */
export function recordKeeper(stores: {
  arms: ArmStore;
  runs: RunStore;
  sequences: SequenceStore;
  audit: AuditLog;
}): (armId: string, record: ArmRecord) => void {
  return (armId, record) => {
    switch (record.kind) {
      case 'runStarted':
        stores.runs.start(armId, stores.arms.get(armId).revision, record);
        return;
      case 'runCycle':
        stores.runs.cycle(record);
        return;
      case 'runEnded':
        stores.runs.end(record);
        return;
      case 'programProven':
        stores.sequences.setProven(armId, record.fingerprint, record.who);
        return;
      case 'lastSeen':
        stores.arms.setLastSeen(armId, { q: record.q, atMs: record.atMs });
        return;
      case 'audit':
        stores.audit.append({
          who: record.who,
          act: record.act,
          arm: stores.arms.find(armId)?.name ?? armId,
          detail: record.detail,
          result: record.result,
        });
        return;
    }
  };
}
