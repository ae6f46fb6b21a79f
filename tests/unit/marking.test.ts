import { describe, expect, it } from 'vitest';
import type { Pose } from '../../shared/api/resources';
import { DEMO_ARMS } from '../../shared/arm/demo-arms';
import { degToRad } from '../../shared/arm/units';
import type { Step } from '../../shared/sequence/steps';
import { keep, readKept } from '../../src/features/sequences/kept-draft';
import { leftAt, samePlace, whatMarkAdds } from '../../src/features/sequences/marking';
import { firstDoing } from '../../src/features/sequences/RunBar';
import { freeName } from '../../src/features/sequences/SequencesPage';

const { heron } = DEMO_ARMS;
const at = (...degrees: number[]) => degrees.map(degToRad);
const pose = (id: string, q: number[]) => ({ id, name: id, q }) as Pose;
const goTo = (id: string, poseId: string): Step => ({ id, kind: 'goTo', poseId, speed: 'easy', settle: 0 });
const grip = (id: string, opening: number): Step => ({ id, kind: 'grip', opening });

const tray = pose('tray', at(18, 52, -78, -64));
const scale = pose('scale', at(-35, 55, -84, -61));
const mark = (
  now: { q: number[]; opening: number | null },
  steps: Step[],
  grippedAtStart: number | null = 1,
) =>
  whatMarkAdds({
    model: heron,
    now,
    poses: [tray, scale],
    left: leftAt(steps, null, [tray, scale]),
    grippedAtStart,
  });

describe('a mark', () => {
  it('adds a Go to at a new place, and to the pose that is there already', () => {
    expect(mark({ q: at(0, 80, -85, -85), opening: 1 }, [])).toEqual([{ kind: 'goTo', pose: null }]);
    expect(mark({ q: [...tray.q], opening: 1 }, [])).toEqual([{ kind: 'goTo', pose: tray }]);
  });

  it('adds only a Grip when only the fingers moved', () => {
    expect(mark({ q: [...tray.q], opening: 0.36 }, [goTo('s1', 'tray')])).toEqual([
      { kind: 'grip', opening: 0.36 },
    ]);
  });

  it('goes there first and grips then, when both changed', () => {
    expect(mark({ q: [...scale.q], opening: 0.9 }, [goTo('s1', 'tray'), grip('s2', 0.36)])).toEqual([
      { kind: 'goTo', pose: scale },
      { kind: 'grip', opening: 0.9 },
    ]);
  });

  it('adds nothing where the steps leave the arm', () => {
    expect(mark({ q: [...tray.q], opening: 0.36 }, [grip('s1', 0.36), goTo('s2', 'tray')])).toEqual([]);
  });

  it('adds no Grip for an arm without a gripper', () => {
    expect(mark({ q: [...tray.q], opening: null }, [goTo('s1', 'tray')], null)).toEqual([]);
  });

  it('takes 0.05° for the same place and 0.06° for another', () => {
    const moved = (degrees: number) => tray.q.map((v, i) => (i === 2 ? v + degToRad(degrees) : v));
    expect(samePlace(heron, tray.q, moved(0.0499))).toBe(true);
    expect(samePlace(heron, tray.q, moved(0.06))).toBe(false);
  });
});

describe('where steps leave the arm', () => {
  const repeat: Step = { id: 'r', kind: 'again', times: 2, steps: [goTo('a', 'scale'), grip('b', 0.2)] };
  const steps = [goTo('s', 'tray'), repeat, grip('e', 0.7)];
  it('counts all that a repeat holds when asked after the repeat', () => {
    expect(leftAt(steps, 'r', [tray, scale])).toEqual({ q: scale.q, opening: 0.2 });
    expect(leftAt(steps, 'a', [tray, scale])).toEqual({ q: scale.q, opening: null });
    expect(leftAt(steps, 's', [tray, scale])).toEqual({ q: tray.q, opening: null });
    expect(leftAt(steps, null, [tray, scale])).toEqual({ q: scale.q, opening: 0.7 });
  });
  it('does not know the place of a pose that is gone', () => {
    expect(leftAt([goTo('s', 'gone')], null, [tray]).q).toBeNull();
  });
});

describe('the step a run begins with', () => {
  it('is the first that does something', () => {
    const remark: Step = { id: 'w', kind: 'remark', text: '' };
    expect(firstDoing(remark)).toBeNull();
    const inner: Step = { id: 'i', kind: 'again', times: 2, steps: [remark, grip('g', 0)] };
    expect(firstDoing({ id: 'o', kind: 'again', times: 1, steps: [remark, inner] })?.id).toBe('g');
    expect(firstDoing({ id: 'o', kind: 'again', times: 1, steps: [remark] })).toBeNull();
  });
});

describe('a new sequence', () => {
  it('gets the first number that is free', () => {
    expect(freeName([])).toBe('Sequence 1');
    expect(freeName([{ name: 'Sequence 1' }, { name: 'Weigh' }, { name: 'Sequence 3' }])).toBe('Sequence 2');
  });
});

describe('an unsaved draft', () => {
  const memory = (refuse = false): Storage => {
    const map = new Map<string, string>();
    return {
      getItem: (key: string) => map.get(key) ?? null,
      setItem: (key: string, value: string) => {
        if (refuse) throw new DOMException('full', 'QuotaExceededError');
        map.set(key, value);
      },
      removeItem: (key: string) => map.delete(key),
    } as unknown as Storage;
  };
  const draft = { name: '', note: 'half done', steps: [goTo('s1', 'tray')] };

  it('comes back as it was, even without a name', () => {
    const store = memory();
    expect(keep(store, 'heron', 'seq', draft, 4, 1000)).toBe(true);
    expect(readKept(store, 'heron', 'seq')).toEqual({ baseVersion: 4, savedAtMs: 1000, draft });
    expect(readKept(store, 'wren', 'seq')).toBeNull();
  });

  it('is said to be lost when the browser has no room', () => {
    expect(keep(memory(true), 'heron', 'seq', draft, 4, 1000)).toBe(false);
  });

  it('is left alone when it is not one of ours', () => {
    const store = memory();
    store.setItem('elbowroom.draft.heron.seq', '{"draft":{"steps":[{"kind":"jump"}]}}');
    expect(readKept(store, 'heron', 'seq')).toBeNull();
    store.setItem('elbowroom.draft.heron.seq', 'not json');
    expect(readKept(store, 'heron', 'seq')).toBeNull();
  });
});
