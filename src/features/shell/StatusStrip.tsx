import { useState } from 'react';
import type { ArmModel } from '../../../shared/arm/model';
import { worstTrust } from '../../../shared/arm/trust';
import { may } from '../../../shared/team/roles';
import { CeilingIcon, LinkIcon, MotorsIcon, MotorsOffIcon, TrustIcon } from '../../components/icons';
import { namesOf } from '../../components/joint-names';
import { StopRegion } from '../../components/StopRegion';
import { clock } from '../../components/when';
import { pressStop } from '../../live/connection';
import { endHold } from '../../live/hold';
import { useArmState, useConnection, useHello, useStopState, useTelemetry } from '../../live/use-live';
import { ControlCell } from './ControlCell';
import { MotorsOffDialog } from './MotorsOffDialog';

/** The title block of the sheet: always these cells in this order, then Stop. */
export function StatusStrip({ model }: { model: ArmModel }) {
  const connection = useConnection();
  const stop = useStopState();
  return (
    <footer className="strip" role="contentinfo" aria-label={`${model.name}, status`}>
      <LinkCell />
      <MotorsCell model={model} />
      <TrustCell />
      <CeilingCell />
      <ControlCell />
      <MotorsOffCell model={model} />
      <StopRegion
        state={connection === 'lost' && stop === 'ready' ? 'ready' : stop}
        onStop={() => {
          endHold('stopped');
          pressStop();
        }}
      />
    </footer>
  );
}

function LinkCell() {
  const connection = useConnection();
  const link = useArmState((state) => state?.link ?? null);
  const word =
    connection === 'lost'
      ? 'no server'
      : connection === 'connecting' || !link
        ? 'opening'
        : link.state === 'restarting'
          ? 'restarting'
          : link.state;
  const lost = connection === 'lost' || word === 'lost' || word === 'restarting';
  return (
    <div className={`cell c-link ${lost ? 'faulted' : ''}`}>
      <span className="k">Link</span>
      <span className="v">
        <LinkIcon lost={lost} />
        {word}
      </span>
      <span className="s">
        {connection === 'lost'
          ? 'data is old'
          : link?.answerMs != null
            ? `answer ${Math.round(link.answerMs)} ms`
            : link?.kind === 'builtIn'
              ? 'built-in arm'
              : ''}
      </span>
    </div>
  );
}

function MotorsCell({ model }: { model: ArmModel }) {
  const motors = useArmState((state) => state?.motors ?? 'resting');
  const since = useArmState((state) => (state ? { atMs: state.motorsSinceMs, by: state.motorsBy } : null));
  const fault = useArmState((state) => state?.fault?.code ?? null);
  const moving = useTelemetry((t) => (t ? t.qd.flatMap((v, i) => (Math.abs(v) > 1e-6 ? [i] : [])) : []), 5);
  const reason =
    motors === 'moving' || motors === 'stopping'
      ? moving.length === 1
        ? (model.joints[moving[0]!]?.name ?? '').toLowerCase()
        : 'all joints together'
      : motors === 'faulted'
        ? (fault ?? '')
        : since
          ? `since ${clock(since.atMs)}${since.by ? `, ${since.by}` : ''}`
          : '';
  return (
    <div
      className={`cell c-motors ${motors === 'moving' || motors === 'stopping' || motors === 'faulted' ? motors : ''}`}
    >
      <span className="k">Motors</span>
      <span className="v">
        <MotorsIcon state={motors} />
        {motors}
      </span>
      <span className="s">{reason}</span>
    </div>
  );
}

function TrustCell() {
  const trust = useArmState((state) => worstTrust(state?.trust ?? []));
  const note = useArmState((state) => state?.trustNote ?? '');
  return (
    <div className="cell c-trust">
      <span className="k">Position</span>
      <span className="v">
        <TrustIcon trust={trust} />
        {trust}
      </span>
      <span className="s" title={note}>
        {note}
      </span>
    </div>
  );
}

export function ceilingWord(fraction: number): string {
  return fraction === 0.05 ? 'creep' : fraction === 0.25 ? 'easy' : fraction === 1 ? 'full' : '';
}

function CeilingCell() {
  const ceiling = useArmState((state) => state?.ceiling ?? null);
  const fraction = ceiling?.fraction ?? 0.05;
  const reason =
    ceiling?.lowest === 'trust' && ceiling.trust < ceiling.person
      ? 'held down by trust'
      : ceiling?.toolSpeed == null
        ? 'people are clear'
        : `no point over ${Math.round(ceiling.toolSpeed * 1000)} mm/s`;
  return (
    <div className="cell c-ceil">
      <span className="k">Speed ceiling</span>
      <span className="v">
        <CeilingIcon fraction={fraction} />
        {ceilingWord(fraction)} <span className="n">{Math.round(fraction * 100)} %</span>
      </span>
      <span className="s">{reason}</span>
    </div>
  );
}

function MotorsOffCell({ model }: { model: ArmModel }) {
  const [open, setOpen] = useState(false);
  const role = useHello()?.you.role ?? 'observer';
  const energised = useArmState((state) => state?.energised.some(Boolean) ?? false);
  const moving = useArmState((state) => state?.motors === 'moving' || state?.motors === 'stopping');
  const drops = useArmState((state) => state?.wouldDrop ?? []);
  const off = !energised;
  const disabled = off || moving || !may(role, 'arm.control');
  return (
    <>
      <button
        type="button"
        className={`cut ${off ? 'off' : ''}`}
        disabled={disabled}
        onClick={() => setOpen(true)}
      >
        <MotorsOffIcon />
        <span className="w">
          <b>{off ? 'Motors are off' : 'Motors off…'}</b>
          <span>
            {off
              ? 'nothing holds the joints'
              : moving
                ? 'stop the arm first'
                : drops.length > 0
                  ? `${namesOf(model, drops)} would drop`
                  : 'nothing would drop'}
          </span>
        </span>
      </button>
      <MotorsOffDialog open={open && !off} onClose={() => setOpen(false)} model={model} drops={drops} />
    </>
  );
}
