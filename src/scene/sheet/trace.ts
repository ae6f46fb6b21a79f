/** Where the tool point has been in the last seconds: a ring of places, oldest first. */
const DOTS = 100;
export const TRACE_S = 10;

export interface Trace {
  /** Seconds of the arm's clock. */
  t: number[];
  places: (readonly [number, number, number])[];
}

export const emptyTrace = (): Trace => ({ t: [], places: [] });

/**
 * Adds a place unless the last one is too recent, and forgets what is older than TRACE_S.
 *
 * @param t - time of the sample, s; when it jumps back (a new arm, a restarted one) the trace starts afresh
 */
export function extendTrace(trace: Trace, t: number, place: readonly [number, number, number]): void {
  const last = trace.t.at(-1);
  if (last !== undefined && t < last) {
    trace.t.length = 0;
    trace.places.length = 0;
  } else if (last !== undefined && t - last < TRACE_S / DOTS) return;
  trace.t.push(t);
  trace.places.push([place[0], place[1], place[2]]);
  while (trace.t.length > 0 && t - trace.t[0]! > TRACE_S) {
    trace.t.shift();
    trace.places.shift();
  }
}
