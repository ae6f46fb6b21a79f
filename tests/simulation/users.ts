import type { Actor } from '../../server/control/process-messages';
import type { Incoming, Outputs } from '../../server/control/state';
import type { ArmModel } from '../../shared/arm/model';
import type { StateMessage } from '../../shared/live/server-messages';
import { TICK_S } from '../support/rig';
import { User } from './user';

/** What everybody can see when a tick begins. */
export interface View {
  nowS: number;
  page: StateMessage;
  q: readonly number[];
  /** Where the joints really are: what a person standing beside the arm sees. */
  truth: readonly number[];
}

const PEOPLE = [
  { name: 'Juno', role: 'operator' },
  { name: 'Ada', role: 'owner' },
  { name: 'Moss', role: 'operator' },
  { name: 'Otis', role: 'observer' },
] as const;
/** The stop of the whole workshop, and the owner's setting, per second. */
const WORKSHOP_STOPS_PER_S = 1 / 300;
const SETTINGS_PER_S = 1 / 400;
/** A careful person is left in peace at first: this long at most, s. */
const PEACE_S = 240;

/** The people around one arm, who do not wait for each other. */
export class Users {
  private readonly users: User[];
  /** Whether the first person references every joint before anybody interferes. */
  private readonly peaceful: boolean;
  private quarrel = false;

  constructor(
    model: ArmModel,
    private readonly random: () => number,
  ) {
    this.peaceful = random() < 0.5;
    this.users = PEOPLE.map(({ name, role }) => new User(model, name, role, random, () => this.others()));
  }

  step(tick: number, view: View): Incoming[] {
    const settled = view.page.trust.every((t) => t === 'referenced') || tick * TICK_S > PEACE_S;
    this.quarrel ||= !this.peaceful || settled;
    const arrived: Incoming[] = [];
    for (const [i, user] of this.users.entries()) {
      if (i === 0 || this.quarrel) user.live(tick, view, { careful: this.peaceful, exposed: this.quarrel });
      arrived.push(...user.wire.arrived(tick));
    }
    if (this.quarrel && this.random() < WORKSHOP_STOPS_PER_S * TICK_S)
      arrived.push({ kind: 'stop', by: 'The workshop' });
    if (this.random() < SETTINGS_PER_S * TICK_S)
      arrived.push({ kind: 'settings', unattended: this.random() < 0.3 });
    return arrived;
  }

  hear(answers: Outputs['answers']): void {
    for (const user of this.users) user.hear(answers);
  }

  private others(): Actor[] {
    return this.users.filter((u) => u.role !== 'observer').map((u) => u.actor);
  }
}
