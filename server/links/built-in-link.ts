import type { DriveTruth } from '../../firmware-sim/drive-truth';
import { VirtualBoard } from '../../firmware-sim/virtual-board';
import { seededRandom } from '../../shared/kinematics';
import type { ArmLink, ArmLinkOptions, BoardOrder, BoardSample, Setpoint } from '../control/arm-link';

export interface BuiltInOptions extends ArmLinkOptions {
  /** Per joint, how the simulated arm differs from its model. */
  truths?: readonly DriveTruth[];
  /** Length of a control tick: the one set-point that is buffered, s. */
  tickS: number;
}

/** The built-in arm: a virtual board in the same process, living through the controller's own ticks. */
export class BuiltInLink implements ArmLink {
  readonly kind = 'builtIn';
  readonly board: VirtualBoard;
  private sample: BoardSample;
  private readonly listeners = new Set<(reason: string) => void>();

  constructor(private readonly options: BuiltInOptions) {
    const { model, seed, truths } = options;
    this.board = new VirtualBoard({ model, random: seededRandom(seed), truths });
    this.sample = this.board.sample();
  }

  lead(): number {
    return this.options.tickS;
  }

  answerMs(): number {
    return this.options.tickS * 1000;
  }

  latestSample(): BoardSample {
    return this.sample;
  }

  send({ q, gripper }: Setpoint): void {
    this.board.setpoint(Array.from(q), gripper);
  }

  /** Only one set-point is ever buffered, so the newest replaces it anyway. */
  replaceFrom(setpoint: Setpoint): void {
    this.send(setpoint);
  }

  order(order: BoardOrder): void {
    switch (order.kind) {
      case 'energise':
        return this.board.energise(order.joint, order.assumed);
      case 'energiseGripper':
        return this.board.energiseGripper(order.assumed);
      case 'motorsOff':
        return this.board.motorsOff();
      case 'declare':
        return this.board.declare(order.joint, order.q);
      case 'watchSwitch':
        return this.board.watchSwitch(order.joint);
      case 'clear':
        return this.board.clear();
    }
  }

  stop(): void {
    this.board.stop();
  }

  advance(dt: number): void {
    this.board.advance(dt);
    this.sample = this.board.sample();
  }

  onClosed(listener: (reason: string) => void): () => void {
    this.listeners.add(listener);
    return () => this.listeners.delete(listener);
  }

  close(): void {
    for (const listener of this.listeners) listener('closed');
    this.listeners.clear();
  }
}
