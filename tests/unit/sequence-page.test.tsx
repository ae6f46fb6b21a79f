// @vitest-environment jsdom
import { act, fireEvent, screen, waitFor, within } from '@testing-library/react';
import { userEvent } from '@testing-library/user-event';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import type { Sequence } from '../../shared/api/resources';
import { CEILINGS } from '../../shared/arm/trust';
import { degToRad } from '../../shared/arm/units';
import type { RunState } from '../../shared/live/server-messages';
import type { Step } from '../../shared/sequence/steps';
import { SequenceEditor } from '../../src/features/sequences/SequenceEditor';
import { endHold } from '../../src/live/hold';
import { besideHeron, changeState, emptyRehearsal, heron, poseOf, sequenceOf } from '../support/arm-page';
import { fakeServer, problem, showPage } from '../support/page';

const tray = poseOf('p1', 'Above tray', [18, 52, -78, -64]);
const goTo = (id: string): Step => ({ id, kind: 'goTo', poseId: 'p1', speed: 'easy', settle: 0 });
const wait = (id: string, seconds = 1): Step => ({ id, kind: 'wait', seconds });
const again = (id: string, steps: Step[]): Step => ({ id, kind: 'again', times: 2, steps });
const STEPS = [goTo('s1'), again('s2', [wait('s3')]), wait('s4', 5)];

const answers = (rehearsal: object = emptyRehearsal) => ({
  'GET /arms/heron/poses': { body: [tray] },
  'POST /arms/heron/sequences/seq/rehearse': { body: rehearsal },
});
const show = (newest: Sequence = sequenceOf(STEPS), old: Sequence | null = null) =>
  showPage(<SequenceEditor arm={heron} newest={newest} old={old} />, { path: '/sequence' });

const row = (name: RegExp) => screen.findByRole('button', { name }, { timeout: 8000 });
const numbers = () =>
  screen.getAllByRole('button', { name: /^Step [\d.]+:/ }).map((button) => button.getAttribute('aria-label'));

const runOf = (change: Partial<RunState>): RunState => ({
  runId: 'run',
  sequenceId: 'seq',
  sequenceName: 'Weigh one vial',
  version: 4,
  phase: 'running',
  held: false,
  single: false,
  cycle: 2,
  cycles: 3,
  stepId: 's4',
  stepPath: '3',
  stepIndex: 2,
  stepCount: 3,
  countdownS: 0,
  cycleTimes: [13.4],
  startedAtMs: 0,
  reason: null,
  ...change,
});

beforeEach(() => localStorage.clear());
afterEach(() => {
  endHold('released');
  vi.restoreAllMocks();
  vi.unstubAllGlobals();
});

describe('editing a sequence', () => {
  it('numbers steps as people read them and moves them by keys', async () => {
    besideHeron('teacher');
    fakeServer(answers());
    show();
    await row(/^Step 1: Go to Above tray/);
    expect(numbers()).toEqual([
      expect.stringMatching(/^Step 1: Go to Above tray/),
      expect.stringMatching(/^Step 2: Again 2 times/),
      expect.stringMatching(/^Step 2\.1: Wait 1 s/),
      expect.stringMatching(/^Step 3: Wait 5 s/),
    ]);
    fireEvent.keyDown(await row(/^Step 3: Wait 5 s/), { key: 'ArrowRight', altKey: true });
    expect(await row(/^Step 2\.2: Wait 5 s/)).toBeVisible();
    fireEvent.keyDown(await row(/^Step 2\.2: Wait 5 s/), { key: 'ArrowUp', altKey: true });
    fireEvent.keyDown(await row(/^Step 2\.1: Wait 5 s/), { key: 'ArrowLeft', altKey: true });
    expect(await row(/^Step 3: Wait 5 s/)).toBeVisible();
  });

  it('undoes and redoes by buttons and keys, but leaves typing to the field', async () => {
    besideHeron('teacher');
    fakeServer(answers());
    show();
    fireEvent.keyDown(await row(/^Step 3: Wait 5 s/), { key: 'Delete' });
    expect(screen.queryByRole('button', { name: /^Step 3:/ })).toBeNull();
    fireEvent.keyDown(screen.getByLabelText('Name of the sequence'), { key: 'z', ctrlKey: true });
    expect(screen.queryByRole('button', { name: /^Step 3:/ })).toBeNull();
    fireEvent.keyDown(document.body, { key: 'z', ctrlKey: true });
    expect(await row(/^Step 3: Wait 5 s/)).toBeVisible();
    fireEvent.keyDown(document.body, { key: 'Z', ctrlKey: true, shiftKey: true });
    expect(screen.queryByRole('button', { name: /^Step 3:/ })).toBeNull();
    await userEvent.click(screen.getByRole('button', { name: 'Undo' }));
    expect(screen.getByRole('button', { name: 'Undo' })).toBeDisabled();
  });

  it('adds after the step in hand and opens its fields', async () => {
    besideHeron('teacher');
    fakeServer(answers());
    show();
    await userEvent.click(await row(/^Step 1: Go to/));
    await userEvent.click(screen.getByRole('button', { name: /Add step/ }));
    await userEvent.click(await screen.findByRole('menuitem', { name: /Wait/ }));
    expect(await row(/^Step 2: Wait 1 s/)).toHaveAttribute('aria-expanded', 'true');
    const field = screen.getByRole('textbox', { name: 'Wait' });
    await userEvent.clear(field);
    await userEvent.type(field, '2.5');
    expect(await row(/^Step 2: Wait 2.5 s/)).toBeVisible();
    // The letters are one change; the step is another.
    await userEvent.click(screen.getByRole('button', { name: 'Undo' }));
    expect(await row(/^Step 2: Wait 1 s/)).toBeVisible();
  });

  it('offers only moves that change something', async () => {
    besideHeron('teacher');
    fakeServer(answers());
    show();
    await userEvent.click(await row(/^Step 1: Go to/));
    const tools = screen.getByRole('group', { name: 'Step 1' });
    const tool = (name: string) => within(tools).getByRole('button', { name });
    expect(tool('Up')).toBeDisabled();
    expect(tool('Out of repeat')).toBeDisabled();
    expect(tool('Into repeat')).toBeEnabled();
    await userEvent.click(tool('Into repeat'));
    expect(await row(/^Step 1\.1: Go to/)).toBeVisible();
  });

  it('saves what is drawn as a new version of the one it began from', async () => {
    besideHeron('teacher');
    const saved = sequenceOf(STEPS.slice(0, 2), { version: 5, shownVersion: 5 });
    const { asked } = fakeServer({ ...answers(), 'PUT /arms/heron/sequences/seq': { body: saved } });
    show();
    expect(await screen.findByRole('button', { name: 'Save' })).toBeDisabled();
    fireEvent.keyDown(await row(/^Step 3: Wait 5 s/), { key: 'Delete' });
    await userEvent.click(screen.getByRole('button', { name: 'Save' }));
    await waitFor(() => expect(asked.some((call) => call.method === 'PUT')).toBe(true));
    expect(asked.find((call) => call.method === 'PUT')?.body).toEqual({
      name: 'Weigh one vial',
      note: '',
      steps: STEPS.slice(0, 2),
      baseVersion: 4,
    });
  });

  it('keeps unsaved changes through a closed page, and drops them only when told', async () => {
    besideHeron('teacher');
    fakeServer(answers());
    const { unmount } = show();
    fireEvent.keyDown(await row(/^Step 3: Wait 5 s/), { key: 'Delete' });
    unmount();
    show();
    expect(await screen.findByText(/Unsaved changes from .* were kept/)).toBeVisible();
    expect(screen.queryByRole('button', { name: /^Step 3:/ })).toBeNull();
    await userEvent.click(screen.getByRole('button', { name: 'Drop them' }));
    expect(await row(/^Step 3: Wait 5 s/)).toBeVisible();
    expect(localStorage.length).toBe(0);
  });

  it('says that somebody else saved meanwhile and overwrites nothing by itself', async () => {
    besideHeron('teacher');
    const { asked } = fakeServer(answers());
    localStorage.setItem(
      'elbowroom.draft.heron.seq',
      JSON.stringify({ baseVersion: 4, savedAtMs: 0, draft: { name: 'Mine', note: '', steps: [] } }),
    );
    show(sequenceOf(STEPS, { version: 5, shownVersion: 5, by: 'Moss' }));
    expect(await screen.findByText('Moss saved version 5 meanwhile.')).toBeVisible();
    expect(screen.getByLabelText('Name of the sequence')).toHaveValue('Mine');
    expect(asked.some((call) => call.method === 'PUT')).toBe(false);
    await userEvent.click(screen.getByRole('button', { name: 'Save mine as version 6' }));
    await waitFor(() =>
      expect(asked.find((call) => call.method === 'PUT')?.body).toMatchObject({
        name: 'Mine',
        baseVersion: 5,
      }),
    );
  });

  it('keeps the changes and says why when saving fails', async () => {
    besideHeron('teacher');
    fakeServer({
      ...answers(),
      'PUT /arms/heron/sequences/seq': { status: 507, body: problem(507, 'diskFull', 'The disk is full.') },
    });
    show();
    fireEvent.keyDown(await row(/^Step 3: Wait 5 s/), { key: 'Delete' });
    await userEvent.click(screen.getByRole('button', { name: 'Save' }));
    expect(await screen.findByText(/The disk is full\. Your changes are kept/)).toBeVisible();
    expect(localStorage.length).toBe(1);
  });

  it('lets an operator look, choose a step, and change nothing', async () => {
    besideHeron('operator');
    fakeServer(answers());
    show();
    const step = await row(/^Step 3: Wait 5 s/);
    fireEvent.keyDown(step, { key: 'Delete' });
    expect(step).toBeVisible();
    expect(screen.getByText('Teachers change sequences.')).toBeVisible();
    expect(screen.queryByRole('button', { name: 'Save' })).toBeNull();
    await userEvent.click(step);
    expect(step).toHaveAttribute('aria-pressed', 'true');
  });

  it('shows an old version without letting it be edited', async () => {
    besideHeron('teacher');
    fakeServer(answers());
    show(sequenceOf(STEPS), sequenceOf([wait('s9', 9)], { shownVersion: 2 }));
    expect(await screen.findByText(/You look at version 2/)).toBeVisible();
    expect(await row(/^Step 1: Wait 9 s/)).toBeVisible();
    expect(screen.queryByRole('button', { name: 'Record' })).toBeNull();
  });
});

describe('recording', () => {
  it('captures a pose for a new place and adds a Go to', async () => {
    besideHeron('teacher', {}, [0, 80, -85, -85].map(degToRad));
    const { asked } = fakeServer({
      ...answers(),
      'POST /arms/heron/poses': { status: 201, body: poseOf('p9', 'Pose 9', [0, 80, -85, -85]) },
    });
    show(sequenceOf([]));
    await userEvent.click(await screen.findByRole('button', { name: 'Record' }));
    await userEvent.click(screen.getByRole('button', { name: 'Mark' }));
    await waitFor(() => expect(numbers()).toHaveLength(1));
    expect(asked.find((call) => call.method === 'POST' && call.path.endsWith('/poses'))?.body).toEqual({});
  });

  it('uses the pose that is there, and asks the server for nothing', async () => {
    besideHeron('teacher', {}, [...tray.q]);
    const { asked } = fakeServer(answers());
    show(sequenceOf([]));
    await userEvent.click(await screen.findByRole('button', { name: 'Record' }));
    expect(await screen.findByText('Mark adds a Go to “Above tray”, where it stands.')).toBeVisible();
    await userEvent.click(screen.getByRole('button', { name: 'Mark' }));
    expect(await row(/^Step 1: Go to Above tray/)).toBeVisible();
    expect(asked.some((call) => call.path === '/arms/heron/poses' && call.method === 'POST')).toBe(false);
  });

  it('marks nothing while the arm moves or its position is not known', async () => {
    besideHeron('teacher', { motors: 'moving' });
    fakeServer(answers());
    show(sequenceOf([]));
    await userEvent.click(await screen.findByRole('button', { name: 'Record' }));
    expect(screen.getByRole('button', { name: 'Mark' })).toBeDisabled();
    expect(screen.getByText('Let the arm and its gripper come to rest.')).toBeVisible();
    act(() => changeState({ trust: ['doubtful', 'referenced', 'referenced', 'referenced'] }));
    expect(screen.getByText(/The position is doubtful/)).toBeVisible();
  });
});

describe('the rehearsal', () => {
  it('hangs each finding on its step and leads there', async () => {
    besideHeron('teacher');
    const message = 'Upper arm is tight: it uses up to 83 % of its torque.';
    fakeServer(
      answers({
        ...emptyRehearsal,
        highestTorque: { joint: 1, used: 0.83, path: '2.1' },
        nearestLimit: { joint: 2, margin: degToRad(6.3), path: '1' },
        problems: [{ stepId: 's3', path: '2.1', severity: 'caution', code: 'tight', message }],
      }),
    );
    show();
    expect(await screen.findByText(message)).toBeVisible();
    expect(await row(/^Step 2\.1: Wait 1 s\. Upper arm is tight/)).toBeVisible();
    expect(screen.getByText('6.3°')).toBeVisible();
    await userEvent.click(screen.getByRole('button', { name: 'Go to step 2.1' }));
    expect(await row(/^Step 2\.1/)).toHaveAttribute('aria-expanded', 'true');
  });
});

describe('the run bar', () => {
  it.each([
    ['an observer', 'observer', {}, {}, /Operators run sequences/],
    ['an operator and no approval', 'operator', {}, {}, /not approved for operators/],
    ['nobody in control', 'teacher', { control: null }, {}, /Take control first/],
    ['resting motors', 'teacher', { energised: [false, false, false, false] }, {}, /resting/],
    [
      'an unknown position',
      'teacher',
      { trust: ['unknown', 'referenced', 'referenced', 'referenced'] },
      {},
      /not known/,
    ],
    ['no step', 'teacher', {}, { steps: [] }, /no step to run/],
  ] as const)('does not start with %s, and says why', async (_case, role, state, sequence, reason) => {
    const sent = besideHeron(role, state as never);
    fakeServer(answers());
    show(sequenceOf([...STEPS], sequence as never));
    expect(await screen.findByText(reason)).toBeVisible();
    const run = screen.getByRole('button', { name: /^Run ?from step 1/ });
    expect(run).toBeDisabled();
    expect(sent).toEqual([]);
  });

  it('starts the version that is shown, for so many cycles, from the chosen step', async () => {
    const sent = besideHeron('operator');
    fakeServer(answers());
    const approval = { by: 'Ines', atMs: 0, holds: true, why: null };
    show(sequenceOf(STEPS, { approvedVersion: 4, approval }));
    await userEvent.click(await row(/^Step 2: Again/));
    await userEvent.click(screen.getByRole('button', { name: 'More cycles' }));
    await userEvent.click(screen.getByRole('button', { name: /Run from here/ }));
    // A repeat begins with what it holds.
    expect(sent.at(-1)).toMatchObject({ type: 'run.start', version: 4, cycles: 2, fromStep: 's3' });
    await userEvent.click(screen.getByLabelText('until stopped'));
    await userEvent.click(screen.getByRole('button', { name: /Run one step/ }));
    expect(sent.at(-1)).toMatchObject({ type: 'run.start', cycles: null, single: true });
  });

  it('does not run what is not saved', async () => {
    besideHeron('teacher');
    fakeServer(answers());
    show();
    fireEvent.keyDown(await row(/^Step 3: Wait 5 s/), { key: 'Delete' });
    expect(await screen.findByText('Save your changes first.')).toBeVisible();
  });

  it('carries a held cycle only while the button is pressed', async () => {
    const sent = besideHeron('teacher', { run: runOf({ phase: 'heldWaiting', held: true, cycle: 1 }) });
    fakeServer(answers());
    show();
    const hold = await screen.findByRole('button', { name: /Hold to run/ });
    fireEvent.keyDown(hold, { key: 'Enter' });
    expect(sent.at(-1)).toMatchObject({ type: 'hold.start', motion: { kind: 'run' } });
    fireEvent.keyUp(hold, { key: 'Enter' });
    expect(sent.at(-1)).toMatchObject({ type: 'hold.end' });
  });

  it('shows the step, the cycle and the countdown, pauses, resumes and ends', async () => {
    const sent = besideHeron('teacher', { run: runOf({}), motors: 'moving' });
    fakeServer(answers());
    show();
    expect((await row(/^Step 3: Wait 5 s/)).closest('li')).toHaveAttribute('aria-current', 'step');
    const bar = screen.getByRole('region', { name: 'Run under way' });
    expect(bar).toHaveTextContent('Cycle 2 of 3, step 3');
    expect(bar).toHaveTextContent('Last cycle 13.4 s.');
    await userEvent.click(within(bar).getByRole('button', { name: 'Pause' }));
    expect(sent.at(-1)).toMatchObject({ type: 'run.pause' });
    act(() => changeState({ run: runOf({ phase: 'paused', reason: 'Paused.' }) }));
    await userEvent.click(within(bar).getByRole('button', { name: /Resume/ }));
    expect(sent.at(-1)).toMatchObject({ type: 'run.resume' });
    act(() => changeState({ run: runOf({ phase: 'countdown', countdownS: 2.2 }) }));
    expect(bar).toHaveTextContent('Moves in 3 s');
    act(() => changeState({ run: runOf({ phase: 'stepWaiting', single: true }) }));
    await userEvent.click(within(bar).getByRole('button', { name: /Next step/ }));
    expect(sent.at(-1)).toMatchObject({ type: 'run.step' });
    await userEvent.click(within(bar).getByRole('button', { name: 'End the run' }));
    expect(sent.at(-1)).toMatchObject({ type: 'run.end' });
  });

  it('lowers the ceiling at any time and raises it only while the arm stands', async () => {
    const sent = besideHeron('teacher', { run: runOf({}), motors: 'moving' });
    fakeServer(answers());
    show();
    const ceiling = await screen.findByRole('group', { name: 'Ceiling' });
    const choice = (name: string) => within(ceiling).getByRole('button', { name });
    expect(choice('full')).toBeDisabled();
    await userEvent.click(choice('creep'));
    expect(sent.at(-1)).toMatchObject({ type: 'ceiling.set', fraction: CEILINGS.creep });
    act(() => changeState({ run: runOf({ phase: 'paused' }), motors: 'standing' }));
    expect(choice('full')).toBeEnabled();
  });

  it('lets somebody without control watch only', async () => {
    besideHeron('operator', {
      run: runOf({}),
      control: { userId: 'other', name: 'Moss', sinceMs: 0, away: false, request: null },
    });
    fakeServer(answers());
    show();
    const bar = await screen.findByRole('region', { name: 'Run under way' });
    expect(within(bar).getByRole('button', { name: 'Pause' })).toBeDisabled();
    expect(within(bar).getByRole('button', { name: 'End the run' })).toBeDisabled();
    expect(bar).toHaveTextContent('Moss has control.');
  });
});
