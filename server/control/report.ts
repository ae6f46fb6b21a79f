import type { EventMessage } from '../../shared/live/server-messages';
import type { ControllerState, Outputs } from './state';

/** A refusal: a stable code for programs, a sentence for people; null means done. */
export type Refusal = { code: string; message: string } | null;

export function refusal(code: string, message: string): { code: string; message: string } {
  return { code, message };
}

/** Tells every page that watches. */
export function tell(
  state: ControllerState,
  outputs: Outputs,
  level: EventMessage['level'],
  code: string,
  message: string,
): void {
  outputs.events.push({ event: { type: 'event', atMs: state.wallMs, level, code, message }, socketId: null });
}

/** Writes an act into the audit log. */
export function audit(
  state: ControllerState,
  outputs: Outputs,
  who: { userId: string; name: string } | null,
  act: string,
  detail = '',
  result = 'done',
): void {
  outputs.records.push({
    kind: 'audit',
    userId: who?.userId ?? null,
    who: who?.name ?? 'the arm',
    act,
    detail,
    result,
    atMs: state.wallMs,
  });
}
