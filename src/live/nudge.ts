import type { ClientMessage } from '../../shared/live/client-messages';
import { readyStop, sendCommand } from './connection';
import { latestTelemetry } from './live-store';

type Nudge = Extract<ClientMessage, { type: 'nudge' }>;

/** One joint, or the tool along or about one axis, a bounded way on, rad or m. A nudge that reaches the arm late is refused: it says how fresh its view was. */
export function sendNudge(
  frame: Nudge['frame'],
  axis: Nudge['axis'],
  amount: number,
): ReturnType<typeof sendCommand> {
  readyStop();
  return sendCommand({ type: 'nudge', frame, axis, amount, seenT: latestTelemetry()?.t });
}
