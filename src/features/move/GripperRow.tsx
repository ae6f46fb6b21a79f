import type { Gripper } from '../../../shared/arm/model';
import { mToMm } from '../../../shared/arm/units';
import { Pictogram } from '../../components/pictograms';
import { toast } from '../../components/toast';
import { sendCommand } from '../../live/connection';
import { useArmState } from '../../live/use-live';

/** One press opens or closes a little further; the gripper moves slowly and by itself, a bounded act. */
const STEP = 0.1;

export function GripperRow({ gripper, reason }: { gripper: Gripper; reason: string | null }) {
  const state = useArmState((s) => s?.gripper ?? null);
  const opening = state?.opening ?? 0;
  const target = state?.target ?? 0;
  const widest = mToMm(gripper.opening);
  const set = (to: number) =>
    void sendCommand({ type: 'gripper.set', opening: Math.min(1, Math.max(0, to)) }).then((outcome) => {
      if (!outcome.ok) toast(outcome.message);
    });
  const known = state?.energised ?? false;
  return (
    <div className="joint" data-joint="gripper">
      <button
        type="button"
        className={`gripbtn ${reason ? 'is-off' : ''}`}
        aria-label="Gripper, close a little"
        disabled={reason !== null || target <= 0}
        onClick={() => set(target - STEP)}
      >
        <Pictogram picture="grip" direction={-1} />
        <span>close</span>
        <small>{reason ?? `by ${Math.round(widest * STEP)} mm`}</small>
      </button>
      <div className="travel">
        <div className="th">
          <h3>Gripper</h3>
          <span className="why">
            <button type="button" className="link small" disabled={reason !== null} onClick={() => set(0)}>
              close all the way
            </button>{' '}
            <button type="button" className="link small" disabled={reason !== null} onClick={() => set(1)}>
              open all the way
            </button>
          </span>
          <span className="val">
            {known ? (
              <>
                {(opening * widest).toFixed(1)}
                <span className="u">mm</span>
              </>
            ) : (
              '–'
            )}
          </span>
        </div>
        <div
          className={`track ${known ? '' : 'unknown'}`}
          role="meter"
          aria-label="Gripper opening"
          aria-valuemin={0}
          aria-valuemax={Math.round(widest)}
          aria-valuenow={Math.round(opening * widest * 10) / 10}
          aria-valuetext={known ? `${(opening * widest).toFixed(1)} millimetres open` : 'unknown'}
        >
          <i className="ln" style={{ left: '5px' }}>
            0
          </i>
          <i className="ln" style={{ right: '5px' }}>
            {Math.round(widest)}
          </i>
          {known ? (
            <>
              {target !== opening && <i className="tg" style={{ left: `${target * 100}%` }} />}
              <i className="nd declared" style={{ left: `${opening * 100}%` }}>
                <svg viewBox="0 0 15 15" preserveAspectRatio="xMidYMin" aria-hidden="true">
                  <path
                    d="M1.2 1h12.6v6.5L7.5 14 1.2 7.5Z"
                    fill="currentColor"
                    stroke="currentColor"
                    strokeWidth="1.8"
                  />
                </svg>
              </i>
            </>
          ) : (
            <span className="uq">
              <span>unknown</span>
            </span>
          )}
        </div>
        <div className="hr">
          <span />
          <span className="ht">{state?.moving ? 'moving' : 'commanded, not measured'}</span>
        </div>
      </div>
      <button
        type="button"
        className={`gripbtn ${reason ? 'is-off' : ''}`}
        aria-label="Gripper, open a little"
        disabled={reason !== null || target >= 1}
        onClick={() => set(target + STEP)}
      >
        <Pictogram picture="grip" direction={1} />
        <span>open</span>
        <small>{reason ?? `by ${Math.round(widest * STEP)} mm`}</small>
      </button>
    </div>
  );
}
