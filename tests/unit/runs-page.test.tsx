// @vitest-environment jsdom
import { act, screen, within } from '@testing-library/react';
import { afterEach, describe, expect, it, vi } from 'vitest';
import type { Run, RunSummary } from '../../shared/api/resources';
import { RunsPage } from '../../src/features/runs/RunsPage';
import { besideHeron, changeState, heron } from '../support/arm-page';
import { fakeServer, problem, showPage } from '../support/page';

// The plot draws on a canvas, which jsdom has not; its words are tested with the browser.
vi.mock('../../src/features/runs/CyclePlot', () => ({
  default: ({ label }: { label: string }) => <p>{label}</p>,
}));

const START = new Date(2026, 2, 12, 14, 31).getTime();
const summary = (id: string, change: Partial<RunSummary> = {}): RunSummary => ({
  id,
  sequenceId: 'seq',
  sequenceName: 'Weigh one vial',
  version: 4,
  who: 'Juno',
  trust: 'referenced',
  armRevision: 2,
  startedAtMs: START,
  endedAtMs: START + 57_000,
  cyclesAsked: 3,
  cyclesDone: 3,
  how: 'finished',
  detail: '',
  ...change,
});
const whole = (run: RunSummary, seconds: number[]): Run => ({
  ...run,
  cycles: seconds.map((s, i) => ({
    cycle: i + 1,
    seconds: s,
    held: i === 0,
    endedAtMs: START + 1000 * (i + 1),
  })),
});
const done = summary('r1');
const stopped = summary('r2', { how: 'stopped', detail: 'Otis pressed Stop.', cyclesDone: 1, who: 'Ada' });
const list = {
  'GET /arms/heron/runs': { body: [done, stopped] },
  'GET /arms/heron/runs/r1': { body: whole(done, [24.12, 16.59, 16.59]) },
  'GET /arms/heron/runs/r2': { body: whole(stopped, [20]) },
};
const show = (at = '/runs') => {
  const path = at === '/runs' ? '/runs' : '/runs/:runId';
  return showPage(<RunsPage arm={heron} />, { path, at });
};

afterEach(() => {
  vi.restoreAllMocks();
  vi.unstubAllGlobals();
});

describe('the Runs page', () => {
  it('lists who ran which version, how many cycles, how long and how it ended', async () => {
    besideHeron('observer');
    fakeServer(list);
    show();
    const table = await screen.findByRole('table', { name: 'Runs' });
    const [, , first, second] = within(table).getAllByRole('row');
    expect(first).toHaveTextContent('Juno');
    expect(first).toHaveTextContent('version 4, referenced');
    expect(first).toHaveTextContent('3of 3');
    expect(first).toHaveTextContent('57.0s');
    expect(first).toHaveTextContent('finished');
    expect(second).toHaveTextContent('Ada');
    expect(second).toHaveTextContent('stopped');
    expect(screen.getByText('2 runs, 4 cycles')).toBeVisible();
  });

  it('times every cycle of the chosen run and tells held ones', async () => {
    besideHeron('observer');
    fakeServer(list);
    show('/runs/r1');
    const cycles = await screen.findByRole('table', { name: 'Cycles' });
    const rows = within(cycles)
      .getAllByRole('row')
      .slice(1)
      .map((row) => row.textContent);
    expect(rows).toHaveLength(3);
    expect(rows[0]).toMatch(/^124\.12 s.*held by hand$/);
    expect(rows[1]).toMatch(/^216\.59 s.*by itself$/);
    // (24.12 + 16.59 + 16.59) / 3 = 19.1
    expect(
      await screen.findByText(/3 cycles, from 16\.6 s to 24\.1 s, on average 19\.1 s/),
    ).toBeInTheDocument();
  });

  it('explains a run that was stopped: what happened, what it means, what to do', async () => {
    besideHeron('observer');
    fakeServer(list);
    show('/runs/r2');
    expect(await screen.findByText('Otis pressed Stop.')).toBeVisible();
    expect(screen.getByText('What it means')).toBeVisible();
    expect(screen.getByText('What to do')).toBeVisible();
  });

  it('offers the history as CSV and JSON', async () => {
    besideHeron('observer');
    fakeServer(list);
    show();
    const link = (name: string) => screen.getByRole('link', { name }).getAttribute('href');
    expect(link('Export CSV')).toBe('/api/arms/heron/runs/export?format=csv');
    expect(link('Export JSON')).toBe('/api/arms/heron/runs/export?format=json');
  });

  it('puts the live run on top and fetches each finished cycle', async () => {
    const run = {
      runId: 'r1',
      sequenceId: 'seq',
      sequenceName: 'Weigh one vial',
      version: 4,
      phase: 'running' as const,
      held: false,
      single: false,
      cycle: 2,
      cycles: 3,
      stepId: 's1',
      stepPath: '1',
      stepIndex: 0,
      stepCount: 3,
      countdownS: 0,
      cycleTimes: [24.12],
      startedAtMs: START,
      reason: null,
    };
    besideHeron('observer', { run, motors: 'moving' });
    const { asked } = fakeServer(list);
    show('/runs/r1');
    expect(await screen.findByText('Weigh one vial is running.')).toBeVisible();
    await screen.findByRole('table', { name: 'Cycles' });
    const count = () => asked.filter((call) => call.path === '/arms/heron/runs/r1').length;
    const before = count();
    act(() => changeState({ run: { ...run, cycle: 3 }, motors: 'moving' }));
    await vi.waitFor(() => expect(count()).toBe(before + 1));
  });

  it('says so when nothing has run yet, or when the list cannot be had', async () => {
    besideHeron('observer');
    fakeServer({ 'GET /arms/heron/runs': { body: [] } });
    const { unmount } = show();
    expect(await screen.findByText('Nothing has run yet')).toBeVisible();
    unmount();
    fakeServer({ 'GET /arms/heron/runs': { status: 500, body: problem(500, 'broken', 'No room left.') } });
    show();
    expect(await screen.findByText('No room left.')).toBeVisible();
  });
});
