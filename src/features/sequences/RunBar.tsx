import { useState } from 'react';
import { Link } from 'react-router-dom';
import type { Sequence } from '../../../shared/api/resources';
import type { Step } from '../../../shared/sequence/steps';
import { may } from '../../../shared/team/roles';
import { PauseIcon, PlayIcon, StepIcon } from '../../components/icons';
import { useLiveStore } from '../../live/live-store';
import { useArmState, useConnection, useHello, useInControl } from '../../live/use-live';
import { Running } from './Running';
import { sendRun } from './send-run';
import type { StepRow } from './step-tree';

const MOST_CYCLES = 100_000;

/** The first step that does something: a remark does nothing, a repeat begins with what it holds. */
export function firstDoing(step: Step): Step | null {
  if (step.kind === 'remark') return null;
  if (step.kind !== 'again') return step;
  for (const inner of step.steps) {
    const doing = firstDoing(inner);
    if (doing) return doing;
  }
  return null;
}

/** Why a run cannot start, in words that say what to do; null when it can. */
function useReason(sequence: Sequence, dirty: boolean): string | null {
  const connection = useConnection();
  const role = useHello()?.you.role ?? 'observer';
  const inControl = useInControl();
  const resting = useArmState((state) => state === null || !state.energised.every(Boolean));
  const fault = useArmState((state) => state !== null && state.fault !== null);
  const known = useArmState((state) =>
    (state?.trust ?? []).every((trust) => trust === 'declared' || trust === 'referenced'),
  );
  const approved = sequence.approvedVersion === sequence.shownVersion && (sequence.approval?.holds ?? false);
  if (!may(role, 'sequence.run')) return 'Operators run sequences; you are watching.';
  if (!may(role, 'sequence.runUnapproved') && !approved)
    return `Version ${sequence.shownVersion} is not approved for operators. Ask a teacher.`;
  if (dirty) return 'Save your changes first.';
  if (sequence.steps.length === 0) return 'There is no step to run yet.';
  if (connection !== 'live') return 'No connection to the arm.';
  if (resting) return 'The motors are resting. Energise on Move.';
  if (fault) return 'A fault waits to be acknowledged on Move.';
  if (!inControl) return 'Take control first.';
  if (!known) return 'The position is not known. Declare or reference it on Move.';
  return null;
}

/** Run, one step, from here; while it runs: hold, pause, resume, end. */
export function RunBar({
  sequence,
  dirty,
  from,
}: {
  sequence: Sequence;
  dirty: boolean;
  /** The step in hand. */
  from: StepRow | null;
}) {
  const run = useArmState((state) => state?.run ?? null);
  const armId = useLiveStore((live) => live.armId);
  if (run && run.sequenceId === sequence.id) return <Running run={run} />;
  if (run)
    return (
      <section className="pane run" aria-label="Run">
        <p className="small">
          <b>{run.sequenceName}</b> is {run.phase === 'paused' ? 'paused' : 'running'}: cycle{' '}
          <span className="n">{run.cycle}</span>, step <span className="n">{run.stepPath}</span>.
        </p>
        <Link className="btn" to={`/arms/${armId}/sequences/${run.sequenceId}`}>
          Show it
        </Link>
      </section>
    );
  return <Ready sequence={sequence} dirty={dirty} from={from} />;
}

function Ready({ sequence, dirty, from }: { sequence: Sequence; dirty: boolean; from: StepRow | null }) {
  const [cycles, setCycles] = useState(1);
  const [endless, setEndless] = useState(false);
  const reason = useReason(sequence, dirty);
  const arm = useHello()?.arm.model.name ?? 'The arm';
  const doing = from ? firstDoing(from.step) : null;
  const start = (extra: { single?: boolean; fromStep?: string }) =>
    sendRun({
      type: 'run.start',
      sequenceId: sequence.id,
      version: sequence.shownVersion,
      cycles: endless ? null : cycles,
      ...extra,
    });
  const off = reason !== null;
  return (
    <section className="pane run" aria-label="Run">
      <button type="button" className={`go sm ${off ? '' : 'ink'}`} disabled={off} onClick={() => start({})}>
        <PlayIcon />
        <span>
          Run
          <small>{sequence.proven ? 'from step 1, after 3 s' : 'first cycle held'}</small>
        </span>
      </button>
      <button
        type="button"
        className="go sm"
        disabled={off}
        onClick={() => start({ single: true, fromStep: doing?.id })}
      >
        <StepIcon />
        <span>
          Run one step
          <small>{from && doing ? `${from.path}, then wait` : 'then wait'}</small>
        </span>
      </button>
      <button
        type="button"
        className="go sm"
        disabled={off || !doing}
        onClick={() => doing && start({ fromStep: doing.id })}
      >
        <PlayIcon />
        <span>
          Run from here
          <small>{from && doing ? `step ${from.path}` : 'choose a step'}</small>
        </span>
      </button>
      <button type="button" className="pause" disabled>
        <PauseIcon /> Pause
      </button>
      <Cycles cycles={cycles} setCycles={setCycles} endless={endless} setEndless={setEndless} />
      <p className="sp small quiet" role="status">
        {reason ? (
          <b>{reason}</b>
        ) : sequence.proven ? (
          'Ready.'
        ) : (
          <b>The first cycle of this version is held: keep the button pressed, at most easy.</b>
        )}
        <br />
        If the link drops while running, {arm} stops and stands where it is.
      </p>
    </section>
  );
}

function Cycles({
  cycles,
  setCycles,
  endless,
  setEndless,
}: {
  cycles: number;
  setCycles: (cycles: number) => void;
  endless: boolean;
  setEndless: (endless: boolean) => void;
}) {
  const set = (wanted: number) => setCycles(Math.min(MOST_CYCLES, Math.max(1, Math.round(wanted) || 1)));
  return (
    <div className="cycles" role="group" aria-label="How often">
      <div className={`entry ${endless ? 'locked' : ''}`}>
        <button
          type="button"
          className="step"
          aria-label="Fewer cycles"
          disabled={endless || cycles <= 1}
          onClick={() => set(cycles - 1)}
        >
          −
        </button>
        <input
          aria-label="Cycles"
          inputMode="numeric"
          value={endless ? '–' : cycles}
          disabled={endless}
          onChange={(event) => set(Number(event.target.value))}
        />
        <span className="word">{cycles === 1 ? 'cycle' : 'cycles'}</span>
        <button
          type="button"
          className="step"
          aria-label="More cycles"
          disabled={endless}
          onClick={() => set(cycles + 1)}
        >
          +
        </button>
      </div>
      <label className="lk">
        <input type="checkbox" checked={endless} onChange={(event) => setEndless(event.target.checked)} />
        until stopped
      </label>
    </div>
  );
}
