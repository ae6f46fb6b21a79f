import { request as rawRequest } from 'node:http';
import supertest from 'supertest';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { Problem } from '../../shared/api/resources';
import { PASSWORD, type PlayedServer, startPlayedServer } from '../support/played-server';

let server: PlayedServer;
let cookie: string;
let armId: string;
beforeEach(async () => {
  server = await startPlayedServer();
  const { owner } = await server.team();
  cookie = server.context.sessions.begin(owner.id, '').split(';')[0]!;
  armId = server.heron().id;
});
afterEach(async () => {
  // Whatever came in: the server is still there.
  expect((await server.browser().get('/health')).body).toEqual({ status: 'ok' });
  await server.close();
});

/** A stop with just these headers: it changes something and needs no body. */
const stopWith = (headers: Record<string, string>) =>
  supertest(server.url).post('/api/stop').set(headers).send();

describe('a change from somewhere else', () => {
  it.each([
    ['another site', () => ({ Origin: 'https://elsewhere.example' })],
    ['a sandboxed frame', () => ({ Origin: 'null' })],
    ['a longer name that begins with ours', () => ({ Origin: `${server.url}.elsewhere.example` })],
    ['a name that ends with ours', () => ({ Origin: server.url.replace('localhost', 'evil-localhost') })],
    ['another port of this machine', () => ({ Origin: server.url.replace(/:\d+$/, ':1') })],
    ['the same place over another scheme', () => ({ Origin: server.url.replace('http:', 'https:') })],
    ['a browser that leaves Origin out, from another site', () => ({ 'Sec-Fetch-Site': 'cross-site' })],
    ['a browser that leaves Origin out, from a sister site', () => ({ 'Sec-Fetch-Site': 'same-site' })],
    ['who knows where, with a session', () => ({})],
  ])('is refused: %s', async (_where, headers) => {
    const response = await stopWith({ Cookie: cookie, ...headers() });
    expect(response.body).toMatchObject({ status: 403, code: 'foreignOrigin' });
    expect(server.live.told).toEqual([]);
  });

  it.each([
    ['our page', () => ({ Origin: server.url })],
    [
      'our page by its other loopback name',
      () => {
        const other = server.url.replace('localhost', '127.0.0.1');
        return { Origin: other, Host: other.replace('http://', '') };
      },
    ],
    ['our page in a browser that leaves Origin out', () => ({ 'Sec-Fetch-Site': 'same-origin' })],
  ])('is not refused: %s', async (_where, headers) => {
    expect((await stopWith({ Cookie: cookie, ...headers() })).status).toBe(204);
  });

  it('lets a program without cookie or browser ask, and then wants a sign-in', async () => {
    expect((await stopWith({})).status).toBe(401);
  });

  it.each([
    'text/plain',
    'application/x-www-form-urlencoded',
    'multipart/form-data; boundary=x',
    'application/jsonx',
  ])('takes no %s', async (type) => {
    const response = await supertest(server.url)
      .post('/api/session')
      .set({ Origin: server.url, 'Content-Type': type })
      .send(JSON.stringify({ email: 'owner@tidemill.example', password: PASSWORD }));
    expect(response.body).toMatchObject({ status: 415, code: 'notJson' });
  });
});

describe('the Host header', () => {
  it.each([
    'elsewhere.example',
    'localhost.elsewhere.example',
    '127.0.0.1.elsewhere.example:4310',
    '[::2]:80',
  ])('refuses %s, to which somebody may have pointed a name of theirs', async (host) => {
    const response = await supertest(server.url).get('/api/health').set('Host', host);
    expect(response.body).toMatchObject({ status: 421, code: 'wrongHost' });
  });
  it.each(['localhost', 'LOCALHOST:4310', '127.0.0.1:80', '[::1]:4310'])('answers to %s', async (host) => {
    expect((await supertest(server.url).get('/api/health').set('Host', host)).status).toBe(200);
  });
});

describe('bad input', () => {
  const typed = (text: string) =>
    supertest(server.url)
      .post(`/api/arms/${armId}/poses/typed`)
      .set({ Origin: server.url, Cookie: cookie, 'Content-Type': 'application/json' })
      .send(text);
  const good = '"name":"Perch","q":[0,1,-1,0]';

  it('is recognised against a request that is good', async () => {
    expect((await typed(`{${good}}`)).status).toBe(201);
  });

  it.each([
    ['half a document', '{"name":"Perch"', 400],
    ['no document', '', 400],
    ['a bare number', '5', 400],
    ['null', 'null', 400],
    ['NaN', '{"name":"Perch","q":[NaN,1,-1,0]}', 400],
    ['a number that overflows', '{"name":"Perch","q":[1e999,1,-1,0]}', 400],
    ['null in place of a number', '{"name":"Perch","q":[null,1,-1,0]}', 400],
    ['text in place of a number', '{"name":"Perch","q":["0",1,-1,0]}', 400],
    ['too many joints', '{"name":"Perch","q":[0,1,-1,0,0,0,0,0,0]}', 400],
    ['a field nobody knows', `{${good},"trust":"referenced"}`, 400],
    ['__proto__', `{${good},"__proto__":{"role":"owner"}}`, 400],
    ['constructor.prototype', `{${good},"constructor":{"prototype":{"role":"owner"}}}`, 400],
    ['a name of 10 000 letters', `{"name":"${'a'.repeat(10_000)}","q":[0,1,-1,0]}`, 400],
    ['a name of blanks', '{"name":"   ","q":[0,1,-1,0]}', 400],
    ['lists in lists, 100 000 deep', `{${good},"note":${'['.repeat(100_000)}${']'.repeat(100_000)}}`, 400],
    ['10 MB', `{${good},"note":"${'a'.repeat(10_000_000)}"}`, 413],
  ])('is refused with a reason: %s', async (_what, text, status) => {
    const response = await typed(text);
    expect(response.status).toBe(status);
    expect(response.headers['content-type']).toMatch(/^application\/problem\+json/);
    const problem = Problem.parse(response.body);
    expect(problem.status).toBe(status);
    expect(problem.detail.length).toBeGreaterThan(10);
    // Nothing of the inside, and not the input read back.
    expect(response.text).not.toMatch(/at .*\.[jt]s|node_modules|sqlite|ZodError/i);
    expect(response.text.length).toBeLessThan(2000);
    expect(({} as { role?: string }).role).toBeUndefined();
    expect(server.context.poses.list(armId)).toEqual([]);
  });

  it('is refused in steps nested without end', async () => {
    let step: object = { id: 's', kind: 'wait', seconds: 1 };
    for (let i = 0; i < 2000; i++) step = { id: `a${i}`, kind: 'again', times: 2, steps: [step] };
    const { owner } = Object.fromEntries(server.context.people.list().map((p) => [p.role, p]));
    const response = await server
      .as(owner!)
      .post(`/arms/${armId}/sequences`, { name: 'Deep', steps: [step] });
    expect(response.body).toMatchObject({ status: 400, code: 'tooDeep' });
  });

  it.each([
    '..%2f..%2fetc%2fpasswd',
    '%252e%252e%252f',
    '..%5c..%5c',
    'a%00b',
    'CON%3A',
    'a'.repeat(65),
    '%E0%A4%A',
    "x'%20or%20'1'='1",
  ])('is refused in an address: %s', async (id) => {
    const response = await supertest(server.url).get(`/api/arms/${id}`).set('Cookie', cookie);
    expect(response.status).toBe(400);
    Problem.parse(response.body);
  });

  it('finds nothing at addresses that are not there, also with names that every object has', async () => {
    for (const path of ['/nothing', '/arms/constructor', '/arms/__proto__/poses', '/people']) {
      const method = path === '/people' ? 'delete' : 'get';
      const response = await supertest(server.url)
        [method](`/api${path}`)
        .set({ Cookie: cookie, Origin: server.url });
      expect(response.status).toBe(404);
      Problem.parse(response.body);
    }
    const { owner } = Object.fromEntries(server.context.people.list().map((p) => [p.role, p]));
    const made = await server.as(owner!).post('/arms', { name: 'Odd', startFrom: 'constructor' });
    expect(made.status).toBe(404);
  });

  it('that ends in the middle does no harm', async () => {
    await new Promise<void>((resolve) => {
      const request = rawRequest(`${server.url}/api/session`, {
        method: 'POST',
        headers: { 'Content-Type': 'application/json', 'Content-Length': '500', Origin: server.url },
      });
      request.on('error', () => resolve());
      request.on('close', () => resolve());
      request.write('{"email":"ow', () => request.destroy());
    });
  });

  it('of our own making is answered without its cause, which is logged', async () => {
    server.context.people.list = () => {
      throw new Error('disk I/O error in table people');
    };
    const response = await supertest(server.url).get('/api/people').set('Cookie', cookie);
    expect(response.status).toBe(500);
    expect(Problem.parse(response.body).code).toBe('serverError');
    expect(response.text).not.toMatch(/disk|people|table/);
    expect(server.warnings.join()).toMatch(/a request failed/);
  });
});

describe('every answer', () => {
  it('carries the headers that keep a page from doing what ours does not', async () => {
    const { headers } = await supertest(server.url).get('/api/health');
    const policy = headers['content-security-policy']!;
    for (const directive of [
      "script-src 'self'",
      "object-src 'none'",
      "base-uri 'none'",
      "frame-ancestors 'none'",
    ])
      expect(policy.split(';').map((d) => d.trim())).toContain(directive);
    expect(policy).not.toContain('upgrade-insecure-requests');
    // The socket of this very host and port, and no other.
    expect(policy.split(';')).toContain(`connect-src 'self' ${server.url.replace('http', 'ws')}`);
    expect(headers['x-content-type-options']).toBe('nosniff');
    expect(headers['referrer-policy']).toBe('same-origin');
    expect(headers['access-control-allow-origin']).toBeUndefined();
    expect(headers['strict-transport-security']).toBeUndefined();
    expect(headers['x-powered-by']).toBeUndefined();
  });

  it('is described at /api/openapi.json, each route once', async () => {
    const { body } = await supertest(server.url).get('/api/openapi.json');
    expect(body.openapi).toBe('3.1.0');
    const capture = body.paths['/api/arms/{armId}/poses'].post;
    expect(capture.parameters).toEqual([
      expect.objectContaining({ name: 'armId', in: 'path', required: true }),
    ]);
    expect(capture.requestBody.content['application/json'].schema.properties).toHaveProperty('tags');
    expect(capture.responses['201'].content['application/json'].schema.properties).toHaveProperty('trust');
  });
});
