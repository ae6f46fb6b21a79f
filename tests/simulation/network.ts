import type { Incoming } from '../../server/control/state';

/** A message takes one to this many ticks. */
const LONGEST_DELAY_TICKS = 4;

/** The way from one page to the arm: small delays, stalls that end in a burst, and now and then a swap. */
export class Wire {
  private queue: { dueTick: number; incoming: Incoming }[] = [];
  private stalledUntil = 0;
  private newestDue = 0;

  constructor(private readonly random: () => number) {}

  /** @param disorder - chance that it overtakes, or is overtaken by, what is under way */
  post(tick: number, incoming: Incoming, disorder = 0): void {
    const dueTick = tick + Math.floor(this.random() * LONGEST_DELAY_TICKS);
    if (this.random() < disorder) this.queue.push({ dueTick: dueTick + 8, incoming });
    else {
      this.newestDue = Math.max(this.newestDue, dueTick);
      this.queue.push({ dueTick: this.newestDue, incoming });
    }
  }

  /** Nothing arrives for a while; then everything at once. */
  stall(tick: number, ticks: number): void {
    this.stalledUntil = tick + ticks;
  }

  arrived(tick: number): Incoming[] {
    if (tick < this.stalledUntil || this.queue.length === 0) return [];
    const due = this.queue.filter((m) => m.dueTick <= tick);
    if (due.length > 0) this.queue = this.queue.filter((m) => m.dueTick > tick);
    return due.sort((a, b) => a.dueTick - b.dueTick).map((m) => m.incoming);
  }

  /** The socket is gone, and what was under way with it. */
  cut(): void {
    this.queue = [];
  }
}
