import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { MAX_NESTING, type Step } from '../../shared/sequence/steps';
import { type Edit, type Editing, edit, startEditing } from '../../src/features/sequences/editing';
import {
  copyOf,
  dropPlace,
  freshIds,
  heightOf,
  moveStep,
  rowsOf,
} from '../../src/features/sequences/step-tree';

const wait = (id: string, seconds = 1): Step => ({ id, kind: 'wait', seconds });
const again = (id: string, steps: Step[], times = 2): Step => ({ id, kind: 'again', times, steps });
const draftOf = (steps: Step[]) => ({ name: 'Trial', note: '', steps });
const ids = (steps: readonly Step[]) => rowsOf(steps).map((row) => row.step.id);
/** The shape in brackets: a b [c d] e. */
const shape = (steps: readonly Step[]): string =>
  steps.map((step) => (step.kind === 'again' ? `${step.id}[${shape(step.steps)}]` : step.id)).join(' ');

/** Trees of steps with names of their own, repeats nested at most two deep so that there is room to move. */
const trees = (): fc.Arbitrary<Step[]> => {
  const leaf = fc.constantFrom<'wait' | 'remark'>('wait', 'remark');
  const { tree } = fc.letrec<{ tree: unknown[]; node: unknown }>((tie) => ({
    tree: fc.array(tie('node'), { maxLength: 4 }),
    node: fc.oneof({ maxDepth: 2, withCrossShrink: true }, leaf, fc.record({ steps: tie('tree') })),
  }));
  return tree.map((raw) => {
    let n = 0;
    const build = (list: unknown[]): Step[] =>
      list.map((node) => {
        const id = `t${n++}`;
        if (node === 'wait') return wait(id);
        if (node === 'remark') return { id, kind: 'remark', text: '' };
        return again(id, build((node as { steps: unknown[] }).steps));
      });
    return build(raw);
  });
};

/** An edit that names its step by a number, to be taken modulo what is there. */
const acts = fc.record({
  type: fc.constantFrom(
    'insert',
    'remove',
    'duplicate',
    'moveUp',
    'moveDown',
    'moveIn',
    'moveOut',
    'change',
    'drag',
  ),
  at: fc.nat(30),
  to: fc.nat(30),
  depth: fc.nat(4),
});
type Act = { type: string; at: number; to: number; depth: number };

function toEdit(editing: Editing, act: Act): Edit | null {
  const { steps } = editing.draft;
  const rows = rowsOf(steps);
  if (act.type === 'insert') return { type: 'insert', step: wait(freshIds(steps, 1)[0]!) };
  const row = rows[act.at % Math.max(1, rows.length)];
  if (!row) return null;
  const { id } = row.step;
  if (act.type === 'change')
    return row.step.kind === 'wait' ? { type: 'change', step: wait(id, act.to) } : null;
  if (act.type === 'drag') {
    const place = dropPlace(steps, id, rows[act.to % rows.length]!.step.id, act.depth);
    return place ? { type: 'moveTo', id, place } : null;
  }
  return { type: act.type, id } as Edit;
}

const playAll = (editing: Editing, list: readonly Act[]) =>
  list.reduce((at, act) => {
    const action = toEdit(at, act);
    return action ? edit(at, action) : at;
  }, editing);

describe('editing a sequence', () => {
  it('undoes everything back to the start and redoes it to the end', () => {
    fc.assert(
      fc.property(trees(), fc.array(acts, { maxLength: 25 }), (steps, list) => {
        const start = startEditing(draftOf(steps));
        const end = playAll(start, list);
        let back = end;
        for (let n = 0; n < 40; n++) back = edit(back, { type: 'undo' });
        expect(back.draft).toEqual(start.draft);
        let again = back;
        for (let n = 0; n < 40; n++) again = edit(again, { type: 'redo' });
        expect(again.draft).toEqual(end.draft);
      }),
    );
  });

  it('never names two steps alike and never nests deeper than repeats may', () => {
    fc.assert(
      fc.property(trees(), fc.array(acts, { maxLength: 40 }), (steps, list) => {
        const { draft } = playAll(startEditing(draftOf(steps)), list);
        const names = ids(draft.steps);
        expect(new Set(names).size).toBe(names.length);
        expect(Math.max(0, ...draft.steps.map(heightOf))).toBeLessThanOrEqual(MAX_NESTING);
      }),
    );
  });

  it('loses and invents no step by moving', () => {
    const moves = acts.filter((act) => act.type.startsWith('move') || act.type === 'drag');
    fc.assert(
      fc.property(trees(), fc.array(moves, { maxLength: 30 }), (steps, list) => {
        const { draft } = playAll(startEditing(draftOf(steps)), list);
        expect(ids(draft.steps).sort()).toEqual(ids(steps).sort());
      }),
    );
  });

  it('comes back by the opposite move: up and down, in and out', () => {
    fc.assert(
      fc.property(trees(), fc.nat(30), (steps, at) => {
        const id = ids(steps)[at % Math.max(1, ids(steps).length)];
        if (!id) return;
        const start = startEditing(draftOf(steps));
        const down = edit(start, { type: 'moveDown', id });
        if (down.past.length === 1) expect(edit(down, { type: 'moveUp', id }).draft).toEqual(start.draft);
        const row = rowsOf(steps).find((r) => r.step.id === id)!;
        const inside = edit(start, { type: 'moveIn', id });
        const above = rowsOf(steps).find((r) => r.parentId === row.parentId && r.index === row.index - 1);
        // Into the repeat above and out again leads to the very place; into the one below leads past it.
        if (inside.past.length === 1 && above?.step.kind === 'again')
          expect(edit(inside, { type: 'moveOut', id }).draft).toEqual(start.draft);
      }),
    );
  });

  it('moves a step into the repeat above it, else into the one below, and out again', () => {
    const steps = [wait('a'), again('r', [wait('b')]), wait('c')];
    const into = (id: string) =>
      shape(edit(startEditing(draftOf(steps)), { type: 'moveIn', id }).draft.steps);
    expect(into('c')).toBe('a r[b c]');
    expect(into('a')).toBe('r[a b] c');
    expect(into('b')).toBe('a r[b] c');
    const out = edit(startEditing(draftOf(steps)), { type: 'moveOut', id: 'b' });
    expect(shape(out.draft.steps)).toBe('a r[] b c');
  });

  it('undoes letters typed into one field as one change', () => {
    let at = startEditing(draftOf([wait('a')]));
    for (const seconds of [2, 25, 250])
      at = edit(at, { type: 'change', step: wait('a', seconds), mergeKey: 'a.seconds' });
    at = edit(at, { type: 'select', id: null });
    at = edit(at, { type: 'change', step: wait('a', 7), mergeKey: 'a.seconds' });
    expect(edit(at, { type: 'undo' }).draft.steps).toEqual([wait('a', 250)]);
    expect(edit(edit(at, { type: 'undo' }), { type: 'undo' }).draft.steps).toEqual([wait('a', 1)]);
  });

  it('forgets what was undone once something new is done', () => {
    const one = edit(startEditing(draftOf([])), { type: 'insert', step: wait('a') });
    const other = edit(edit(one, { type: 'undo' }), { type: 'insert', step: wait('b') });
    expect(shape(edit(other, { type: 'redo' }).draft.steps)).toBe('b');
  });

  it('puts a new step after the one in hand, or into it when it is an empty repeat', () => {
    const steps = [wait('a'), again('r', [wait('b')]), again('e', [])];
    const insertedAt = (selected: string | null) => {
      const at = edit(startEditing(draftOf(steps)), { type: 'select', id: selected });
      return shape(edit(at, { type: 'insert', step: wait('n') }).draft.steps);
    };
    expect(insertedAt('a')).toBe('a n r[b] e[]');
    expect(insertedAt('b')).toBe('a r[b n] e[]');
    expect(insertedAt('e')).toBe('a r[b] e[n]');
    expect(insertedAt(null)).toBe('a r[b] e[] n');
  });

  it('takes the row above in hand when the one in hand is deleted', () => {
    const at = edit(startEditing(draftOf([wait('a'), wait('b'), wait('c')])), { type: 'remove', id: 'b' });
    expect(at.selected).toBe('a');
    expect(edit(startEditing(draftOf([wait('a')])), { type: 'remove', id: 'a' }).selected).toBeNull();
  });

  // shared/sequence/expand.ts blocks a fifth level, so the editor does not offer it.
  it('refuses to nest repeats deeper than four, counting what the moved one holds', () => {
    const three = again('p', [again('q', [again('r', [wait('a')])])]);
    const move = (...steps: Step[]) =>
      edit(startEditing(draftOf(steps)), { type: 'moveIn', id: steps[1]!.id }).past.length;
    expect(move(three, again('one', [wait('b')]))).toBe(1);
    expect(move(three, again('two', [again('x', [again('y', [again('z', [])])])]))).toBe(0);
  });

  it('copies a repeat with new names for all that is in it', () => {
    const repeat = again('r', [wait('s1', 3), again('q', [wait('b', 4)])]);
    const copy = copyOf([repeat], repeat);
    const shared = ids([repeat]).filter((id) => ids([copy]).includes(id));
    expect(shared).toEqual([]);
    const bare = (step: Step): unknown =>
      step.kind === 'again' ? [step.times, step.steps.map(bare)] : { ...step, id: '' };
    expect(bare(copy)).toEqual(bare(repeat));
  });
});

describe('dropping a dragged step', () => {
  // What a person sees: the rows without what the dragged repeat holds, one row moved to another's place.
  it('puts the row where it was dropped, among the rows as drawn', () => {
    fc.assert(
      fc.property(trees(), fc.nat(30), fc.nat(30), fc.nat(4), (steps, a, b, depth) => {
        const rows = rowsOf(steps);
        const active = rows[a % Math.max(1, rows.length)];
        const over = rows[b % Math.max(1, rows.length)];
        if (!active || !over) return;
        const place = dropPlace(steps, active.step.id, over.step.id, depth);
        if (!place) return;
        const moved = moveStep(steps, active.step.id, place);
        if (!moved) return;
        const held = new Set(ids([active.step]));
        held.delete(active.step.id);
        const drawn = ids(steps).filter((id) => !held.has(id));
        const expected = drawn.filter((id) => id !== active.step.id);
        expected.splice(drawn.indexOf(over.step.id), 0, active.step.id);
        expect(ids(moved).filter((id) => !held.has(id))).toEqual(expected);
      }),
    );
  });

  it('lets the sideways distance choose between inside the repeat and after it', () => {
    const steps = [again('r', [wait('a')]), wait('b')];
    const at = (depth: number) => shape(moveStep(steps, 'b', dropPlace(steps, 'b', 'b', depth)!)!);
    expect(at(0)).toBe('r[a] b');
    expect(at(1)).toBe('r[a b]');
    expect(at(3)).toBe('r[a b]');
  });

  it('refuses to put a repeat into itself', () => {
    const steps = [again('r', [wait('a')]), wait('b')];
    expect(dropPlace(steps, 'r', 'a', 1)).toBeNull();
  });
});
