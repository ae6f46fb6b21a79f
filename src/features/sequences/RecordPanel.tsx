import type { Arm, Pose } from '../../../shared/api/resources';
import { may } from '../../../shared/team/roles';
import { useLetterKey } from '../../components/letter-keys';
import { Message } from '../../components/Message';
import { Segmented } from '../../components/Segmented';
import { Silhouette } from '../../components/Silhouette';
import { useArmState, useConnection, useHello, useInControl, useTelemetry } from '../../live/use-live';
import type { Edit, Editing } from './editing';
import { JogRows } from './JogRows';
import type { Mark } from './marking';
import { findRow } from './step-tree';
import { useMark } from './use-mark';

/** Why the hold buttons cannot be used now, short enough to stand on them. */
function useJogReason(): string | null {
  const connection = useConnection();
  const role = useHello()?.you.role ?? 'observer';
  const inControl = useInControl();
  const resting = useArmState((state) => state === null || !state.energised.some(Boolean));
  const fault = useArmState((state) => state !== null && state.fault !== null);
  const running = useArmState((state) => state !== null && state.run !== null);
  if (connection !== 'live') return 'no link';
  if (!may(role, 'arm.control')) return 'watching';
  if (resting) return 'resting';
  if (fault) return 'fault';
  if (!inControl) return 'no control';
  return running ? 'running' : null;
}

/** Recording by marking: the live arm, its hold buttons, and one button that adds where it is now. */
export function RecordPanel({
  arm,
  poses,
  editing,
  dispatch,
  onDone,
}: {
  arm: Arm;
  poses: readonly Pose[];
  editing: Editing;
  dispatch: (action: Edit) => void;
  onDone: () => void;
}) {
  const mark = useMark(arm, poses, editing, dispatch);
  const jogReason = useJogReason();
  const q = useTelemetry((t) => (t ? t.q.map((value) => Math.round(value * 1e3) / 1e3) : null), 5);
  const opening = useArmState((state) => (state?.gripper?.energised ? state.gripper.opening : null));
  const usable = mark.reason === null && !mark.busy && mark.would.length > 0;
  useLetterKey('m', usable ? mark.press : null);
  const after = editing.selected === null ? null : findRow(editing.draft.steps, editing.selected);
  const where = after ? `after step ${after.path}` : 'at the end';
  return (
    <section className="pane check" aria-label="Record">
      <div className="cap">
        <h2 className="h2">Record</h2>
        <span className="note">Jog, then mark; or jog on Move in another window. Marks go in {where}.</span>
        <button type="button" className="btn sm end" onClick={onDone}>
          Done
        </button>
      </div>
      <div className="markrow">
        <Silhouette model={arm.model} q={q} gripper={opening} size="card" />
        <div className="stack">
          <p className="would" role="status">
            {mark.reason ?? wouldWords(mark.would, arm.name)}
          </p>
          <div className="line">
            <button type="button" className="btn ink big" disabled={!usable} onClick={mark.press}>
              Mark
              {usable && (
                <span aria-hidden="true">
                  <kbd>M</kbd>
                </span>
              )}
            </button>
            <span className="field">
              <span className="lab">Speed of the steps marked</span>
              <Segmented
                label="Speed of the steps marked"
                value={typeof mark.speed === 'string' ? mark.speed : null}
                options={(['creep', 'easy', 'full'] as const).map((speed) => ({
                  value: speed,
                  label: speed,
                }))}
                onChange={mark.setSpeed}
              />
            </span>
          </div>
        </div>
      </div>
      {mark.error && <Message kind="fault">{mark.error}</Message>}
      <JogRows model={arm.model} reason={jogReason} />
    </section>
  );
}

function wouldWords(marks: readonly Mark[], arm: string): string {
  if (marks.length === 0) return `Nothing to add: ${arm} is where the steps leave it.`;
  const parts = marks.map((mark) =>
    mark.kind === 'grip'
      ? 'a Grip'
      : mark.pose
        ? `a Go to “${mark.pose.name}”, where it stands`
        : 'a Go to a new pose, captured here',
  );
  return `Mark adds ${parts.join(' and ')}.`;
}
