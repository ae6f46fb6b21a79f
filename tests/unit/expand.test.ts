import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { ArmModel } from '../../shared/arm/model';
import { expandSequence, type PoseForExpansion } from '../../shared/sequence/expand';
import { fingerprint } from '../../shared/sequence/fingerprint';
import { MAX_EXPANDED_STEPS, MAX_NESTING, type Step } from '../../shared/sequence/steps';

/** Expansion reads only the joint count, the gripper and the name. */
const model = { name: 'Heron', joints: [{}, {}, {}], gripper: { opening: 0.038 } } as unknown as ArmModel;
const poses: PoseForExpansion[] = [
  { id: 'a', name: 'Above tray', q: [0.1, 0.2, 0.3], deleted: false },
  { id: 'b', name: 'On scale', q: [0.4, 0.5, 0.6], deleted: false },
  { id: 'gone', name: 'Old perch', q: [0, 0, 0], deleted: true },
  { id: 'short', name: 'Of Dipper', q: [0, 0], deleted: false },
];
const goTo = (id: string, poseId: string): Step => ({ id, kind: 'goTo', poseId, speed: 'easy', settle: 0 });
const again = (id: string, times: number, steps: Step[]): Step => ({ id, kind: 'again', times, steps });

describe('expandSequence', () => {
  it('looks poses up, unrolls repeats and leaves remarks out', () => {
    const { steps, problems } = expandSequence({
      model,
      poses,
      steps: [
        { id: 'r', kind: 'remark', text: 'first the tray' },
        again('loop', 2, [goTo('s1', 'a'), { id: 's2', kind: 'grip', opening: 0.25 }]),
        { id: 'w', kind: 'wait', seconds: 4 },
      ],
    });
    expect(problems).toEqual([]);
    expect(steps.map((s) => [s.kind, s.path])).toEqual([
      ['goTo', '2.1'],
      ['grip', '2.2'],
      ['goTo', '2.1'],
      ['grip', '2.2'],
      ['wait', '3'],
    ]);
    expect(steps[0]).toMatchObject({ q: [0.1, 0.2, 0.3], speed: 0.25, label: 'Above tray', stepId: 's1' });
  });

  it.each([
    ['nope', 'poseMissing'],
    ['gone', 'poseMissing'],
    ['short', 'poseOfOtherArm'],
  ])('attaches a blocking problem to the step whose pose is “%s”', (poseId, code) => {
    const { problems } = expandSequence({ model, poses, steps: [goTo('s1', 'a'), goTo('s2', poseId)] });
    expect(problems).toMatchObject([{ stepId: 's2', path: '2', severity: 'blocks', code }]);
  });

  it('says that a sequence without steps does nothing', () => {
    expect(expandSequence({ model, poses, steps: [] }).problems[0]).toMatchObject({
      code: 'empty',
      severity: 'blocks',
    });
  });

  it('refuses repeats nested too deep, and cycles too long, without unrolling them', () => {
    let deep: Step = goTo('leaf', 'a');
    for (let i = 0; i <= MAX_NESTING; i++) deep = again(`n${i}`, 1000, [deep]);
    const expansion = expandSequence({ model, poses, steps: [deep] });
    expect(expansion.problems.map((p) => p.code)).toContain('tooDeep');
    const long = expandSequence({
      model,
      poses,
      steps: [again('x', 1000, [again('y', 1000, [goTo('s', 'a')])])],
    });
    expect(long.problems.map((p) => p.code)).toEqual(['tooLong']);
    expect(long.steps.length).toBe(MAX_EXPANDED_STEPS);
  });

  it('has as many steps as the repeats multiply to', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 20 }), fc.integer({ min: 1, max: 20 }), (outer, inner) => {
        const { steps } = expandSequence({
          model,
          poses,
          steps: [again('o', outer, [again('i', inner, [goTo('s', 'a')]), goTo('t', 'b')])],
        });
        expect(steps.length).toBe(outer * (inner + 1));
      }),
    );
  });
});

describe('fingerprint', () => {
  const steps = expandSequence({ model, poses, steps: [goTo('s1', 'a'), goTo('s2', 'b')] }).steps;
  it('changes when a pose moves by the smallest amount, and not otherwise', () => {
    const moved = expandSequence({
      model,
      poses: poses.map((p) => (p.id === 'b' ? { ...p, q: [0.4, 0.5, 0.6 + Number.EPSILON] } : p)),
      steps: [goTo('s1', 'a'), goTo('s2', 'b')],
    }).steps;
    expect(fingerprint(steps, model)).toBe(fingerprint(structuredClone(steps), structuredClone(model)));
    expect(fingerprint(moved, model)).not.toBe(fingerprint(steps, model));
  });
});
