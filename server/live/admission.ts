import type { RawData } from 'ws';
import { ClientMessage, MESSAGE_NEEDS } from '../../shared/live/client-messages';
import { may, type Role } from '../../shared/team/roles';
import { type RateLimits, rateClass } from './rate-limits';

export interface Refusal {
  id: string;
  code: string;
  message: string;
}
export type Admission =
  | { kind: 'admitted'; message: ClientMessage }
  | { kind: 'refused'; refusal: Refusal }
  /** So much nonsense that the socket is ended. */
  | { kind: 'hopeless' };

/**
 * Decides from the frame, the role and the rate alone whether a message may go further: JSON, known type,
 * no unknown or non-finite field, the role's permission, not too many of its kind.
 */
export function admit(
  data: RawData,
  isBinary: boolean,
  role: Role,
  limits: RateLimits,
  nowMs: number,
): Admission {
  const raw = isBinary ? undefined : parseJson(String(data));
  const parsed = ClientMessage.safeParse(raw);
  if (!parsed.success) {
    if (!limits.allows('malformed', nowMs)) return { kind: 'hopeless' };
    return refused(idOf(raw), 'badMessage', explain(raw, parsed.error.issues));
  }
  const message = parsed.data;
  const id = 'id' in message ? message.id : '';
  if (!may(role, MESSAGE_NEEDS[message.type]))
    return refused(id, 'notAllowed', `Your role, ${role}, does not allow this.`);
  if (message.type === 'control.take' && message.force && !may(role, 'control.force'))
    return refused(id, 'notAllowed', 'Only the owner may take control by force.');
  if (!limits.allows(rateClass(message.type), nowMs))
    return refused(id, 'tooFast', 'Too many orders at once. Wait a moment.');
  return { kind: 'admitted', message };
}

function refused(id: string, code: string, message: string): Admission {
  return { kind: 'refused', refusal: { id, code, message } };
}

function parseJson(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    return undefined;
  }
}

function idOf(raw: unknown): string {
  if (typeof raw !== 'object' || raw === null || !('id' in raw)) return '';
  return typeof raw.id === 'string' ? raw.id.slice(0, 64) : '';
}

function explain(raw: unknown, issues: readonly { path: PropertyKey[]; message: string }[]): string {
  if (raw === undefined) return 'The message is not JSON text.';
  const first = issues[0];
  const where = first?.path.map(String).join('.') ?? '';
  return `The message is not understood: ${where ? `${where}: ` : ''}${first?.message ?? 'unknown form'}.`;
}
