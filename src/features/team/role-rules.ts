import type { Person } from '../../../shared/api/resources';
import type { Role } from '../../../shared/team/roles';

/** What each role adds to the one before it. */
export const ROLE_DOES: Record<Role, string> = {
  observer: 'watches, sees poses and runs, and can always stop the arm',
  operator: 'takes control, brings the arm up, jogs, runs approved sequences',
  teacher: 'teaches poses and sequences, rehearses, approves for operators',
  builder: 'describes the arm, its limits and drives; acknowledges hard faults',
  owner: 'team, outbox, audit log and settings; deletes arms',
};

/** Whether nobody else could look after the workshop. Disabled owners cannot. */
function isOnlyOwner(person: Person, people: readonly Person[]): boolean {
  return (
    person.role === 'owner' &&
    !person.disabled &&
    !people.some((other) => other.id !== person.id && other.role === 'owner' && !other.disabled)
  );
}

/** Why this person cannot have this role now, or null. The server decides again. */
export function whyNotRole(person: Person, role: Role, people: readonly Person[]): string | null {
  if (role !== 'owner' && isOnlyOwner(person, people))
    return `${person.name} is the only owner. Make somebody else owner first.`;
  return null;
}

/** Why this person cannot be disabled now, or null. */
export function whyNotDisable(person: Person, people: readonly Person[], youId: string): string | null {
  if (isOnlyOwner(person, people)) return `${person.name} is the only owner. Make somebody else owner first.`;
  if (person.id === youId) return 'Nobody can disable themselves. Another owner can.';
  return null;
}
