import type { Resolved } from '../../server/control/process-messages';
import type { ProgramStep } from '../../shared/sequence/program';

/** A program as the web side would hand it to the arm process. */
export function programOf(steps: ProgramStep[], proven = true, runId = 'run-1'): Resolved {
  return {
    program: {
      runId,
      sequenceId: 'seq-1',
      sequenceName: 'Vials to scale',
      version: 3,
      steps,
      proven,
      fingerprint: 'print-1',
    },
  };
}

export function goTo(stepId: string, q: number[], speed = 1, settle = 0): ProgramStep {
  return {
    kind: 'goTo',
    stepId,
    path: stepId,
    q,
    straight: false,
    blend: 0,
    speed,
    settle,
    label: `pose ${stepId}`,
  };
}

export function wait(stepId: string, seconds: number): ProgramStep {
  return { kind: 'wait', stepId, path: stepId, seconds };
}

export function grip(stepId: string, opening: number): ProgramStep {
  return { kind: 'grip', stepId, path: stepId, opening };
}
