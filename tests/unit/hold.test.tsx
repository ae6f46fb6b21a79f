// @vitest-environment jsdom
import { act, fireEvent, render, screen } from '@testing-library/react';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import type { StateMessage } from '../../shared/live/server-messages';
import { connection } from '../../src/live/connection';
import { activeHoldKey, endHold, lastHoldEnd, watchForLostHands } from '../../src/live/hold';
import { emptyLive, useLiveStore } from '../../src/live/live-store';
import { useHoldButton } from '../../src/live/use-hold';

/** What the page sends, instead of a socket; every message is accepted unless told otherwise. */
let sent: { type: string; [field: string]: unknown }[] = [];
let accept = true;
let unwatch = () => {};

const state = (change: Partial<StateMessage> = {}) =>
  ({
    turn: 3,
    control: { userId: 'me', name: 'Ines', sinceMs: 0, away: false, request: null },
    hold: null,
    ...change,
  }) as StateMessage;

beforeEach(() => {
  vi.useFakeTimers({ toFake: ['setInterval', 'clearInterval', 'setTimeout', 'clearTimeout', 'performance'] });
  sent = [];
  accept = true;
  vi.spyOn(connection, 'isOpen', 'get').mockReturnValue(true);
  vi.spyOn(connection, 'post').mockImplementation((message) => {
    sent.push(message as (typeof sent)[number]);
    return true;
  });
  vi.spyOn(connection, 'send').mockImplementation((command) => {
    sent.push(command as (typeof sent)[number]);
    return Promise.resolve(accept ? { ok: true } : { ok: false, code: 'atLimit', message: 'At its limit.' });
  });
  vi.spyOn(document, 'hasFocus').mockReturnValue(true);
  useLiveStore.setState({
    ...emptyLive,
    connection: 'live',
    state: state(),
    telemetryAtMs: performance.now(),
  });
  unwatch = watchForLostHands();
});
afterEach(() => {
  endHold('released');
  unwatch();
  vi.restoreAllMocks();
  vi.useRealTimers();
});

function Button({
  disabled = false,
  nudging = false,
  onNudge = () => {},
}: {
  disabled?: boolean;
  nudging?: boolean;
  onNudge?: () => void;
}) {
  const { held, props } = useHoldButton({
    key: 'k',
    motion: { kind: 'jog', frame: 'joint', axis: 1, direction: 1 },
    disabled,
    onNudge,
    nudging,
  });
  return (
    <>
      <button type="button" {...props}>
        {held ? 'raising' : 'raise'}
      </button>
      <button type="button" data-stop>
        Stop arm
      </button>
      <p>elsewhere</p>
    </>
  );
}

const button = () => screen.getByRole('button', { name: /rais/ });
const press = () =>
  fireEvent.pointerDown(button(), { pointerId: 7, button: 0, isPrimary: true, clientX: 0, clientY: 0 });
/** The page lives on for a while: telemetry keeps coming, beats go out. */
function live(ms: number): void {
  for (let t = 0; t < ms; t += 10) {
    act(() => {
      useLiveStore.getState().telemetryAtMs = performance.now();
      vi.advanceTimersByTime(10);
    });
  }
}
const isHeld = () => activeHoldKey() === 'k';
function pressAndHold(): void {
  press();
  live(120);
  expect(isHeld()).toBe(true);
}
function expectEnded(why: string): void {
  expect(isHeld()).toBe(false);
  expect(lastHoldEnd()).toBe(why);
  expect(sent.at(-1)).toMatchObject({ type: 'hold.end' });
  const count = sent.length;
  live(300);
  // It never resumes and nothing more is sent.
  expect(sent.length).toBe(count);
}

describe('a hold', () => {
  it('starts on a press and is kept every 50 ms with a rising number', () => {
    render(<Button />);
    press();
    expect(sent[0]).toMatchObject({ type: 'hold.start', motion: { kind: 'jog', axis: 1, direction: 1 } });
    live(500);
    const keeps = sent.filter((m) => m.type === 'hold.keep');
    expect(keeps.length).toBe(10);
    expect(keeps.map((m) => m.seq)).toEqual(keeps.map((_, i) => i));
    expect(screen.getByText('raising')).toBeVisible();
  });

  const cancels: [string, string, () => void][] = [
    ['pointerup', 'released', () => fireEvent.pointerUp(button(), { pointerId: 7 })],
    ['pointercancel', 'pointer cancelled', () => fireEvent.pointerCancel(button(), { pointerId: 7 })],
    [
      'a lost pointer capture',
      'capture lost',
      () => fireEvent.lostPointerCapture(button(), { pointerId: 7 }),
    ],
    [
      'leaving the button by more than 24 px',
      'slid off',
      () => fireEvent.pointerMove(button(), { pointerId: 7, clientX: 30, clientY: 0 }),
    ],
    [
      'a second pointer elsewhere',
      'second pointer',
      () => fireEvent.pointerDown(screen.getByText('elsewhere'), { pointerId: 8 }),
    ],
    ['the context menu', 'context menu', () => fireEvent.contextMenu(button())],
    ['a scroll', 'scroll', () => fireEvent.scroll(window)],
    ['a second touch', 'second pointer', () => fireEvent.touchMove(document, { touches: [{}, {}] })],
    ['the window losing focus', 'window left', () => fireEvent.blur(window)],
    [
      'the page being hidden',
      'page hidden',
      () => {
        vi.spyOn(document, 'hidden', 'get').mockReturnValue(true);
        fireEvent(document, new Event('visibilitychange'));
      },
    ],
    ['pagehide', 'page hidden', () => fireEvent(window, new Event('pagehide'))],
    ['freeze', 'page hidden', () => fireEvent(document, new Event('freeze'))],
    ['a turned or resized page', 'page turned', () => fireEvent(window, new Event('resize'))],
    [
      'a change to or from full screen',
      'page turned',
      () => fireEvent(document, new Event('fullscreenchange')),
    ],
    ['any other key', 'another key', () => fireEvent.keyDown(document.body, { key: 'a' })],
  ];
  it.each(cancels)('ends on %s', (_what, why, cancel) => {
    render(<Button />);
    pressAndHold();
    act(cancel);
    expectEnded(why);
  });

  it('ends when the button is taken away', () => {
    const { unmount } = render(<Button />);
    pressAndHold();
    unmount();
    expectEnded('button gone');
  });

  it('ends when the button may not be used any more', () => {
    const { rerender } = render(<Button />);
    pressAndHold();
    rerender(<Button disabled />);
    expectEnded('not possible');
  });

  it('ends when focus is gone without any event having said so', () => {
    render(<Button />);
    pressAndHold();
    vi.spyOn(document, 'hasFocus').mockReturnValue(false);
    live(60);
    expectEnded('window left');
  });

  it('ends when the page was stuck for more than 150 ms', () => {
    render(<Button />);
    pressAndHold();
    act(() => {
      // The clock goes on while no timer runs, then the next beat notices.
      vi.setSystemTime(Date.now());
      const now = performance.now();
      vi.spyOn(performance, 'now').mockImplementation(() => now + 300);
      useLiveStore.getState().telemetryAtMs = now + 300;
      vi.advanceTimersByTime(50);
    });
    expect(lastHoldEnd()).toBe('page stalled');
    expect(isHeld()).toBe(false);
  });

  it('ends when no telemetry came for 250 ms', () => {
    render(<Button />);
    pressAndHold();
    act(() => vi.advanceTimersByTime(310));
    expect(lastHoldEnd()).toBe('link quiet');
    expect(isHeld()).toBe(false);
  });

  it('ends when the socket closes', () => {
    render(<Button />);
    pressAndHold();
    vi.spyOn(connection, 'isOpen', 'get').mockReturnValue(false);
    live(60);
    expect(lastHoldEnd()).toBe('connection lost');
  });

  it.each([
    ['control goes to somebody else', { turn: 4 }],
    ['nobody has control any more', { control: null }],
  ])('ends when %s', (_what, change) => {
    render(<Button />);
    pressAndHold();
    act(() => useLiveStore.setState({ state: state(change) }));
    live(60);
    expectEnded('control lost');
  });

  it('ends when the arm has ended it: a limit, a fault, a stop', async () => {
    render(<Button />);
    press();
    await act(async () => {});
    const { holdId } = sent[0]!;
    act(() =>
      useLiveStore.setState({
        state: state({ hold: { holdId: String(holdId), userId: 'me', motion: { kind: 'run' } } }),
      }),
    );
    live(400);
    expect(isHeld()).toBe(true);
    act(() => useLiveStore.setState({ state: state({ hold: null }) }));
    live(60);
    expect(lastHoldEnd()).toBe('stopped');
  });

  it('ends when the arm refuses it', async () => {
    accept = false;
    render(<Button />);
    press();
    await act(async () => {});
    expect(lastHoldEnd()).toBe('not possible');
  });

  it('does not end when Stop is touched: Stop ends the motion itself', () => {
    render(<Button />);
    pressAndHold();
    fireEvent.pointerDown(screen.getByText('Stop arm'), { pointerId: 9 });
    expect(isHeld()).toBe(true);
  });
});

describe('a hold by key', () => {
  it('lasts from key down to key up; key repeat neither starts nor ends it', () => {
    render(<Button />);
    button().focus();
    fireEvent.keyDown(button(), { key: ' ', repeat: true });
    expect(isHeld()).toBe(false);
    fireEvent.keyDown(button(), { key: ' ' });
    live(100);
    fireEvent.keyDown(button(), { key: ' ', repeat: true });
    expect(isHeld()).toBe(true);
    fireEvent.keyUp(button(), { key: ' ' });
    expectEnded('released');
  });

  it('ends when the button loses focus, as after Alt-Tab with a lost key up', () => {
    render(<Button />);
    button().focus();
    fireEvent.keyDown(button(), { key: 'Enter' });
    live(100);
    expect(isHeld()).toBe(true);
    fireEvent.blur(button());
    expectEnded('window left');
  });
});

describe('what is not a hold', () => {
  it('makes a click without a press (assistive technology) one nudge', () => {
    const nudge = vi.fn();
    render(<Button onNudge={nudge} />);
    fireEvent.click(button(), { detail: 0 });
    expect(nudge).toHaveBeenCalledTimes(1);
    expect(isHeld()).toBe(false);
  });
  it('starts nothing while another hold lasts, while hidden, or without a connection', () => {
    render(<Button />);
    pressAndHold();
    const before = sent.filter((m) => m.type === 'hold.start').length;
    press();
    expect(sent.filter((m) => m.type === 'hold.start').length).toBe(before);
    act(() => fireEvent.pointerUp(button(), { pointerId: 7 }));
    vi.spyOn(connection, 'isOpen', 'get').mockReturnValue(false);
    press();
    expect(isHeld()).toBe(false);
  });
});
