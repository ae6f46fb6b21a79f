import { create } from 'zustand';
import type {
  EventMessage,
  HelloMessage,
  StateMessage,
  TelemetryMessage,
} from '../../shared/live/server-messages';

/** What the page knows of its arm. A stale arm is shown as stale, never as live. */
export type Connection = 'connecting' | 'live' | 'lost';
/** ready → sent → acknowledged; noAnswer asks for the supply switch. */
export type StopState = 'ready' | 'sent' | 'acknowledged' | 'noAnswer';

interface LiveStore {
  armId: string | null;
  connection: Connection;
  hello: HelloMessage | null;
  state: StateMessage | null;
  /** Newest first. */
  events: EventMessage[];
  stop: StopState;
  /** Page time (performance.now) of the newest telemetry. */
  telemetryAtMs: number;
}

export const emptyLive = {
  connection: 'connecting' as Connection,
  hello: null,
  state: null,
  events: [],
  stop: 'ready' as StopState,
  telemetryAtMs: 0,
};

export const useLiveStore = create<LiveStore>(() => ({ armId: null, ...emptyLive }));

/** The newest sample lives outside React: it changes 50 times a second. */
let newest: TelemetryMessage | null = null;
const listeners = new Set<(telemetry: TelemetryMessage) => void>();

export function latestTelemetry(): TelemetryMessage | null {
  return newest;
}

export function setTelemetry(telemetry: TelemetryMessage | null): void {
  newest = telemetry;
  if (telemetry) for (const listener of listeners) listener(telemetry);
}

/** Calls back on every sample; returns the unsubscribe function. */
export function onTelemetry(listener: (telemetry: TelemetryMessage) => void): () => void {
  listeners.add(listener);
  return () => listeners.delete(listener);
}
