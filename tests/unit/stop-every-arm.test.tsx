// @vitest-environment jsdom
import { act, fireEvent, screen } from '@testing-library/react';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { Component as WorkshopLayout } from '../../src/routes/WorkshopLayout';
import { type Asked, fakeServer, problem, sessionOf, showPage, somebody } from '../support/page';

const ARM = {
  id: 'a1',
  name: 'Heron',
  note: '',
  jointCount: 4,
  revision: 1,
  updatedAtMs: 0,
  unattended: false,
  motors: 'moving',
  inControl: 'Juno',
};

beforeEach(() => {
  vi.useFakeTimers();
  vi.stubGlobal('matchMedia', () => ({ matches: false }));
});
afterEach(() => {
  vi.useRealTimers();
  vi.unstubAllGlobals();
});

/** An answer that comes when the test says so. */
function laterAnswer() {
  let give: (answer: { status?: number; body?: unknown }) => void = () => {};
  const answer = new Promise<{ status?: number; body?: unknown }>((resolve) => {
    give = resolve;
  });
  return { answer, give };
}

const stops = (asked: Asked[]) => asked.filter(({ path }) => path === '/stop');
const pass = (ms: number) => act(() => vi.advanceTimersByTimeAsync(ms));
const state = () => screen.getByRole('region', { name: 'Stop' });

async function workshop(stop: Parameters<typeof fakeServer>[0][string], arms: unknown[] = [ARM]) {
  const server = fakeServer({
    'GET /session': sessionOf(somebody('Otis', 'observer')),
    'GET /arms': { body: arms },
    'POST /stop': stop,
  });
  showPage(<WorkshopLayout />, { path: '/' });
  await pass(10);
  return server;
}

describe('Stop on a workshop page', () => {
  it('stops every arm on press, for an observer too, and says what came of it', async () => {
    const { answer, give } = laterAnswer();
    const { asked } = await workshop(() => answer);
    expect(state()).toHaveTextContent('ready');
    expect(state()).toHaveTextContent(
      'Software stop, not an emergency stop. Keep a hand on the supply switch.',
    );
    fireEvent.pointerDown(screen.getByRole('button', { name: 'Stop every arm' }));
    expect(stops(asked)).toHaveLength(1);
    expect(state()).toHaveTextContent('sent');
    give({ status: 204 });
    await pass(0);
    expect(state()).toHaveTextContent('acknowledged');
  });

  it('is Esc, from anywhere on the page, and a held key is one press', async () => {
    const { asked } = await workshop({ status: 204 });
    fireEvent.keyDown(document.body, { key: 'Escape' });
    fireEvent.keyDown(document.body, { key: 'Escape', repeat: true });
    expect(stops(asked)).toHaveLength(1);
  });

  // After 300 ms with no acknowledgement the person is sent to the supply.
  it('asks for the supply switch when nobody answers within 300 ms', async () => {
    const { answer } = laterAnswer();
    await workshop(() => answer);
    fireEvent.pointerDown(screen.getByRole('button', { name: 'Stop every arm' }));
    await pass(299);
    expect(state()).not.toHaveTextContent('No answer');
    await pass(1);
    expect(state()).toHaveTextContent('No answer. Switch the supply off.');
  });

  it('asks for the supply switch at once when the server refuses', async () => {
    await workshop({ status: 500, body: problem(500, 'serverError', 'Broken.') });
    fireEvent.pointerDown(screen.getByRole('button', { name: 'Stop every arm' }));
    await pass(1);
    expect(state()).toHaveTextContent('No answer. Switch the supply off.');
  });

  it('does not let an old answer speak for a newer press', async () => {
    const first = laterAnswer();
    const second = laterAnswer();
    const answers = [first.answer, second.answer];
    await workshop(() => answers.shift()!);
    const button = screen.getByRole('button', { name: 'Stop every arm' });
    fireEvent.pointerDown(button);
    fireEvent.pointerDown(button);
    first.give({ status: 204 });
    await pass(0);
    expect(state()).not.toHaveTextContent('acknowledged');
    second.give({ status: 204 });
    await pass(0);
    expect(state()).toHaveTextContent('acknowledged');
  });

  it('has nothing to stop only while the workshop has no arm', async () => {
    await workshop({ status: 204 }, []);
    expect(screen.getByRole('button', { name: 'Stop every arm' })).toBeDisabled();
    expect(state()).toHaveTextContent('Nothing to stop yet');
  });
});
