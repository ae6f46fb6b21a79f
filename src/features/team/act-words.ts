/** What the audit log's acts are called in words. Acts are for programs; a new one is shown as it is. */
const WORDS: Record<string, string> = {
  'arm.change': 'changed the arm',
  'arm.delete': 'deleted the arm',
  'arm.make': 'made the arm',
  'arm.unattended': 'set running unattended',
  'ceiling.set': 'raised the speed ceiling',
  'control.ask': 'asked for control',
  'control.force': 'took control by force',
  'control.handBack': 'handed control back',
  'control.take': 'took control',
  fault: 'faulted',
  'fault.acknowledge': 'acknowledged a fault',
  'invitation.accept': 'accepted an invitation',
  'invitation.make': 'invited',
  'invitation.withdraw': 'withdrew an invitation',
  'motors.energise': 'energised',
  'motors.off': 'switched the motors off',
  nudge: 'nudged',
  'person.change': 'changed a person',
  'pose.capture': 'captured a pose',
  'pose.delete': 'deleted a pose',
  'pose.export': 'exported poses',
  'pose.import': 'imported poses',
  'pose.restore': 'restored a pose',
  'pose.reteach': 're-taught a pose',
  'pose.type': 'typed a pose',
  reference: 'referenced',
  'run.export': 'exported runs',
  'run.resume': 'resumed a run',
  'run.start': 'started a run',
  'sequence.approve': 'approved a sequence',
  'sequence.delete': 'deleted a sequence',
  'sequence.make': 'made a sequence',
  'sequence.save': 'saved a sequence',
  'sequence.withdraw': 'withdrew an approval',
  'session.signIn': 'signed in',
  'session.signOut': 'signed out',
  setup: 'began the workshop',
  stop: 'pressed Stop',
  'trust.declare': 'declared the position',
  'trust.doubt': 'doubted the position',
  'workshop.rename': 'renamed the workshop',
};

export const actWords = (act: string): string => WORDS[act] ?? act;

/** Whether an entry mentions every word that was typed, whatever the case. */
export function mentions(
  entry: { who: string; act: string; arm: string | null; detail: string; result: string; address: string },
  typed: string,
): boolean {
  const text = [
    entry.who,
    actWords(entry.act),
    entry.act,
    entry.arm,
    entry.detail,
    entry.result,
    entry.address,
  ]
    .join(' ')
    .toLowerCase();
  return typed
    .toLowerCase()
    .split(/\s+/)
    .every((word) => text.includes(word));
}
