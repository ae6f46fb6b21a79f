import { lazy, Suspense, useMemo, useState } from 'react';
import type { Arm, Rehearsal, Sequence } from '../../../shared/api/resources';
import { torqueWord } from '../../../shared/arm/drives';
import type { ArmModel } from '../../../shared/arm/model';
import { CEILINGS } from '../../../shared/arm/trust';
import { shownValue } from '../../../shared/arm/units';
import { errorText } from '../../api/client';
import { useRehearsal } from '../../api/sequences';
import { FaultIcon, WarnIcon } from '../../components/icons';
import { Message } from '../../components/Message';
import { Segmented } from '../../components/Segmented';
import { ago, duration } from '../../components/when';

const TorquePlot = lazy(() => import('./TorquePlot'));
const BAR = { roomy: 'roomy', fair: 'fair', tight: 'tight', 'none left': 'none' } as const;
/** The lines of the plot's key, as its dashes. */
const KEY_DASHES = ['', '6 4', '2 3', '10 3 2 3', '1 4', '14 4', '4 2', '8 2'];

/** One cycle computed against the arm's model before any motor turns; each finding at its step. */
export function RehearsalPanel({
  arm,
  sequence,
  dirty,
  saving,
  onSave,
  onGoToStep,
}: {
  arm: Arm;
  sequence: Sequence;
  dirty: boolean;
  saving: boolean;
  onSave: () => void;
  onGoToStep: (id: string) => void;
}) {
  const [ceiling, setCeiling] = useState<number>(CEILINGS.full);
  const rehearsal = useRehearsal(arm.id, sequence.id, sequence.shownVersion, true, ceiling);
  return (
    <section className="pane check" aria-label="Rehearsal">
      <div className="cap">
        <h2 className="h2">Rehearsal</h2>
        <span className="note">
          version <span className="n">{sequence.shownVersion}</span>
          {dirty ? ', before your changes' : ' with today’s poses and arm'}
          {rehearsal.data ? `, ${ago(rehearsal.dataUpdatedAt)}` : ''}
        </span>
        <span className="end line">
          <Segmented
            label="Ceiling to rehearse at"
            value={ceiling}
            options={[
              { value: CEILINGS.easy as number, label: 'at easy' },
              { value: CEILINGS.full as number, label: 'at full' },
            ]}
            onChange={setCeiling}
          />
          {dirty ? (
            <button type="button" className="btn sm" disabled={saving} onClick={onSave}>
              Save and rehearse
            </button>
          ) : (
            <button
              type="button"
              className="btn sm"
              disabled={rehearsal.isFetching}
              onClick={() => void rehearsal.refetch()}
            >
              {rehearsal.data ? 'Rehearse again' : 'Rehearse'}
            </button>
          )}
        </span>
      </div>
      {rehearsal.isError && <Message kind="fault">{errorText(rehearsal.error)}</Message>}
      {rehearsal.data && <Result rehearsal={rehearsal.data} model={arm.model} onGoToStep={onGoToStep} />}
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
  const names = useMemo(() => model.joints.map((joint) => joint.name), [model]);
  const moves = rehearsal.plot.t.length > 1;
  return (
    <>
      <KeyFigures rehearsal={rehearsal} model={model} />
      <Problems rehearsal={rehearsal} onGoToStep={onGoToStep} />
      {moves && (
        <div className="tl">
          <div className="cap">
            <h3 className="h3">Torque used, one cycle</h3>
            <span className="note">in % of what each joint has</span>
            <span className="legend end">
              {names.map((name, i) => (
                <span key={name}>
                  <svg viewBox="0 0 34 8" aria-hidden="true">
                    <path
                      d="M1 4H33"
                      stroke="var(--er-ink)"
                      strokeWidth="1.8"
                      strokeDasharray={KEY_DASHES[i % KEY_DASHES.length]}
                    />
                  </svg>
                  {name.toLowerCase()}
                </span>
              ))}
            </span>
          </div>
          <Suspense fallback={<span className="note">Drawing…</span>}>
            <TorquePlot rehearsal={rehearsal} names={names} />
          </Suspense>
        </div>
      )}
    </>
  );
}

function KeyFigures({ rehearsal, model }: { rehearsal: Rehearsal; model: ArmModel }) {
  const { nearestLimit, highestTorque, highestSpeed } = rehearsal;
  const time = duration(rehearsal.duration);
  const name = (index: number) => (model.joints[index]?.name ?? '').toLowerCase();
  const word = highestTorque ? torqueWord(highestTorque.used) : null;
  return (
    <div className="kp">
      <div>
        <div className="k">Duration of a cycle</div>
        <div className="v">
          {time.value}
          <span className="u">{time.unit}</span>
        </div>
        <div className="s quiet">
          fastest point <span className="n">{Math.round(highestSpeed * 1000)} mm/s</span>
        </div>
      </div>
      <div>
        <div className="k">Highest torque used</div>
        {highestTorque && word ? (
          <>
            <div className="v">
              {Math.round(highestTorque.used * 100)}
              <span className="u">%</span> <span className="w">· {word}</span>
              <span
                className={`hl ${BAR[word]}`}
                style={{ '--used': `${Math.min(100, highestTorque.used * 100)}%` } as React.CSSProperties}
              >
                <i />
              </span>
            </div>
            <div className="s">
              {name(highestTorque.joint)}, step <span className="n">{highestTorque.path}</span>
            </div>
          </>
        ) : (
          <div className="v">–</div>
        )}
      </div>
      <div>
        <div className="k">Nearest limit</div>
        {nearestLimit ? (
          <>
            <div className="v">
              {shownValue(model.joints[nearestLimit.joint]?.type ?? 'revolute', nearestLimit.margin)}
            </div>
            <div className="s">
              {name(nearestLimit.joint)}, step <span className="n">{nearestLimit.path}</span>
            </div>
          </>
        ) : (
          <div className="v">–</div>
        )}
      </div>
    </div>
  );
}

function Problems({
  rehearsal: { problems },
  onGoToStep,
}: {
  rehearsal: Rehearsal;
  onGoToStep: (id: string) => void;
}) {
  if (problems.length === 0)
    return <p className="small">Nothing stands in the way: every pose inside its limits, torque to spare.</p>;
  return (
    <ul className="warns" aria-label="What the rehearsal found">
      {problems.map((problem) => (
        <li
          key={`${problem.stepId}${problem.code}${problem.message}`}
          className={problem.severity === 'blocks' ? 'bad' : ''}
        >
          {problem.severity === 'blocks' ? <FaultIcon /> : <WarnIcon />}
          <span className="n">{problem.path || '–'}</span>
          <span>
            {problem.severity === 'blocks' && <b>It cannot run like this. </b>}
            {problem.message}
          </span>
          {problem.stepId ? (
            <button
              type="button"
              className="btn sm"
              aria-label={`Go to step ${problem.path}`}
              onClick={() => onGoToStep(problem.stepId)}
            >
              Go to step
            </button>
          ) : (
            <span />
          )}
        </li>
      ))}
    </ul>
  );
}
