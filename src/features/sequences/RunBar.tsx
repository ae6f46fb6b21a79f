import { useEffect, useState } from 'react';
import type { Sequence } from '../../../shared/api/resources';
import { CEILINGS } from '../../../shared/arm/trust';
import { may } from '../../../shared/team/roles';
import { GoButton } from '../../components/HoldButton';
import { PauseIcon, PlayIcon, StepIcon } from '../../components/icons';
import { Segmented } from '../../components/Segmented';
import { durationText } from '../../components/when';
import { type Command, readyStop, sendCommand } from '../../live/connection';
import { onHoldRefused } from '../../live/hold';
import { useArmState, useHello, useInControl } from '../../live/use-live';
import { toast } from '../shell/toast';
import { beep } from './beep';

/** Run, one step, from here; pause, resume, end; the held first cycle. */
export function RunBar({
  sequence,
  dirty,
  fromStep,
}: {
  sequence: Sequence;
  dirty: boolean;
  fromStep: string | null;
}) {
  const [cycles, setCycles] = useState(1);
  const [endless, setEndless] = useState(false);
  const run = useArmState((state) => state?.run ?? null);
  const ceiling = useArmState((state) => state?.ceiling.person ?? CEILINGS.creep);
  const known = useArmState((state) =>
    (state?.trust ?? []).every((t) => t === 'declared' || t === 'referenced'),
  );
  const energised = useArmState((state) => state?.energised.some(Boolean) ?? false);
  const fault = useArmState((state) => state?.fault !== null && state !== null);
  const inControl = useInControl();
  const role = useHello()?.you.role ?? 'observer';
  useEffect(() => onHoldRefused(toast), []);
  const send = (command: Command) => {
    readyStop();
    void sendCommand(command).then((outcome) => {
      if (!outcome.ok) toast(outcome.message);
    });
  };

  if (run && run.sequenceId === sequence.id)
    return <Running inControl={inControl} send={send} ceiling={ceiling} />;
  const approved = sequence.approval?.holds && sequence.approvedVersion === sequence.shownVersion;
  const reason = run
    ? `${run.sequenceName} is running`
    : !may(role, 'sequence.run')
      ? 'operators run sequences'
      : !may(role, 'sequence.runUnapproved') && !approved
        ? 'this version is not approved for operators'
        : dirty
          ? 'save your edits first'
          : !energised
            ? 'energise on Move first'
            : !inControl
              ? 'take control first'
              : fault
                ? 'acknowledge the fault first'
                : !known
                  ? 'declare or reference the position first'
                  : null;
  const start = (extra: { single?: boolean; fromStep?: string }) =>
    send({
      type: 'run.start',
      sequenceId: sequence.id,
      version: sequence.shownVersion,
      cycles: endless ? null : cycles,
      ...extra,
    });
  return (
    <section className="pane run" aria-label="Run">
      <button type="button" className="go sm ink" disabled={reason !== null} onClick={() => start({})}>
        <PlayIcon />
        <span>
          Run
          <small>{sequence.proven ? 'after 3 s' : 'first cycle held'}</small>
        </span>
      </button>
      <button
        type="button"
        className="go sm"
        disabled={reason !== null}
        onClick={() => start({ single: true })}
      >
        <StepIcon />
        <span>
          Run one step
          <small>then wait</small>
        </span>
      </button>
      <button
        type="button"
        className="go sm"
        disabled={reason !== null || fromStep === null}
        onClick={() => fromStep && start({ fromStep })}
      >
        <PlayIcon />
        <span>
          Run from here
          <small>{fromStep ? 'the chosen step' : 'choose a step'}</small>
        </span>
      </button>
      <div className="entry" style={{ width: 178 }}>
        <button
          type="button"
          className="step"
          aria-label="Fewer cycles"
          disabled={endless}
          onClick={() => setCycles(Math.max(1, cycles - 1))}
        >
          −
        </button>
        <input
          aria-label="Cycles"
          inputMode="numeric"
          value={endless ? '∞' : cycles}
          disabled={endless}
          onChange={(event) =>
            setCycles(Math.min(100_000, Math.max(1, Math.round(Number(event.target.value)) || 1)))
          }
        />
        <button
          type="button"
          className="step"
          aria-label="More cycles"
          disabled={endless}
          onClick={() => setCycles(cycles + 1)}
        >
          +
        </button>
      </div>
      <label className="lk">
        <input type="checkbox" checked={endless} onChange={(event) => setEndless(event.target.checked)} />
        until stopped
      </label>
      <p className="sp small quiet">
        {reason ? (
          <b>{reason}</b>
        ) : sequence.proven ? (
          'Ready.'
        ) : (
          'Ready. The first cycle of this version is held at creep or easy.'
        )}{' '}
        <br />
        If the link drops while it runs, the arm stops and stands.
      </p>
    </section>
  );
}

function Running({
  inControl,
  send,
  ceiling,
}: {
  inControl: boolean;
  send: (command: Command) => void;
  ceiling: number;
}) {
  const run = useArmState((state) => state?.run ?? null);
  const phase = run?.phase;
  const count = run?.countdownS ?? 0;
  useEffect(() => {
    if (phase === 'countdown' && count > 0) beep(count === 1 ? 880 : 620);
  }, [phase, count]);
  if (!run) return null;
  const last = run.cycleTimes.at(-1);
  return (
    <section className="pane run" aria-label="Run under way">
      {run.phase === 'heldWaiting' || run.phase === 'heldRunning' ? (
        <GoButton
          id="run-held"
          motion={{ kind: 'run' }}
          hint="the first cycle is held; letting go pauses"
          disabled={!inControl}
        >
          Hold to run
        </GoButton>
      ) : run.phase === 'paused' ? (
        <button
          type="button"
          className="go sm ink"
          disabled={!inControl}
          onClick={() => send({ type: 'run.resume' })}
        >
          <PlayIcon />
          <span>
            Resume
            <small>after 3 s</small>
          </span>
        </button>
      ) : run.phase === 'stepWaiting' ? (
        <button
          type="button"
          className="go sm ink"
          disabled={!inControl}
          onClick={() => send({ type: 'run.step' })}
        >
          <StepIcon />
          <span>
            Next step
            <small>{run.stepPath}, then wait</small>
          </span>
        </button>
      ) : (
        <button
          type="button"
          className="pause"
          disabled={!inControl || run.phase === 'pausing'}
          onClick={() => send({ type: 'run.pause' })}
        >
          <PauseIcon /> Pause
        </button>
      )}
      <button type="button" className="btn" disabled={!inControl} onClick={() => send({ type: 'run.end' })}>
        End the run
      </button>
      <Segmented
        label="Ceiling, live"
        value={ceiling}
        locked={!inControl}
        options={[
          { value: CEILINGS.creep as number, label: 'creep' },
          { value: CEILINGS.easy as number, label: 'easy' },
          { value: CEILINGS.full as number, label: 'full' },
        ]}
        onChange={(fraction) => send({ type: 'ceiling.set', fraction })}
      />
      <p className="sp small" role="status">
        <b>
          {run.phase === 'countdown' ? (
            <>
              Moves in <span className="n">{run.countdownS}</span>
            </>
          ) : (
            <>
              Cycle <span className="n">{Math.min(run.cycle, run.cycles ?? run.cycle)}</span>
              {run.cycles ? (
                <>
                  {' '}
                  of <span className="n">{run.cycles}</span>
                </>
              ) : null}
              , step <span className="n">{run.stepPath}</span>
            </>
          )}
        </b>
        <br />
        <span className="quiet">{run.reason ?? (last ? `last cycle ${durationText(last)}` : '')}</span>
      </p>
    </section>
  );
}
