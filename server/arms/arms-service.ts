import type { ChangedMessage, StateMessage, TelemetryMessage } from '../../shared/live/server-messages';

/** What the HTTP side may know of and ask from running arms. */
export interface ArmsService {
  /** Null while the arm's process does not run. */
  snapshot(armId: string): { state: StateMessage; telemetry: TelemetryMessage } | null;
  stop(armId: string, by: string): void;
  stopAll(by: string): void;
  /** Tells the pages that watch the arm to fetch something again. */
  changed(armId: string, what: ChangedMessage['what']): void;
  modelChanged(armId: string): void;
  removed(armId: string): void;
  settingsChanged(armId: string): void;
}
