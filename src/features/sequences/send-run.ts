import { toast } from '../../components/toast';
import { type Command, readyStop, sendCommand } from '../../live/connection';

/** Sends an order of the run bar; a refusal is said in the arm's words. Never queued, never repeated. */
export function sendRun(command: Command): void {
  readyStop();
  void sendCommand(command).then((outcome) => {
    if (!outcome.ok) toast(outcome.message);
  });
}
