import type { ArmModel } from '../../shared/arm/model';
import type { Program, ProgramStep } from '../../shared/sequence/program';

/** A short program of places near by, waits and, where there is one, the gripper. */
export function randomProgram(
  model: ArmModel,
  random: () => number,
  id: string,
  somewhere: () => number[],
): Program {
  const steps = Array.from({ length: 1 + Math.floor(random() * 6) }, (_, i): ProgramStep => {
    const base = { stepId: `${id}-${i}`, path: `${i + 1}` };
    const kind = random();
    if (kind < 0.15) return { kind: 'wait', ...base, seconds: 2 * random() };
    if (kind < 0.3 && model.gripper) return { kind: 'grip', ...base, opening: random() };
    const speed = Math.max(0.01, random() < 0.5 ? 1 : random());
    const settle = random() < 0.5 ? 0 : 0.3 * random();
    return {
      kind: 'goTo',
      ...base,
      q: somewhere(),
      straight: random() < 0.4,
      blend: random() < 0.3 ? 0.05 * random() : 0,
      speed,
      settle,
      label: 'Somewhere',
    };
  });
  return {
    runId: `run-${id}`,
    sequenceId: `sequence-${id}`,
    sequenceName: 'Somewhere and back',
    version: 1,
    steps,
    proven: random() < 0.6,
    fingerprint: id,
  };
}
