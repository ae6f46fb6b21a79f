import { afterEach, describe, expect, it, vi } from 'vitest';
import { z } from 'zod';
import { ApiError, api, errorText, whenSignedOut } from '../../src/api/client';

const Thing = z.object({ name: z.string() });

/** A server that answers once, and what it was asked. */
function serverAnswers(status: number, body: unknown, type = 'application/json') {
  const fetched = vi.fn(async (_path: string, _init: RequestInit) => {
    const text = typeof body === 'string' ? body : JSON.stringify(body);
    return new Response(status === 204 ? null : text, { status, headers: { 'Content-Type': type } });
  });
  vi.stubGlobal('fetch', fetched);
  return fetched;
}

/** The error a call ends with. */
const failure = (call: Promise<unknown>) =>
  call.then(
    () => {
      throw new Error('it did not fail');
    },
    (error: unknown) => error,
  );

const PROBLEM = {
  type: 'about:blank',
  title: 'Conflict',
  status: 409,
  code: 'lastOwner',
  detail: 'A workshop needs an owner. Make somebody else owner first.',
};

afterEach(() => {
  vi.unstubAllGlobals();
  whenSignedOut(() => {});
});

describe('the API client', () => {
  it('asks below /api, with cookies of this origin only', async () => {
    const fetched = serverAnswers(200, { name: 'Heron' });
    await expect(api.get('/arms/a1', Thing)).resolves.toEqual({ name: 'Heron' });
    const [path, init] = fetched.mock.calls[0]!;
    expect(path).toBe('/api/arms/a1');
    expect(init.credentials).toBe('same-origin');
    expect(init.body).toBeUndefined();
  });

  it('sends changes as JSON and says so, since the server takes nothing else', async () => {
    const fetched = serverAnswers(200, { name: 'Wren' });
    await api.patch('/arms/a1', { name: 'Wren' }, Thing);
    const [, init] = fetched.mock.calls[0]!;
    expect(init.method).toBe('PATCH');
    expect(new Headers(init.headers).get('Content-Type')).toBe('application/json');
    expect(JSON.parse(String(init.body))).toEqual({ name: 'Wren' });
  });

  it('turns problem details into an error with status, code, words and field errors', async () => {
    const errors = [{ path: 'password', message: 'use at least 10 characters' }];
    serverAnswers(409, { ...PROBLEM, errors }, 'application/problem+json');
    const error = await failure(api.get('/people', Thing));
    expect(error).toBeInstanceOf(ApiError);
    expect(error).toMatchObject({ status: 409, code: 'lastOwner', detail: PROBLEM.detail, errors });
    expect(errorText(error)).toBe(PROBLEM.detail);
  });

  it('says so when a refusal gives no reason that can be read', async () => {
    serverAnswers(500, '<html>Oh dear</html>', 'text/html');
    const error = await failure(api.get('/people', Thing));
    expect(error).toMatchObject({ status: 500, code: 'unknown' });
    expect(errorText(error)).toContain('500');
    expect(errorText(error)).not.toContain('<html>');
  });

  // RFC 9110 §15.6.3–5: the answers of a gateway whose server is away.
  it.each([502, 503, 504])(
    'says that the server does not answer when a proxy says %s in its place',
    async (status) => {
      serverAnswers(status, '<html>Bad gateway</html>', 'text/html');
      const error = await failure(api.get('/people', Thing));
      expect(error).toMatchObject({ status, code: 'offline' });
      expect(errorText(error)).toMatch(/does not answer/);
    },
  );

  it('passes on the words of a server that is only not ready', async () => {
    serverAnswers(503, { ...PROBLEM, status: 503, code: 'notReady', detail: 'The arm is waking up.' });
    expect(errorText(await failure(api.get('/people', Thing)))).toBe('The arm is waking up.');
  });

  it('says that the server does not answer when it cannot be reached', async () => {
    vi.stubGlobal('fetch', async () => {
      throw new TypeError('Failed to fetch');
    });
    const error = await failure(api.get('/people', Thing));
    expect(error).toMatchObject({ status: 0, code: 'offline' });
    expect(errorText(error)).toMatch(/does not answer/);
  });

  it('passes on that a request was called off, instead of calling the server away', async () => {
    const calledOff = new AbortController();
    vi.stubGlobal('fetch', async (_path: string, init: RequestInit) => {
      init.signal?.throwIfAborted();
      throw new Error('was not called off');
    });
    calledOff.abort();
    const error = await failure(api.get('/people', Thing, { signal: calledOff.signal }));
    expect(error).toMatchObject({ name: 'AbortError' });
  });

  it('refuses an answer of another shape instead of passing it on', async () => {
    serverAnswers(200, { name: 7 });
    const error = await failure(api.get('/arms/a1', Thing));
    expect(error).toBeInstanceOf(z.ZodError);
    expect(errorText(error)).toMatch(/not understood/);
  });

  it('takes an empty answer where none is expected', async () => {
    serverAnswers(204, '');
    await expect(api.delete('/invitations/i1')).resolves.toBeUndefined();
  });

  it('tells that we are signed out when the server no longer knows us', async () => {
    const signedOut = vi.fn();
    whenSignedOut(signedOut);
    serverAnswers(401, { ...PROBLEM, status: 401, code: 'notSignedIn', detail: 'Sign in first.' });
    await failure(api.get('/people', Thing));
    expect(signedOut).toHaveBeenCalledOnce();
  });

  it('does not take a wrong password for being signed out', async () => {
    const signedOut = vi.fn();
    whenSignedOut(signedOut);
    serverAnswers(401, { ...PROBLEM, status: 401, code: 'wrongSignIn', detail: 'No.' });
    await failure(api.post('/session', {}, Thing));
    expect(signedOut).not.toHaveBeenCalled();
  });
});
