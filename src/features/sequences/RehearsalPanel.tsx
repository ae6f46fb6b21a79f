import { lazy, Suspense } from 'react';
import type { Rehearsal } from '../../../shared/api/resources';
import { torqueWord } from '../../../shared/arm/drives';
import type { ArmModel } from '../../../shared/arm/model';
import { shownValue } from '../../../shared/arm/units';
import { errorText } from '../../api/client';
import { useRehearsal } from '../../api/sequences';
import { WarnIcon } from '../../components/icons';
import { Message } from '../../components/Message';
import { duration } from '../../components/when';

const TorquePlot = lazy(() => import('./TorquePlot'));

/** One cycle against the arm's model: what it takes, and what is wrong, attached to its step. */
export function RehearsalPanel({
  armId,
  sequenceId,
  version,
  model,
  dirty,
  onGoToStep,
}: {
  armId: string;
  sequenceId: string;
  version: number;
  model: ArmModel;
  dirty: boolean;
  onGoToStep: (id: string) => void;
}) {
  const rehearsal = useRehearsal(armId, sequenceId, version, true);
  return (
    <section className="pane check" aria-label="Rehearsal">
      <div className="cap">
        <h2 className="h2">Rehearsal</h2>
        <span className="note">
          version {version} against today’s poses and arm{dirty ? '; save to rehearse your edits' : ''}
        </span>
        <button
          type="button"
          className="btn sm end"
          disabled={rehearsal.isFetching}
          onClick={() => void rehearsal.refetch()}
        >
          {rehearsal.data ? 'Rehearse again' : 'Rehearse'}
        </button>
      </div>
      {rehearsal.isError && <Message kind="fault">{errorText(rehearsal.error)}</Message>}
      {rehearsal.data && <Result rehearsal={rehearsal.data} model={model} onGoToStep={onGoToStep} />}
    </section>
  );
}

function Result({
  rehearsal,
  model,
  onGoToStep,
}: {
  rehearsal: Rehearsal;
  model: ArmModel;
  onGoToStep: (id: string) => void;
}) {
  const { nearestLimit, highestTorque, problems } = rehearsal;
  const time = duration(rehearsal.duration);
  const joint = (index: number) => model.joints[index]!;
  return (
    <>
      <div className="kp">
        <div>
          <div className="k">Duration of a cycle</div>
          <div className="v">
            {time.value}
            <span className="u">{time.unit}</span>
          </div>
          <div className="s">fastest point {Math.round(rehearsal.highestSpeed * 1000)} mm/s</div>
        </div>
        <div>
          <div className="k">Highest torque used</div>
          <div className="v">
            {highestTorque ? Math.round(highestTorque.used * 100) : '–'}
            <span className="u">%</span> <small>{highestTorque ? torqueWord(highestTorque.used) : ''}</small>
          </div>
          <div className="s">
            {highestTorque ? `${joint(highestTorque.joint).name}, step ${highestTorque.path}` : ''}
          </div>
        </div>
        <div>
          <div className="k">Nearest limit</div>
          <div className="v">
            {nearestLimit ? shownValue(joint(nearestLimit.joint).type, nearestLimit.margin) : '–'}
          </div>
          <div className="s">
            {nearestLimit ? `${joint(nearestLimit.joint).name}, step ${nearestLimit.path}` : ''}
          </div>
        </div>
      </div>
      {problems.length === 0 ? (
        <p className="small">Nothing stands in the way: every pose inside its limits, torque to spare.</p>
      ) : (
        <ul className="warns">
          {problems.map((problem) => (
            <li key={`${problem.stepId}${problem.code}${problem.message}`}>
              <WarnIcon />
              <span className="n">{problem.path || '–'}</span>
              <span>
                {problem.severity === 'blocks' ? <b>Blocks. </b> : null}
                {problem.message}
              </span>
              {problem.stepId && (
                <button type="button" className="btn sm" onClick={() => onGoToStep(problem.stepId)}>
                  Go to step
                </button>
              )}
            </li>
          ))}
        </ul>
      )}
      <div className="tl">
        <div className="cap">
          <h3 className="h3">Torque used, one cycle</h3>
          <span className="note">in % of what each joint has</span>
        </div>
        <Suspense fallback={<span className="note">Drawing…</span>}>
          <TorquePlot rehearsal={rehearsal} names={model.joints.map((j) => j.name)} />
        </Suspense>
      </div>
    </>
  );
}
