import type { z } from 'zod';
import type { ArmsService } from '../../server/arms/arms-service';
import type { ArmModel } from '../../shared/arm/model';
import type { Trust } from '../../shared/arm/trust';
import type { MotorsState, StateMessage, TelemetryMessage } from '../../shared/live/server-messages';

/** Stands in for running arms: says what a test wants, and remembers what it was told. */
export class FakeArms implements ArmsService {
  readonly told: string[] = [];
  private readonly snapshots = new Map<string, { state: StateMessage; telemetry: TelemetryMessage }>();

  /** From now on this arm says that it is so. */
  says(
    armId: string,
    model: ArmModel,
    at: { motors: z.infer<typeof MotorsState>; trust: Trust[]; q: number[]; opening?: number },
  ): void {
    this.snapshots.set(armId, { state: stateOf(model, at), telemetry: telemetryOf(at.q) });
  }

  snapshot(armId: string) {
    return this.snapshots.get(armId) ?? null;
  }
  stop(armId: string, by: string): void {
    this.told.push(`stop ${armId} by ${by}`);
  }
  stopAll(by: string): void {
    this.told.push(`stop all by ${by}`);
  }
  changed(armId: string, what: string): void {
    this.told.push(`changed ${armId} ${what}`);
  }
  modelChanged(armId: string): void {
    this.told.push(`model changed ${armId}`);
  }
  removed(armId: string): void {
    this.told.push(`removed ${armId}`);
  }
  settingsChanged(armId: string): void {
    this.told.push(`settings changed ${armId}`);
  }
}

function stateOf(
  model: ArmModel,
  { motors, trust, opening = 1 }: { motors: z.infer<typeof MotorsState>; trust: Trust[]; opening?: number },
): StateMessage {
  return {
    type: 'state',
    t: 0,
    link: { kind: 'builtIn', state: 'steady', answerMs: 1 },
    motors,
    motorsSinceMs: 0,
    motorsBy: null,
    energised: model.joints.map(() => motors !== 'resting'),
    trust,
    trustNote: '',
    trustSinceMs: 0,
    ceiling: {
      fraction: 0.05,
      person: 0.05,
      trust: 1,
      firstPower: 1,
      lowest: 'person',
      peopleClear: false,
      toolSpeed: 0.05,
    },
    turn: 1,
    control: null,
    fault: null,
    stop: null,
    hold: null,
    run: null,
    wouldDrop: [],
    gripper: model.gripper ? { opening, target: opening, energised: true, moving: false } : null,
    inputs: [],
    outputs: [],
  };
}

function telemetryOf(q: number[]): TelemetryMessage {
  return {
    type: 'telemetry',
    t: 0,
    q,
    qd: q.map(() => 0),
    stopAt: q,
    torqueUsed: q.map(() => null),
    tool: { position: [0, 0, 0], rotation: [1, 0, 0, 0, 1, 0, 0, 0, 1] },
  };
}
