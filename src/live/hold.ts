import { HOLD_KEEP_MS, type HoldMotion } from '../../shared/live/client-messages';
import { connection } from './connection';
import { latestTelemetry, useLiveStore } from './live-store';

/**
 * Hold-to-run: a motion that lasts only while a person keeps a control pressed. One hold at a time. It ends on
 * anything that could mean the hand is gone, never resumes, and needs a fresh press to move again. The arm
 * lets go by itself when the keep-alives stop, so no single event here has to be perfect.
 */
export type HoldEnd =
  | 'released'
  | 'pointer cancelled'
  | 'capture lost'
  | 'slid off'
  | 'second pointer'
  | 'context menu'
  | 'scroll'
  | 'window left'
  | 'page hidden'
  | 'another key'
  | 'page stalled'
  | 'link quiet'
  | 'connection lost'
  | 'control lost'
  | 'not possible'
  | 'page turned'
  | 'button gone'
  | 'stopped'
  | 'game controller';

export interface ActiveHold {
  /** Names the button, so that it can show itself as held. */
  key: string;
  holdId: string;
  seq: number;
  timer: number;
  lastBeatMs: number;
  accepted: boolean;
  turn: number;
}

/** A gap this long between two beats means that the page itself was stuck, ms. */
const STALL_MS = 150;
/** Without telemetry for this long the page is blind, ms. */
const QUIET_MS = 250;
/** The pointer may leave the button by this much, px. */
export const SLIDE_OFF_PX = 24;

let active: ActiveHold | null = null;
const watchers = new Set<() => void>();
const refusals = new Set<(message: string) => void>();
let lastEnd: HoldEnd | null = null;

export const activeHoldKey = (): string | null => active?.key ?? null;
export const lastHoldEnd = (): HoldEnd | null => lastEnd;

export function onHoldChange(listener: () => void): () => void {
  watchers.add(listener);
  return () => watchers.delete(listener);
}

/** Called with the words of a refused or interrupted hold, to be shown beside the buttons. */
export function onHoldRefused(listener: (message: string) => void): () => void {
  refusals.add(listener);
  return () => refusals.delete(listener);
}

function changed(): void {
  for (const watcher of watchers) watcher();
}

/** A fresh press. Returns false when nothing may start. */
export function beginHold(key: string, motion: HoldMotion): boolean {
  if (active || !connection.isOpen || document.hidden) return false;
  const holdId = crypto.randomUUID();
  const { state } = useLiveStore.getState();
  const hold: ActiveHold = {
    key,
    holdId,
    seq: 0,
    timer: 0,
    lastBeatMs: performance.now(),
    accepted: false,
    turn: state?.turn ?? 0,
  };
  active = hold;
  lastEnd = null;
  hold.timer = window.setInterval(() => beat(hold), HOLD_KEEP_MS);
  void connection
    .send({ type: 'hold.start', holdId, motion, seenT: latestTelemetry()?.t })
    .then((outcome) => {
      if (outcome.ok) {
        hold.accepted = true;
        if (active !== hold) connection.post({ type: 'hold.end', holdId });
        return;
      }
      if (active === hold) endHold('not possible');
      for (const tell of refusals) tell(outcome.message);
    });
  changed();
  return true;
}

/** Ends the hold, whatever the reason; harmless when there is none. */
export function endHold(why: HoldEnd): void {
  const hold = active;
  if (!hold) return;
  active = null;
  lastEnd = why;
  window.clearInterval(hold.timer);
  connection.post({ type: 'hold.end', holdId: hold.holdId });
  changed();
}

/** Every 50 ms while held: proves that a living page with a pressed control has seen recent telemetry. */
function beat(hold: ActiveHold): void {
  if (active !== hold) return;
  const nowMs = performance.now();
  const gapMs = nowMs - hold.lastBeatMs;
  hold.lastBeatMs = nowMs;
  const live = useLiveStore.getState();
  if (gapMs > STALL_MS) return endHold('page stalled');
  if (!connection.isOpen) return endHold('connection lost');
  if (nowMs - live.telemetryAtMs > QUIET_MS) return endHold('link quiet');
  if (document.hidden || !document.hasFocus()) return endHold('window left');
  const { state } = live;
  if (!state || state.turn !== hold.turn || state.control === null) return endHold('control lost');
  // The arm has ended it on its side: a limit, a fault, somebody's stop.
  if (hold.accepted && state.hold?.holdId !== hold.holdId && hold.seq > 5) return endHold('stopped');
  connection.post({
    type: 'hold.keep',
    holdId: hold.holdId,
    seq: hold.seq++,
    seenT: latestTelemetry()?.t ?? 0,
  });
}

/** Whatever happens anywhere on the page that could mean the hand is gone. Installed once. */
export function watchForLostHands(): () => void {
  const on = (target: EventTarget, type: string, listener: (event: Event) => void) => {
    target.addEventListener(type, listener, { capture: true, passive: true });
    return () => target.removeEventListener(type, listener, { capture: true });
  };
  let orientation: MediaQueryList | null = null;
  if (typeof matchMedia === 'function') orientation = matchMedia('(orientation: portrait)');
  const stops = [
    on(window, 'blur', () => endHold('window left')),
    on(document, 'visibilitychange', () => document.hidden && endHold('page hidden')),
    on(window, 'pagehide', () => endHold('page hidden')),
    on(document, 'freeze', () => endHold('page hidden')),
    on(window, 'scroll', () => endHold('scroll')),
    on(document, 'touchmove', (event) => {
      if ((event as TouchEvent).touches.length > 1) endHold('second pointer');
    }),
    on(window, 'resize', () => endHold('page turned')),
    on(document, 'fullscreenchange', () => endHold('page turned')),
    ...(orientation ? [on(orientation, 'change', () => endHold('page turned'))] : []),
  ];
  return () => {
    for (const stop of stops) stop();
  };
}
