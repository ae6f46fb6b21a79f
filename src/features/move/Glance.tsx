import './glance.css';
import { Link } from 'react-router-dom';
import { torqueWord } from '../../../shared/arm/drives';
import type { ArmModel } from '../../../shared/arm/model';
import { worstTrust } from '../../../shared/arm/trust';
import { CeilingIcon, MotorsIcon, TrustIcon } from '../../components/icons';
import { StopRegion } from '../../components/StopRegion';
import { pressStop } from '../../live/connection';
import { endHold } from '../../live/hold';
import { useArmState, useConnection, useStopState, useTelemetry } from '../../live/use-live';

/** Readable from two metres: what it does, how far, how sure, how fast, and Stop. */
export function Glance({ armId, model }: { armId: string; model: ArmModel }) {
  const connection = useConnection();
  const motors = useArmState((state) => state?.motors ?? 'resting');
  const trust = useArmState((state) => worstTrust(state?.trust ?? []));
  const fraction = useArmState((state) => state?.ceiling.fraction ?? 0.05);
  const run = useArmState((state) => state?.run ?? null);
  const fault = useArmState((state) => state?.fault?.message ?? null);
  const control = useArmState((state) => state?.control?.name ?? null);
  const stop = useStopState();
  const most = useTelemetry((t) => {
    let joint = -1;
    let used = 0;
    for (const [i, value] of (t?.torqueUsed ?? []).entries())
      if (value !== null && value > used) {
        used = value;
        joint = i;
      }
    return { joint, percent: Math.round(used * 100), used: Math.round(used * 100) / 100 };
  }, 4);
  const lost = connection === 'lost';
  const moving = !lost && (motors === 'moving' || motors === 'stopping');
  const word = lost ? 'no link' : motors;
  const line = lost
    ? 'This picture is old.'
    : (fault ?? (run ? (run.reason ?? `Step ${run.stepPath}`) : moving ? 'Keep clear.' : 'Nothing moves.'));
  return (
    <div className="gl">
      <header className="gt">
        {model.name} <span>{run?.sequenceName ?? ''}</span>
        <Link className="btn" to={`/arms/${armId}/move`} style={{ textDecoration: 'none', color: 'inherit' }}>
          Leave glance
        </Link>
      </header>
      <main className="g1">
        <section className={moving ? 'mv' : motors === 'faulted' || lost ? 'mv flt' : 'mv still'}>
          <div className="in">
            <h1 className="big">
              <MotorsIcon state={lost ? 'faulted' : motors} />
              {word}
            </h1>
            <p>{line}</p>
          </div>
        </section>
        <section className="ct">
          {run ? (
            <>
              <div className="num">
                {Math.min(run.cycle, run.cycles ?? run.cycle)}
                <span>{run.cycles ? `of ${run.cycles} cycles` : 'cycles'}</span>
              </div>
              <p>{run.phase === 'countdown' ? `moves in ${run.countdownS}` : `step ${run.stepPath}`}</p>
            </>
          ) : (
            <>
              <div className="num">–</div>
              <p>no run</p>
            </>
          )}
        </section>
      </main>
      <section className="g2" aria-label="Status">
        <div>
          <span className="k">Position</span>
          <span className="v">
            <TrustIcon trust={trust} />
            {trust}
          </span>
        </div>
        <div>
          <span className="k">Speed ceiling</span>
          <span className="v">
            <CeilingIcon fraction={fraction} />
            <span className="n">{Math.round(fraction * 100)} %</span>
          </span>
        </div>
        <div>
          <span className="k">
            Torque used{most.joint >= 0 ? `, ${model.joints[most.joint]?.name.toLowerCase()}` : ''}
          </span>
          <span className="v">
            {most.joint >= 0 ? (
              <>
                <span className="n">{most.percent} %</span> · {torqueWord(most.used)}
              </>
            ) : (
              '–'
            )}
          </span>
        </div>
      </section>
      <footer className="g3">
        <div className="who">{control ? `${control} is in control` : 'Nobody is in control'}</div>
        <StopRegion
          state={stop}
          onStop={() => {
            endHold('stopped');
            pressStop();
          }}
        />
      </footer>
    </div>
  );
}
