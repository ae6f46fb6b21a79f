// @vitest-environment jsdom
import { act, fireEvent, screen, waitFor, within } from '@testing-library/react';
import { userEvent } from '@testing-library/user-event';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { PosesPage } from '../../src/features/poses/PosesPage';
import { activeHoldKey, endHold } from '../../src/live/hold';
import { besideHeron, changeState, heron, poseOf } from '../support/arm-page';
import { fakeServer, problem, showPage } from '../support/page';

const tray = poseOf('p1', 'Above tray', [18, 52, -78, -64], { tags: ['tray'], note: 'Mind the cable' });
const scale = poseOf('p2', 'On scale', [-35, 41, -82, -49], { tags: ['scale'], trust: 'declared' });
const past = poseOf('p3', 'Old spot', [0, 120, -80, -40], { by: 'Juno' });

const list = { 'GET /arms/heron/poses': { body: [tray, scale, past] } };
const show = () => showPage(<PosesPage arm={heron} />, { path: '/poses' });
const card = (name: string | RegExp) => screen.findByRole('button', { name });

beforeEach(() => localStorage.clear());
afterEach(() => {
  endHold('released');
  vi.restoreAllMocks();
  vi.unstubAllGlobals();
});

describe('the Poses page', () => {
  it('finds poses by words and by tag', async () => {
    besideHeron('teacher');
    fakeServer(list);
    show();
    await card(/^Above tray/);
    await userEvent.type(screen.getByLabelText('Find a pose'), 'juno');
    expect(screen.queryByRole('button', { name: /^Above tray/ })).toBeNull();
    expect(screen.getByRole('button', { name: /^Old spot/ })).toBeVisible();
    await userEvent.clear(screen.getByLabelText('Find a pose'));
    await userEvent.click(screen.getByRole('button', { name: 'scale' }));
    expect(screen.getByRole('button', { name: /^On scale/ })).toBeVisible();
    expect(screen.queryByRole('button', { name: /^Old spot/ })).toBeNull();
  });

  it('says on the card what is wrong: past a limit, or captured while only declared', async () => {
    besideHeron('observer');
    fakeServer(list);
    show();
    expect(await card(/^Old spot/)).toHaveTextContent('Upper arm is past its limit');
    expect(await card(/^On scale/)).toHaveTextContent('Position was only declared when captured');
  });

  it('compares with now, joint by joint, and with nothing while the position is not known', async () => {
    besideHeron('teacher');
    fakeServer(list);
    show();
    await card(/^Above tray/);
    // The arm is at 0, 100, −125, −65°.
    const upper = screen.getByRole('meter', { name: 'Upper arm' });
    expect(upper).toHaveAttribute('aria-valuetext', '100.0 degrees, pose 52.0, position referenced');
    expect(screen.getByText('−48.0°')).toBeVisible();
    act(() => changeState({ trust: ['referenced', 'doubtful', 'referenced', 'referenced'] }));
    expect(upper).toHaveAttribute('aria-valuetext', 'position unknown, pose 52.0 degrees');
  });

  it('goes to a pose only while held', async () => {
    const sent = besideHeron('operator');
    fakeServer(list);
    show();
    const go = await card(/^Hold to go to Above tray/);
    fireEvent.keyDown(go, { key: ' ' });
    expect(sent[0]).toMatchObject({ type: 'hold.start', motion: { kind: 'pose', poseId: 'p1' } });
    fireEvent.keyUp(go, { key: ' ' });
    expect(sent.at(-1)).toMatchObject({ type: 'hold.end' });
  });

  it('hears the letter G let go, also when the page was drawn anew meanwhile', async () => {
    const sent = besideHeron('operator');
    fakeServer(list);
    show();
    await card(/^Hold to go to Above tray/);
    fireEvent.keyDown(document.body, { key: 'g', code: 'KeyG' });
    expect(activeHoldKey()).toBe('pose-p1');
    act(() => changeState({ motors: 'moving' }));
    act(() => changeState({ motors: 'moving', motorsSinceMs: 5 }));
    fireEvent.keyUp(document.body, { key: 'g', code: 'KeyG' });
    expect(activeHoldKey()).toBeNull();
    expect(sent.at(-1)).toMatchObject({ type: 'hold.end' });
  });

  it('leaves the letter G alone in a field, and when letter keys are off', async () => {
    besideHeron('operator');
    fakeServer(list);
    show();
    await card(/^Hold to go to Above tray/);
    fireEvent.keyDown(screen.getByLabelText('Find a pose'), { key: 'g', code: 'KeyG' });
    expect(activeHoldKey()).toBeNull();
    localStorage.setItem('elbowroom.letterKeys', 'off');
    fireEvent.keyDown(document.body, { key: 'g', code: 'KeyG' });
    expect(activeHoldKey()).toBeNull();
  });

  it.each([
    ['an observer', 'observer', {}, /Operators move the arm/],
    ['nobody in control', 'teacher', { control: null }, /Take control first/],
    ['resting motors', 'teacher', { energised: [false, false, false, false] }, /resting/],
    [
      'an unknown position',
      'teacher',
      { trust: ['unknown', 'declared', 'declared', 'declared'] },
      /not known/,
    ],
  ] as const)('does not go with %s, and says why', async (_case, role, change, reason) => {
    const sent = besideHeron(role, change as never);
    fakeServer(list);
    show();
    const go = await card(/^Hold to go to Above tray/);
    expect(go).toHaveAttribute('aria-disabled', 'true');
    expect(go).toHaveTextContent(reason);
    fireEvent.keyDown(go, { key: ' ' });
    expect(sent).toEqual([]);
  });

  it('does not go to a pose outside today’s limits', async () => {
    besideHeron('teacher');
    fakeServer(list);
    show();
    await userEvent.click(await card(/^Old spot/));
    expect(await card(/^Hold to go to Old spot/)).toHaveTextContent('outside today’s limits');
  });

  it('captures where the controller says the arm stands: no numbers travel', async () => {
    besideHeron('teacher');
    const { asked } = fakeServer({ ...list, 'POST /arms/heron/poses': { status: 201, body: tray } });
    show();
    await card(/^Above tray/);
    await userEvent.click(screen.getByRole('button', { name: 'Capture pose' }));
    expect(asked.find((call) => call.method === 'POST')).toEqual({
      method: 'POST',
      path: '/arms/heron/poses',
      body: {},
    });
  });

  it('offers capture to teachers only, and only of an arm that stands', async () => {
    besideHeron('operator');
    fakeServer(list);
    show();
    await card(/^Above tray/);
    expect(screen.getByRole('button', { name: 'Capture pose' })).toBeDisabled();
    expect(screen.getByText('Teachers capture poses.')).toBeVisible();
    expect(screen.queryByRole('button', { name: 'Re-teach…' })).toBeNull();
  });

  it('asks before re-teaching and keeps the old place', async () => {
    besideHeron('teacher');
    const { asked } = fakeServer({
      ...list,
      'POST /arms/heron/poses/p1/reteach': { body: { ...tray, revision: 2 } },
    });
    show();
    await userEvent.click(await card('Re-teach…'));
    const dialog = screen.getByRole('dialog', { name: 'Re-teach Above tray' });
    expect(dialog).toHaveTextContent('stays as revision 1');
    expect(asked.some((call) => call.method === 'POST')).toBe(false);
    await userEvent.click(within(dialog).getByRole('button', { name: 'Re-teach here' }));
    await waitFor(() => expect(screen.queryByRole('dialog')).toBeNull());
    expect(asked.filter((call) => call.method === 'POST').map((call) => call.path)).toEqual([
      '/arms/heron/poses/p1/reteach',
    ]);
  });

  it('keeps what was typed when renaming is refused', async () => {
    besideHeron('teacher');
    fakeServer({
      ...list,
      'PATCH /arms/heron/poses/p1': { status: 409, body: problem(409, 'nameTaken', 'There is one already.') },
    });
    show();
    await userEvent.click(await card('Rename or tag…'));
    const name = screen.getByLabelText('Name');
    await userEvent.clear(name);
    expect(screen.getByRole('button', { name: 'Save' })).toBeDisabled();
    await userEvent.type(name, 'Near tray');
    await userEvent.click(screen.getByRole('button', { name: 'Save' }));
    expect(await screen.findByText('There is one already.')).toBeVisible();
    expect(name).toHaveValue('Near tray');
  });

  it('understands other units in typed values and refuses what lies outside', async () => {
    besideHeron('teacher');
    const { asked } = fakeServer({ ...list, 'POST /arms/heron/poses/typed': { status: 201, body: tray } });
    show();
    await card(/^Above tray/);
    await userEvent.click(screen.getByRole('button', { name: /Type or file/ }));
    await userEvent.click(await screen.findByRole('menuitem', { name: /Type a pose/ }));
    const dialog = await screen.findByRole('dialog');
    const field = within(dialog).getByLabelText('Base turn');
    await userEvent.type(within(dialog).getByLabelText('Name'), 'Typed');
    await userEvent.clear(field);
    await userEvent.type(field, '200');
    expect(within(dialog).getByRole('button', { name: 'Save pose' })).toBeDisabled();
    await userEvent.clear(field);
    await userEvent.type(field, '0.335 rad');
    expect(dialog).toHaveTextContent('0.335 rad is 19.2°');
    await userEvent.click(within(dialog).getByRole('button', { name: 'Save pose' }));
    const body = asked.find((call) => call.path.endsWith('/typed'))?.body as { q: number[]; name: string };
    expect(body.name).toBe('Typed');
    expect(body.q[0]).toBeCloseTo(0.335, 12);
  });

  it('tells a person with no poses what to do, and offers to try again when the list fails', async () => {
    besideHeron('teacher');
    fakeServer({ 'GET /arms/heron/poses': { body: [] } });
    const { unmount } = show();
    expect(await screen.findByText('No poses yet')).toBeVisible();
    unmount();
    fakeServer({
      'GET /arms/heron/poses': { status: 500, body: problem(500, 'broken', 'The disk is full.') },
    });
    show();
    expect(await screen.findByText('The disk is full.')).toBeVisible();
    expect(screen.getByRole('button', { name: 'Try again' })).toBeVisible();
  });
});
