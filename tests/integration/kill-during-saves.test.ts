import { type ChildProcess, execFileSync, spawn } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import Sqlite from 'better-sqlite3';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { seededRandom } from '../../shared/kinematics';

const ROUNDS = 50;
/**
 * The server as it is shipped (up in a second), built from today's sources and never from an older dist;
 * inside the project, where it finds its packages.
 */
const built = 'node_modules/.cache/elbowroom-kill-during-saves';
const folder = mkdtempSync(join(tmpdir(), 'elbowroom-kill-'));
let child: ChildProcess | null = null;
afterAll(() => {
  child?.kill('SIGKILL');
  rmSync(folder, { recursive: true, force: true });
  rmSync(built, { recursive: true, force: true });
});
beforeAll(() => {
  execFileSync(process.execPath, ['server/build.mjs', built]);
});

/** A server process of its own on this data folder; resolves with its address. */
function start(): Promise<string> {
  return new Promise((resolve, reject) => {
    const started = spawn(process.execPath, [join(built, 'server', 'index.js'), '--demo'], {
      env: { ...process.env, PORT: '0', ELBOWROOM_DATA: folder },
      stdio: ['ignore', 'pipe', 'pipe'],
    });
    child = started;
    let heard = '';
    const hear = (data: Buffer) => {
      heard += String(data);
      const url = /Elbowroom is at (\S+)/.exec(heard)?.[1];
      if (url) resolve(url);
    };
    started.stdout!.on('data', hear);
    started.stderr!.on('data', hear);
    started.once('exit', () => reject(new Error(`the server ended before it was ready: ${heard}`)));
  });
}

const gone = (dying: ChildProcess) =>
  new Promise<void>((resolve) =>
    dying.exitCode !== null || dying.signalCode ? resolve() : dying.once('exit', () => resolve()),
  );

describe('kill -9 of the server during saves', () => {
  it(`loses nothing that was answered as saved, ${ROUNDS} times`, async () => {
    const random = seededRandom(5);
    const answered: string[] = [];
    let cookie = '';
    let armId = '';
    for (let round = 0; round < ROUNDS; round++) {
      const url = await start();
      const headers = () => ({
        'Content-Type': 'application/json',
        Origin: url,
        ...(cookie ? { Cookie: cookie } : {}),
      });
      if (!cookie) {
        const { email, password } = (
          JSON.parse(readFileSync(join(folder, 'demo-sign-ins.json'), 'utf8')) as {
            role: string;
            email: string;
            password: string;
          }[]
        ).find((s) => s.role === 'teacher')!;
        const reply = await fetch(`${url}/api/session`, {
          method: 'POST',
          headers: headers(),
          body: JSON.stringify({ email, password }),
        });
        cookie = reply.headers.get('set-cookie')!.split(';')[0]!;
        const arms = (await (await fetch(`${url}/api/arms`, { headers: headers() })).json()) as {
          id: string;
          name: string;
        }[];
        armId = arms.find((arm) => arm.name === 'Heron')!.id;
      }
      // A stream of saves; the kill falls somewhere into it.
      const killAfter = 1 + Math.floor(random() * 12);
      let saves = 0;
      const save = async (k: number): Promise<void> => {
        const name = `r${round}-${k}`;
        try {
          const reply = await fetch(`${url}/api/arms/${armId}/poses/typed`, {
            method: 'POST',
            headers: headers(),
            body: JSON.stringify({ name, q: [0.1, 1, -1, 0] }),
          });
          if (reply.status === 201) answered.push(name);
        } catch {
          return;
        }
        if (++saves === killAfter) child!.kill('SIGKILL');
        await save(k + 1);
      };
      await Promise.all([save(0), save(1000)]);
      await gone(child!);
    }
    const db = new Sqlite(join(folder, 'elbowroom.sqlite'), { readonly: true });
    const kept = new Set(db.prepare('select name from poses').pluck().all() as string[]);
    const halves = db
      .prepare(
        'select count(*) from poses p where not exists (select 1 from pose_revisions r where r.pose_id = p.id and r.revision = p.revision)',
      )
      .pluck()
      .get();
    expect(db.pragma('integrity_check', { simple: true })).toBe('ok');
    db.close();
    expect(answered.length).toBeGreaterThan(ROUNDS);
    expect(answered.filter((name) => !kept.has(name))).toEqual([]);
    expect(halves).toBe(0);
  }, 400_000);
});
