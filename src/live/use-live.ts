import { useQueryClient } from '@tanstack/react-query';
import { useEffect, useRef, useState } from 'react';
import { useShallow } from 'zustand/react/shallow';
import type { StateMessage, TelemetryMessage } from '../../shared/live/server-messages';
import { connection, pressStop } from './connection';
import { endHold, watchForLostHands } from './hold';
import { latestTelemetry, onTelemetry, useLiveStore } from './live-store';

/** Opens the arm's socket while mounted; what changes at rest is fetched again when the server says so. */
export function useArmLive(armId: string): void {
  const queries = useQueryClient();
  useEffect(() => {
    connection.open(armId);
    const stops = [
      watchForLostHands(),
      connection.onChanged((what) => {
        const queryKey = what === 'arm' ? ['arms'] : ['arms', armId, what];
        void queries.invalidateQueries({ queryKey });
      }),
    ];
    return () => {
      endHold('page turned');
      for (const stop of stops) stop();
      connection.close();
    };
  }, [armId, queries]);
}

/** Esc is Stop, everywhere, and nothing else. */
export function useEscapeStops(stop: () => void = pressStop): void {
  useEffect(() => {
    const onKey = (event: KeyboardEvent) => {
      if (event.key !== 'Escape') return;
      // Nothing else may hear it: it closes no dialog and leaves no field.
      event.preventDefault();
      event.stopImmediatePropagation();
      if (event.repeat) return;
      endHold('stopped');
      stop();
    };
    window.addEventListener('keydown', onKey, true);
    return () => window.removeEventListener('keydown', onKey, true);
  }, [stop]);
}

export function useArmState<T>(select: (state: StateMessage | null) => T): T {
  return useLiveStore(useShallow((live) => select(live.state)));
}

export const useConnection = () => useLiveStore((live) => live.connection);
export const useHello = () => useLiveStore((live) => live.hello);
export const useStopState = () => useLiveStore((live) => live.stop);

/** A value of the newest telemetry, at most `hz` times a second: readouts, not animations. */
export function useTelemetry<T>(select: (telemetry: TelemetryMessage | null) => T, hz = 10): T {
  const chosen = useRef(select);
  chosen.current = select;
  const [value, setValue] = useState(() => select(latestTelemetry()));
  useEffect(() => {
    let last = '';
    let atMs = 0;
    const look = (telemetry: TelemetryMessage | null) => {
      const next = chosen.current(telemetry);
      const text = JSON.stringify(next) ?? '';
      if (text === last) return;
      last = text;
      setValue(() => next);
    };
    const stop = onTelemetry((telemetry) => {
      const nowMs = performance.now();
      if (nowMs - atMs < 1000 / hz) return;
      atMs = nowMs;
      look(telemetry);
    });
    // The last sample before silence must not be lost to the rate.
    const trailing = window.setInterval(() => look(latestTelemetry()), 1000 / hz);
    return () => {
      stop();
      window.clearInterval(trailing);
    };
  }, [hz]);
  return value;
}

/** Whether this page's session holds control; by user, since the server checks the socket. */
export function useInControl(): boolean {
  const hello = useHello();
  return useArmState((state) => state?.control !== null && state?.control?.userId === hello?.you.userId);
}
