import { heron } from '../../shared/arm/demo/heron';
import type { ClientMessage } from '../../shared/live/client-messages';
import { actor, Rig } from './rig';

export const ada = actor('Ada', 'owner');
export const moss = actor('Moss', 'builder');
export const ines = actor('Ines', 'teacher');
export const juno = actor('Juno', 'operator');

export const deg = (d: number): number => (d * Math.PI) / 180;
/** In the middle of Heron's range, with room on both sides of every joint. */
export const MIDDLE = [0, deg(60), deg(-80), deg(-40)];

export type Motion = Extract<ClientMessage, { type: 'hold.start' }>['motion'];
export const jog = (axis: number, direction: 1 | -1 = 1): Motion => ({
  kind: 'jog',
  frame: 'joint',
  axis,
  direction,
});

/** Heron energised by Juno, its position still unknown. */
export function energisedRig(options: ConstructorParameters<typeof Rig>[1] = {}): Rig {
  const rig = new Rig(heron, options);
  rig.energise(juno);
  return rig;
}

/** Heron energised and declared where it really stands, Juno in control. */
export function readyRig(options: ConstructorParameters<typeof Rig>[1] = {}): Rig {
  const rig = energisedRig(options);
  rig.declare(juno);
  return rig;
}

/** As `readyRig`, brought to the middle of its range at the easy ceiling. */
export function middleRig(options: ConstructorParameters<typeof Rig>[1] = {}): Rig {
  const rig = readyRig(options);
  setCeiling(rig, 0.25);
  hold(rig, { kind: 'joints', q: MIDDLE });
  rig.settle(60);
  return rig;
}

export function setCeiling(rig: Rig, fraction: number, peopleClear?: boolean) {
  return rig.send(juno, { type: 'ceiling.set', turn: rig.state.turn, fraction, peopleClear });
}

/** Presses and keeps a hold until the arm stands of itself, at most a minute. */
export function hold(rig: Rig, motion: Motion, who = juno, resolved = {}): void {
  const refused = press(rig, motion, 'long', who, resolved);
  if (refused) throw new Error(refused.message);
  for (let seq = 0; seq < 1200; seq++) {
    keep(rig, 'long', seq, who);
    rig.tick(5);
    if (rig.state.hold === null) return;
  }
  throw new Error('the hold never ended');
}

/** Starts a hold and leaves it to the caller to keep. */
export function press(rig: Rig, motion: Motion, holdId = 'h', who = juno, resolved = {}) {
  return rig.send(who, { type: 'hold.start', turn: rig.state.turn, holdId, motion }, resolved);
}

export function keep(rig: Rig, holdId: string, seq: number, who = juno, seenT = rig.nowS): void {
  rig.queue({
    kind: 'command',
    actor: who,
    message: { type: 'hold.keep', holdId, seq, seenT },
    resolved: {},
  });
}

/** Keeps a hold alive for some ticks. */
export function keepFor(rig: Rig, holdId: string, ticks: number, fromSeq = 0, who = juno): void {
  for (let k = 0; k < ticks; k++) {
    if (k % 5 === 0) keep(rig, holdId, fromSeq + k, who);
    rig.tick();
  }
}

export function letGo(rig: Rig, holdId = 'h', who = juno): void {
  rig.send(who, { type: 'hold.end', holdId });
}

export const isStill = (rig: Rig): boolean => !['moving', 'stopping'].includes(rig.state.motors);

/** How far the arm is from `q`, the largest joint difference; rad or m. */
export function offBy(rig: Rig, q: readonly number[]): number {
  return Math.max(...rig.telemetry.q.map((value, i) => Math.abs(value - q[i]!)));
}
