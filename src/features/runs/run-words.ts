import type { RunSummary } from '../../../shared/api/resources';

type Run = Pick<RunSummary, 'how' | 'detail' | 'startedAtMs' | 'endedAtMs' | 'cyclesAsked' | 'cyclesDone'>;

/** How a run stands, in a few words. */
export const endingWords = (how: RunSummary['how']): string =>
  how === null ? 'under way' : how === 'lost control' ? 'control was lost' : how;

/** Whether somebody has to look at it: it did not end because a person wanted it to. */
export const endedBadly = (how: RunSummary['how']): boolean =>
  how === 'faulted' || how === 'lost control' || how === 'server restarted';

/** What happened, what it means, what to do; null for a run that finished or is under way. */
export function explainEnding(
  run: Run,
  arm: string,
): { happened: string; means: string; todo: string } | null {
  const happened = run.detail;
  switch (run.how) {
    case null:
    case 'finished':
      return null;
    case 'ended':
      return {
        happened: happened || 'It was ended before all cycles were done.',
        means: `${arm} ramped down and stands. Its position is as sure as before.`,
        todo: 'Start a new run when it suits.',
      };
    case 'stopped':
      return {
        happened: happened || 'Somebody pressed Stop.',
        means: `${arm} ramped down, stayed energised, and dropped the run.`,
        todo: 'See what made them press it. Then start a new run.',
      };
    case 'faulted':
      return {
        happened: happened || 'A fault stopped it.',
        means: 'Its position may have become doubtful. The status strip says how sure it is.',
        todo: 'Acknowledge the fault on Move, look at the arm, reference what is in doubt.',
      };
    case 'lost control':
      return {
        happened: happened || 'Whoever had control was away too long.',
        means: `Nobody watched, so ${arm} stopped. It is standing.`,
        todo: 'Take control and start a new run.',
      };
    case 'server restarted':
      return {
        happened: happened || 'The server went down during the run.',
        means: 'The board stopped the arm by itself. Where it stands now is not known.',
        todo: 'Look at the arm, energise it, declare or reference its position.',
      };
  }
}

/** How long it took, s; null while it is under way. */
export const tookSeconds = (run: Run): number | null =>
  run.endedAtMs === null ? null : Math.max(0, (run.endedAtMs - run.startedAtMs) / 1000);

/** "Today", "Yesterday", "3 Nov": the heading a run stands under. */
export function dayOf(atMs: number, nowMs: number): string {
  const day = new Date(atMs).toDateString();
  if (day === new Date(nowMs).toDateString()) return 'Today';
  const yesterday = new Date(nowMs);
  yesterday.setDate(yesterday.getDate() - 1);
  if (day === yesterday.toDateString()) return 'Yesterday';
  return new Date(atMs).toLocaleDateString([], { day: 'numeric', month: 'short', year: 'numeric' });
}

/** Cycle times in a line. Null without any. */
export function cycleFigures(
  seconds: readonly number[],
): { mean: number; quickest: number; slowest: number } | null {
  if (seconds.length === 0) return null;
  let sum = 0;
  let quickest = Infinity;
  let slowest = -Infinity;
  for (const s of seconds) {
    sum += s;
    quickest = Math.min(quickest, s);
    slowest = Math.max(slowest, s);
  }
  return { mean: sum / seconds.length, quickest, slowest };
}
