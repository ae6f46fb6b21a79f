import { describe, expect, it } from 'vitest';
import { RUN_ENDINGS } from '../../shared/api/resources';
import {
  cycleFigures,
  dayOf,
  endedBadly,
  explainEnding,
  tookSeconds,
} from '../../src/features/runs/run-words';

const run = (how: (typeof RUN_ENDINGS)[number] | null, detail = '') => ({
  how,
  detail,
  startedAtMs: 1_000_000,
  endedAtMs: how === null ? null : 1_090_500,
  cyclesAsked: 3,
  cyclesDone: 1,
});

describe('how a run ended', () => {
  it('explains every ending but the good one, in under 30 words a cell', () => {
    for (const how of RUN_ENDINGS) {
      const why = explainEnding(run(how), 'Heron');
      expect(why === null).toBe(how === 'finished');
      for (const text of Object.values(why ?? {})) {
        expect(text).not.toBe('');
        expect(text.split(/\s+/).length).toBeLessThan(30);
        expect(text).not.toContain('!');
      }
    }
    expect(explainEnding(run(null), 'Heron')).toBeNull();
  });

  it('prefers what the arm itself said happened', () => {
    expect(explainEnding(run('stopped', 'Otis pressed Stop.'), 'Heron')?.happened).toBe('Otis pressed Stop.');
  });

  it('marks only what nobody wanted', () => {
    expect(RUN_ENDINGS.filter(endedBadly)).toEqual(['faulted', 'lost control', 'server restarted']);
  });

  it('takes as long as from start to end, and has no length while under way', () => {
    expect(tookSeconds(run('finished'))).toBe(90.5);
    expect(tookSeconds(run(null))).toBeNull();
  });
});

describe('days in the history', () => {
  it('are named as people do, also around midnight', () => {
    const now = new Date(2026, 2, 12, 0, 20).getTime();
    expect(dayOf(new Date(2026, 2, 12, 0, 1).getTime(), now)).toBe('Today');
    expect(dayOf(new Date(2026, 2, 11, 23, 59).getTime(), now)).toBe('Yesterday');
    expect(dayOf(new Date(2026, 2, 10, 12, 0).getTime(), now)).toMatch(/10/);
  });
});

describe('figures of cycles', () => {
  it('are mean, quickest and slowest', () => {
    expect(cycleFigures([24, 16, 17])).toEqual({ mean: 19, quickest: 16, slowest: 24 });
    expect(cycleFigures([])).toBeNull();
  });
  it('hold for more cycles than a call can take arguments', () => {
    expect(cycleFigures(Array.from({ length: 200_000 }, (_, i) => (i === 77 ? 3 : 2)))?.slowest).toBe(3);
  });
});
