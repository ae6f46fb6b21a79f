import type { Step, StepKind } from '../../../shared/sequence/steps';
import { MAX_NESTING } from '../../../shared/sequence/steps';

/** Pure editing of a step list. Every function returns a new list, or the same one when there is nothing to do. */

/** A step as a row: where it is, its number as people read it. */
export interface Row {
  step: Step;
  path: string;
  depth: number;
  parentId: string | null;
  index: number;
  siblings: number;
}

export function rows(steps: readonly Step[], prefix = '', depth = 0, parentId: string | null = null): Row[] {
  return steps.flatMap((step, index) => {
    const path = `${prefix}${index + 1}`;
    const row: Row = { step, path, depth, parentId, index, siblings: steps.length };
    return step.kind === 'again' ? [row, ...rows(step.steps, `${path}.`, depth + 1, step.id)] : [row];
  });
}

/** Changes the list that holds a parent's steps; null is the top. */
function within(steps: Step[], parentId: string | null, change: (list: Step[]) => Step[]): Step[] {
  if (parentId === null) return change(steps);
  return steps.map((step) => {
    if (step.kind !== 'again') return step;
    if (step.id === parentId) return { ...step, steps: change(step.steps) };
    return { ...step, steps: within(step.steps, parentId, change) };
  });
}

const rowOf = (steps: readonly Step[], id: string) => rows(steps).find((row) => row.step.id === id) ?? null;

export function insertAfter(steps: Step[], afterId: string | null, step: Step): Step[] {
  const row = afterId === null ? null : rowOf(steps, afterId);
  if (!row) return [...steps, step];
  return within(steps, row.parentId, (list) => [
    ...list.slice(0, row.index + 1),
    step,
    ...list.slice(row.index + 1),
  ]);
}

export function remove(steps: Step[], id: string): Step[] {
  const row = rowOf(steps, id);
  return row ? within(steps, row.parentId, (list) => list.filter((step) => step.id !== id)) : steps;
}

export function replace(steps: Step[], step: Step): Step[] {
  const row = rowOf(steps, step.id);
  return row
    ? within(steps, row.parentId, (list) => list.map((old) => (old.id === step.id ? step : old)))
    : steps;
}

/** One place up or down among its siblings. */
export function shift(steps: Step[], id: string, by: 1 | -1): Step[] {
  const row = rowOf(steps, id);
  if (!row) return steps;
  const to = row.index + by;
  if (to < 0 || to >= row.siblings) return steps;
  return within(steps, row.parentId, (list) => {
    const next = [...list];
    const [moved] = next.splice(row.index, 1);
    next.splice(to, 0, moved!);
    return next;
  });
}

/** How deep repeats nest in this step, itself included. */
function depthOf(step: Step): number {
  return step.kind === 'again' ? 1 + Math.max(0, ...step.steps.map(depthOf)) : 0;
}

/** Into the repeat just above it. */
export function moveIn(steps: Step[], id: string): Step[] {
  const row = rowOf(steps, id);
  if (!row || row.index === 0 || row.depth + 1 + depthOf(row.step) > MAX_NESTING) return steps;
  const parent = row.parentId === null ? null : rowOf(steps, row.parentId)?.step;
  const list = parent?.kind === 'again' ? parent.steps : steps;
  const above = list[row.index - 1];
  if (above?.kind !== 'again') return steps;
  return within(remove(steps, id), above.id, (inside) => [...inside, row.step]);
}

/** Out of its repeat, to just behind it. */
export function moveOut(steps: Step[], id: string): Step[] {
  const row = rowOf(steps, id);
  if (!row || row.parentId === null) return steps;
  return insertAfter(remove(steps, id), row.parentId, row.step);
}

/** By dragging: before the row it was dropped on (or after it, coming from above), in that row's list. */
export function moveTo(steps: Step[], id: string, overId: string): Step[] {
  if (id === overId) return steps;
  const all = rows(steps);
  const from = all.findIndex((row) => row.step.id === id);
  const over = all.findIndex((row) => row.step.id === overId);
  const row = all[from];
  const target = all[over];
  if (!row || !target) return steps;
  // A repeat cannot be dropped into itself.
  if (rows([row.step]).some((inner) => inner.step.id === overId)) return steps;
  if (target.depth + depthOf(row.step) > MAX_NESTING) return steps;
  const without = remove(steps, id);
  const at = rowOf(without, overId)!;
  const place = from < over ? at.index + 1 : at.index;
  return within(without, at.parentId, (list) => [...list.slice(0, place), row.step, ...list.slice(place)]);
}

/** A new step with its usual values. `newId` gives ids that are new in this sequence. */
export function newStep(kind: StepKind, newId: () => string, poseId: string): Step {
  const id = newId();
  switch (kind) {
    case 'goTo':
      return { id, kind, poseId, speed: 'easy', settle: 0 };
    case 'grip':
      return { id, kind, opening: 0 };
    case 'wait':
      return { id, kind, seconds: 1 };
    case 'again':
      return { id, kind, times: 2, steps: [] };
    case 'remark':
      return { id, kind, text: '' };
  }
}

/** A copy with fresh ids all the way down. */
export function copyOf(step: Step, newId: () => string): Step {
  const id = newId();
  return step.kind === 'again'
    ? { ...step, id, steps: step.steps.map((s) => copyOf(s, newId)) }
    : { ...step, id };
}

/** What is edited. */
export interface Draft {
  name: string;
  note: string;
  steps: Step[];
}

/** The draft with everything that can be undone and done again. */
export interface History {
  past: Draft[];
  now: Draft;
  future: Draft[];
}

const MOST_UNDO = 100;

export const begin = (draft: Draft): History => ({ past: [], now: draft, future: [] });
export function edit(history: History, next: Draft): History {
  if (JSON.stringify(next) === JSON.stringify(history.now)) return history;
  return { past: [...history.past, history.now].slice(-MOST_UNDO), now: next, future: [] };
}
export function undo(history: History): History {
  const now = history.past.at(-1);
  if (!now) return history;
  return { past: history.past.slice(0, -1), now, future: [history.now, ...history.future] };
}
export function redo(history: History): History {
  const [now, ...future] = history.future;
  if (!now) return history;
  return { past: [...history.past, history.now], now, future };
}
