import { readdirSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { actWords, mentions } from '../../src/features/team/act-words';

/** Every act that the server's sources write into the log. */
function actsOfTheServer(): string[] {
  const folder = new URL('../../server/', import.meta.url);
  const acts = new Set<string>();
  for (const file of readdirSync(folder, { recursive: true, encoding: 'utf8' })) {
    if (!file.endsWith('.ts')) continue;
    const source = readFileSync(new URL(file, folder), 'utf8');
    for (const [, act] of source.matchAll(/\bact: '([\w.]+)'/g)) acts.add(act!);
    for (const [, call] of source.matchAll(/\baudit\(([^;]*?)\);/gs))
      for (const [, act] of call!.matchAll(/'([a-z]+\.[a-zA-Z]+|fault|nudge|stop|reference|setup)'/g))
        acts.add(act!);
  }
  return [...acts];
}

const ENTRY = {
  who: 'Juno',
  act: 'control.take',
  arm: 'Heron',
  detail: 'turn 4',
  result: 'done',
  address: '127.0.0.1',
};

describe('the audit log in words', () => {
  it('finds acts to name at all', () => {
    expect(actsOfTheServer()).toEqual(expect.arrayContaining(['stop', 'session.signIn', 'control.take']));
  });

  it.each(actsOfTheServer())('has words for %s', (act) => {
    expect(actWords(act)).not.toBe(act);
  });

  it('shows an act it does not know as it is', () => {
    expect(actWords('moon.paint')).toBe('moon.paint');
  });
});

describe('finding entries', () => {
  it.each(['', '  ', 'juno', 'TOOK control', 'heron juno', 'turn 4', '127.0', 'control.take'])(
    'finds Juno taking control of Heron by %j',
    (typed) => {
      expect(mentions(ENTRY, typed)).toBe(true);
    },
  );

  it.each(['ines', 'juno wren', 'null'])('does not find it by %j', (typed) => {
    expect(mentions({ ...ENTRY, arm: 'Heron' }, typed)).toBe(false);
    expect(mentions({ ...ENTRY, arm: null }, typed)).toBe(false);
  });
});
