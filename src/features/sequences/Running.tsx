import { useEffect, useState } from 'react';
import { CEILINGS } from '../../../shared/arm/trust';
import type { RunState } from '../../../shared/live/server-messages';
import { may } from '../../../shared/team/roles';
import { GoButton } from '../../components/HoldButton';
import { PauseIcon, PlayIcon, StepIcon } from '../../components/icons';
import { Segmented } from '../../components/Segmented';
import { durationText } from '../../components/when';
import { onHoldRefused } from '../../live/hold';
import { useArmState, useHello, useInControl } from '../../live/use-live';
import { beep } from './beep';
import { sendRun } from './send-run';

/** A run under way: the hold that carries its first cycle, pause and resume, the live ceiling, how far it is. */
export function Running({ run }: { run: RunState }) {
  const role = useHello()?.you.role ?? 'observer';
  const inControl = useInControl() && may(role, 'sequence.run');
  const [refused, setRefused] = useState<string | null>(null);
  useEffect(() => onHoldRefused(setRefused), []);
  // biome-ignore lint/correctness/useExhaustiveDependencies: a refusal belongs to the phase it was given in
  useEffect(() => setRefused(null), [run.phase]);
  const { phase, countdownS } = run;
  useEffect(() => {
    if (phase === 'countdown' && countdownS > 0) beep(countdownS <= 1 ? 880 : 620);
  }, [phase, countdownS]);
  const mayPause = phase === 'running' || phase === 'countdown' || phase === 'stepWaiting';
  return (
    <section className="pane run" aria-label="Run under way">
      <MainButton run={run} inControl={inControl} />
      <button
        type="button"
        className="pause"
        disabled={!inControl || !mayPause}
        onClick={() => sendRun({ type: 'run.pause' })}
      >
        <PauseIcon /> Pause
      </button>
      <button
        type="button"
        className="btn tallbtn"
        disabled={!inControl}
        onClick={() => sendRun({ type: 'run.end' })}
      >
        End the run
      </button>
      <LiveCeiling inControl={inControl} />
      <Progress run={run} refused={refused} inControl={inControl} />
    </section>
  );
}

/** What carries the run on from where it is. */
function MainButton({ run, inControl }: { run: RunState; inControl: boolean }) {
  switch (run.phase) {
    case 'heldWaiting':
    case 'heldRunning':
      return (
        <GoButton
          id="run-held"
          motion={{ kind: 'run' }}
          hint="the first cycle is held; letting go stops it"
          disabled={!inControl}
        >
          Hold to run
        </GoButton>
      );
    case 'paused':
    case 'pausing':
      return (
        <button
          type="button"
          className={`go sm ${inControl && run.phase === 'paused' ? 'ink' : ''}`}
          disabled={!inControl || run.phase === 'pausing'}
          onClick={() => sendRun({ type: 'run.resume' })}
        >
          <PlayIcon />
          <span>
            Resume
            <small>{run.held ? 'then hold' : 'after 3 s'}</small>
          </span>
        </button>
      );
    case 'stepWaiting':
      return (
        <button
          type="button"
          className={`go sm ${inControl ? 'ink' : ''}`}
          disabled={!inControl}
          onClick={() => sendRun({ type: 'run.step' })}
        >
          <StepIcon />
          <span>
            Next step
            <small>{run.stepPath}, then wait</small>
          </span>
        </button>
      );
    case 'countdown':
    case 'running':
      return (
        <button type="button" className="go sm" disabled>
          <PlayIcon />
          <span>
            {run.phase === 'running' ? 'Running' : `Moves in ${Math.ceil(run.countdownS)} s`}
            <small>{run.phase === 'running' ? `step ${run.stepPath}` : 'keep clear'}</small>
          </span>
        </button>
      );
  }
}

/** A run keeps a live ceiling: lowered at any time, raised only while the arm stands. */
function LiveCeiling({ inControl }: { inControl: boolean }) {
  const person = useArmState((state) => state?.ceiling.person ?? CEILINGS.creep);
  const moving = useArmState((state) => state?.motors === 'moving' || state?.motors === 'stopping');
  return (
    <span className="field">
      <span className="lab">{moving ? 'Ceiling: only lower while moving' : 'Ceiling'}</span>
      <Segmented
        label="Ceiling"
        value={person}
        locked={!inControl}
        options={(['creep', 'easy', 'full'] as const).map((name) => ({
          value: CEILINGS[name] as number,
          label: name,
          locked: moving && CEILINGS[name] > person,
        }))}
        onChange={(fraction) => sendRun({ type: 'ceiling.set', fraction })}
      />
    </span>
  );
}

function Progress({
  run,
  refused,
  inControl,
}: {
  run: RunState;
  refused: string | null;
  inControl: boolean;
}) {
  const holder = useArmState((state) => state?.control?.name ?? null);
  const last = run.cycleTimes.at(-1);
  const why =
    refused ??
    run.reason ??
    (inControl ? null : holder ? `${holder} has control.` : 'Nobody has control.') ??
    (last === undefined ? null : `Last cycle ${durationText(last)}.`);
  return (
    <p className="sp small" role="status">
      <b>
        Cycle <span className="n">{run.cycles === null ? run.cycle : Math.min(run.cycle, run.cycles)}</span>
        {run.cycles === null ? (
          ', until stopped'
        ) : (
          <>
            {' '}
            of <span className="n">{run.cycles}</span>
          </>
        )}
        , step <span className="n">{run.stepPath}</span>
      </b>
      <br />
      <span className="quiet">{why}</span>
    </p>
  );
}
