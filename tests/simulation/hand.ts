import type { Actor } from '../../server/control/process-messages';
import { HOLD_KEEP_MS } from '../../shared/live/client-messages';
import { TICK_S } from '../support/rig';
import type { Wire } from './network';

const KEEP_TICKS = HOLD_KEEP_MS / 1000 / TICK_S;
/** Telemetry is at most this old when a page answers it, s. */
const TELEMETRY_AGE_S = 0.04;

/** How a hold goes wrong, with its chance. */
const WAYS = [
  ['good', 0.55],
  /** Keeps end early, the page's word that it ended comes much later. */
  ['silent', 0.1],
  /** The network stands still, then brings everything at once. */
  ['stalled', 0.1],
  /** The page froze: its keeps have seen only old telemetry. */
  ['frozen', 0.07],
  /** Keeps overtake each other. */
  ['jumbled', 0.1],
  /** Keeps at uneven times, some just too late. */
  ['gappy', 0.08],
] as const;
type Way = (typeof WAYS)[number][0];

interface Press {
  startId: string;
  holdId: string;
  way: Way;
  endTick: number;
  /** When it begins to go wrong. */
  turningTick: number;
  nextKeepTick: number;
  seq: number;
  frozenT: number | null;
}

/** A finger on a hold button, and the page that keeps the hold alive. */
export class Hand {
  private press_: Press | null = null;

  constructor(
    private readonly wire: Wire,
    private readonly random: () => number,
  ) {}

  get busy(): boolean {
    return this.press_ !== null;
  }

  get holdId(): string | null {
    return this.press_?.holdId ?? null;
  }

  press(startId: string, holdId: string, tick: number, seconds: number, steady: boolean): void {
    const length = Math.ceil(seconds / TICK_S);
    this.press_ = {
      startId,
      holdId,
      way: steady ? 'good' : this.pickWay(),
      endTick: tick + length,
      turningTick: tick + Math.floor(this.random() * length),
      nextKeepTick: tick + KEEP_TICKS,
      seq: 0,
      frozenT: null,
    };
  }

  refused(id: string): void {
    if (this.press_?.startId === id) this.press_ = null;
  }

  drop(): void {
    this.press_ = null;
  }

  keep(tick: number, nowS: number, actor: Actor): void {
    const press = this.press_;
    if (!press) return;
    const { holdId, way } = press;
    const wrong = tick >= press.turningTick;
    if (tick >= press.endTick + (way === 'silent' ? 100 : 0)) {
      this.press_ = null;
      if (way !== 'silent' || this.random() < 0.5)
        this.wire.post(tick, {
          kind: 'command',
          actor,
          message: { type: 'hold.end', holdId },
          resolved: {},
        });
      return;
    }
    if (way === 'stalled' && tick === press.turningTick)
      this.wire.stall(tick, 10 + Math.floor(this.random() * 110));
    if (way === 'frozen' && wrong) press.frozenT ??= nowS;
    if (tick < press.nextKeepTick || (way === 'silent' && wrong)) return;
    press.nextKeepTick = tick + (way === 'gappy' ? 1 + Math.floor(this.random() * 28) : KEEP_TICKS);
    const seenT = press.frozenT ?? nowS - this.random() * TELEMETRY_AGE_S;
    const message = { type: 'hold.keep', holdId, seq: press.seq++, seenT } as const;
    this.wire.post(
      tick,
      { kind: 'command', actor, message, resolved: {} },
      way === 'jumbled' && wrong ? 0.5 : 0,
    );
  }

  private pickWay(): Way {
    let left = this.random();
    for (const [way, chance] of WAYS) {
      left -= chance;
      if (left < 0) return way;
    }
    return 'good';
  }
}
