import { readyStop, sendCommand } from './connection';
import { latestTelemetry } from './live-store';

/** One joint a bounded way on, rad or m. A nudge that reaches the arm late is refused: it says how fresh its view was. */
export function nudgeJoint(axis: number, amount: number): ReturnType<typeof sendCommand> {
  readyStop();
  return sendCommand({ type: 'nudge', frame: 'joint', axis, amount, seenT: latestTelemetry()?.t });
}
