import { SMTPServer } from 'smtp-server';
import supertest from 'supertest';
import { afterEach, describe, expect, it } from 'vitest';
import { PASSWORD, type PlayedServer, startPlayedServer } from '../support/played-server';

const WEEK_MS = 7 * 24 * 3600_000;
let server: PlayedServer;
afterEach(() => server.close());

describe('the first owner', () => {
  const form = (code: string, email = 'ada@tidemill.example') => ({
    code,
    workshop: 'Tidemill Seed Library',
    name: 'Ada',
    email,
    password: PASSWORD,
  });

  it('needs the code the server prints, typed with or without its groups, and signs in', async () => {
    server = await startPlayedServer();
    const page = server.browser();
    expect((await page.get('/session')).body).toMatchObject({ setupNeeded: true, you: null });
    const wrong = await page.post('/setup', form('0000-0000-0000-0000-0000-0000-0000-0000'));
    expect(wrong.status).toBe(403);
    expect(wrong.body.errors[0].path).toBe('code');
    const code = server.context.setupCode.shown;
    const made = await page.post('/setup', form(` ${code.replaceAll('-', '').toUpperCase()} `));
    expect(made.status).toBe(201);
    expect(made.body).toMatchObject({ setupNeeded: false, workshop: 'Tidemill Seed Library' });
    expect((await page.get('/people')).body).toHaveLength(1);
    expect((await page.get('/people')).body[0]).toMatchObject({ name: 'Ada', role: 'owner' });
  });

  it('has a code of at least 128 bits in groups, another at each start', async () => {
    server = await startPlayedServer();
    const { shown } = server.context.setupCode;
    expect(shown).toMatch(/^([0-9a-f]{4}-)+[0-9a-f]{4}$/);
    expect(shown.replaceAll('-', '').length * 4).toBeGreaterThanOrEqual(128);
    const other = await startPlayedServer();
    expect(other.context.setupCode.shown).not.toBe(shown);
    await other.close();
  });

  it('cannot be made twice, neither later nor at the same moment', async () => {
    server = await startPlayedServer();
    const code = server.context.setupCode.shown;
    const answers = await Promise.all(
      ['ada', 'eve'].map((name) => server.browser().post('/setup', form(code, `${name}@tidemill.example`))),
    );
    expect(answers.map((a) => a.status).sort()).toEqual([201, 409]);
    expect((await server.browser().post('/setup', form(code, 'mal@tidemill.example'))).status).toBe(409);
    expect(server.context.people.list()).toHaveLength(1);
  });

  it.each([
    ['password1234', /common/],
    ['aaaaaaaaaaaa', /common/],
    ['ada.field.99', /e-mail name/],
    ['too short', /10 characters/],
  ])('refuses the password %s and says why', async (password, why) => {
    server = await startPlayedServer();
    const answer = await server.browser().post('/setup', {
      ...form(server.context.setupCode.shown, 'ada.field@tidemill.example'),
      password,
    });
    expect(answer.status).toBe(400);
    expect(answer.body.errors[0].path).toBe('password');
    expect(answer.body.detail).toMatch(why);
  });

  it('lets somebody with a one-letter address choose a password that has the letter', async () => {
    server = await startPlayedServer();
    const { shown } = server.context.setupCode;
    expect((await server.browser().post('/setup', form(shown, 'a@tidemill.example'))).status).toBe(201);
  });
});

const JUNO = { email: 'Juno@tidemill.example', name: 'Juno', role: 'operator' } as const;
/** The secret in the newest mail of the Outbox. */
const secretOf = (s: PlayedServer) => /\/invitation#(\S+)/.exec(s.context.mailer.list()[0]!.body)![1]!;

describe('an invitation', () => {
  it('carries a secret in the fragment of a link, which is stored as a hash only', async () => {
    server = await startPlayedServer({ settings: { publicUrl: 'http://arms.tidemill.example:4310' } });
    const { owner } = await server.team();
    await server.as(owner).post('/invitations', JUNO);
    const token = secretOf(server);
    expect(server.context.mailer.list()[0]!.body).toContain(
      `http://arms.tidemill.example:4310/invitation#${token}`,
    );
    expect(Buffer.from(token, 'base64url').length * 8).toBeGreaterThanOrEqual(128);
    const stored = JSON.stringify(server.context.db.$client.prepare('select * from invitations').all());
    expect(stored).not.toContain(token);
    expect(JSON.stringify(server.context.audit.page())).not.toContain(token);
  });

  it('takes the address of its link from the settings, never from the request', async () => {
    server = await startPlayedServer({
      settings: { publicUrl: 'https://arms.tidemill.example', secure: true },
    });
    const { owner } = await server.team();
    const cookie = server.context.sessions.begin(owner.id, '').split(';')[0]!;
    const made = await supertest(server.url)
      .post('/api/invitations')
      .set({
        Origin: 'https://arms.tidemill.example',
        Host: 'localhost',
        'X-Forwarded-Host': 'evil.example',
        Cookie: cookie,
      })
      .send(JUNO);
    expect(made.status).toBe(201);
    expect(server.context.mailer.list()[0]!.body).toMatch(/https:\/\/arms\.tidemill\.example\/invitation#/);
  });

  it('makes the person it names, with its role, once, however many use it at the same moment', async () => {
    server = await startPlayedServer();
    const { owner } = await server.team();
    await server.as(owner).post('/invitations', JUNO);
    const token = secretOf(server);
    const answers = await Promise.all(
      [1, 2, 3].map(() => server.browser().post('/invitations/accept', { token, password: PASSWORD })),
    );
    expect(answers.map((a) => a.status).sort()).toEqual([201, 410, 410]);
    expect(answers.find((a) => a.status === 201)!.body.you).toMatchObject({
      name: 'Juno',
      role: 'operator',
      email: 'juno@tidemill.example',
    });
    expect((await server.as(owner).get('/invitations')).body).toEqual([]);
  });

  it('stays good when the password was too common', async () => {
    server = await startPlayedServer();
    const { owner } = await server.team();
    await server.as(owner).post('/invitations', JUNO);
    const token = secretOf(server);
    const accept = (password: string) => server.browser().post('/invitations/accept', { token, password });
    expect((await accept('password1234')).status).toBe(400);
    expect((await accept(PASSWORD)).status).toBe(201);
  });

  it('runs out after seven days', async () => {
    server = await startPlayedServer();
    const { owner } = await server.team();
    const boss = server.as(owner);
    await boss.post('/invitations', JUNO);
    const token = secretOf(server);
    server.clock.ms += WEEK_MS - 60_000;
    expect((await server.as(owner).get('/invitations')).body).toHaveLength(1);
    server.clock.ms += 60_000;
    expect((await server.as(owner).get('/invitations')).body).toEqual([]);
    expect((await server.browser().post('/invitations/accept', { token, password: PASSWORD })).status).toBe(
      410,
    );
  });

  it('is void once withdrawn, or once the same address is invited again', async () => {
    server = await startPlayedServer();
    const { owner } = await server.team();
    const boss = server.as(owner);
    const first = (await boss.post('/invitations', JUNO)).body;
    const firstToken = secretOf(server);
    server.clock.ms += 1000;
    const second = (await boss.post('/invitations', { ...JUNO, role: 'teacher' })).body;
    const secondToken = secretOf(server);
    expect(secondToken).not.toBe(firstToken);
    const accept = (token: string) =>
      server.browser().post('/invitations/accept', { token, password: PASSWORD });
    expect((await accept(firstToken)).status).toBe(410);
    expect((await boss.delete(`/invitations/${first.id}`)).status).toBe(404);
    expect((await boss.delete(`/invitations/${second.id}`)).status).toBe(204);
    expect((await accept(secondToken)).status).toBe(410);
  });

  it('is refused for somebody who is on the team already', async () => {
    server = await startPlayedServer();
    const { owner } = await server.team();
    const answer = await server
      .as(owner)
      .post('/invitations', { ...JUNO, email: 'Teacher@tidemill.example' });
    expect(answer.body).toMatchObject({ status: 409, code: 'emailTaken' });
  });
});

describe('mail', () => {
  it('leaves over SMTP, and then its secret is not kept in the Outbox', async () => {
    const received: string[] = [];
    const smtp = new SMTPServer({
      authOptional: true,
      disabledCommands: ['STARTTLS'],
      onData(stream, _session, done) {
        let text = '';
        stream.on('data', (chunk: Buffer) => {
          text += chunk.toString();
        });
        stream.on('end', () => {
          received.push(text);
          done();
        });
      },
    });
    const port = await new Promise<number>((resolve) => {
      const listening = smtp.listen(0, '127.0.0.1', () =>
        resolve((listening.address() as { port: number }).port),
      );
    });
    try {
      server = await startPlayedServer({ settings: { smtpUrl: `smtp://127.0.0.1:${port}` } });
      const { owner } = await server.team();
      const boss = server.as(owner);
      await boss.post('/invitations', { ...JUNO, name: 'Juno\r\nBcc: everybody@elsewhere.example' });
      expect(received).toHaveLength(1);
      // Quoted-printable breaks long lines with "=".
      const text = received[0]!.replaceAll('=\r\n', '').replaceAll('=3D', '=');
      expect(text).toMatch(/^To: juno@tidemill\.example\r$/im);
      expect(text.split('\r\n\r\n')[0]).not.toMatch(/^Bcc:/im);
      const token = /\/invitation#(\S+)/.exec(text)![1]!;
      const kept = (await boss.get('/outbox')).body[0];
      expect(kept.sent).toBe(true);
      expect(kept.body).not.toContain(token);
      expect((await server.browser().post('/invitations/accept', { token, password: PASSWORD })).status).toBe(
        201,
      );
    } finally {
      await new Promise<void>((resolve) => smtp.close(() => resolve()));
    }
  });

  it('waits in the Outbox when the mail server is not there', async () => {
    // Port 9 is "discard": nothing listens there.
    server = await startPlayedServer({ settings: { smtpUrl: 'smtp://127.0.0.1:9' } });
    const { owner } = await server.team();
    const boss = server.as(owner);
    expect((await boss.post('/invitations', JUNO)).status).toBe(201);
    expect((await boss.get('/outbox')).body[0]).toMatchObject({ to: 'juno@tidemill.example', sent: false });
    expect(
      (await server.browser().post('/invitations/accept', { token: secretOf(server), password: PASSWORD }))
        .status,
    ).toBe(201);
    expect(server.warnings.join()).toMatch(/could not be sent/);
  });
});

describe('the team', () => {
  it('keeps at least one owner, also when two owners demote each other at once', async () => {
    server = await startPlayedServer();
    const { owner, builder } = await server.team();
    const lone = await server.as(owner).patch(`/people/${owner.id}`, { role: 'builder' });
    expect(lone.body).toMatchObject({ status: 409, code: 'lastOwner' });
    expect((await server.as(owner).patch(`/people/${owner.id}`, { disabled: true })).status).toBe(409);
    server.context.people.change(builder.id, { role: 'owner' });
    const [one, two] = [server.as(owner), server.as(builder)];
    const answers = await Promise.all([
      one.patch(`/people/${builder.id}`, { role: 'observer' }),
      two.patch(`/people/${owner.id}`, { role: 'observer' }),
    ]);
    // Whoever comes first ends the other's session.
    expect(answers.map((a) => a.status).sort()).toEqual([200, 401]);
    expect(server.context.people.list().filter((p) => p.role === 'owner' && !p.disabled)).toHaveLength(1);
  });

  it('does not count a disabled owner', async () => {
    server = await startPlayedServer();
    const { owner, builder } = await server.team();
    server.context.people.change(builder.id, { role: 'owner' });
    server.context.people.change(builder.id, { disabled: true });
    expect((await server.as(owner).patch(`/people/${owner.id}`, { role: 'teacher' })).status).toBe(409);
  });
});
