import { type AgainStep, MAX_NESTING, type Step } from '../../../shared/sequence/steps';

/** Pure changes to a list of steps in which "again" holds steps of its own. Nothing is changed in place. */

/** A step as one row of the list. */
export interface StepRow {
  step: Step;
  /** Its number as people read it: "3.2". */
  path: string;
  /** 0 at the top, one more inside each "again". */
  depth: number;
  /** The "again" it sits in, or null at the top. */
  parentId: string | null;
  /** Place among its siblings, from 0. */
  index: number;
  /** Last of its siblings. */
  last: boolean;
}

/** Where a step is put: inside this "again" (null: at the top), before the sibling that is now at `index`. */
export interface Place {
  parentId: string | null;
  index: number;
}

/** Every step in reading order. */
export function rowsOf(steps: readonly Step[]): StepRow[] {
  const rows: StepRow[] = [];
  const visit = (list: readonly Step[], prefix: string, depth: number, parentId: string | null) => {
    for (const [index, step] of list.entries()) {
      const path = `${prefix}${index + 1}`;
      rows.push({ step, path, depth, parentId, index, last: index === list.length - 1 });
      if (step.kind === 'again') visit(step.steps, `${path}.`, depth + 1, step.id);
    }
  };
  visit(steps, '', 0, null);
  return rows;
}

export const findRow = (steps: readonly Step[], id: string): StepRow | null =>
  rowsOf(steps).find((row) => row.step.id === id) ?? null;

/** The list that `parentId` names, replaced by what `change` makes of it. */
function changeList(
  steps: readonly Step[],
  parentId: string | null,
  change: (list: readonly Step[]) => Step[],
): Step[] {
  if (parentId === null) return change(steps);
  return steps.map((step) =>
    step.kind !== 'again'
      ? step
      : step.id === parentId
        ? { ...step, steps: change(step.steps) }
        : { ...step, steps: changeList(step.steps, parentId, change) },
  );
}

const listOf = (steps: readonly Step[], parentId: string | null): readonly Step[] => {
  if (parentId === null) return steps;
  const parent = findRow(steps, parentId)?.step;
  return parent?.kind === 'again' ? parent.steps : [];
};

export function insertStep(steps: readonly Step[], step: Step, { parentId, index }: Place): Step[] {
  return changeList(steps, parentId, (list) => [...list.slice(0, index), step, ...list.slice(index)]);
}

export function removeStep(steps: readonly Step[], id: string): Step[] {
  const row = findRow(steps, id);
  return row ? changeList(steps, row.parentId, (list) => list.filter((step) => step.id !== id)) : [...steps];
}

export function replaceStep(steps: readonly Step[], step: Step): Step[] {
  const row = findRow(steps, step.id);
  return row
    ? changeList(steps, row.parentId, (list) => list.map((other) => (other.id === step.id ? step : other)))
    : [...steps];
}

/** How many levels of "again" the step brings along: 0 for a plain step, 1 for an "again" of plain steps. */
export function heightOf(step: Step): number {
  return step.kind === 'again' ? 1 + Math.max(0, ...step.steps.map(heightOf)) : 0;
}

const contains = (step: Step, id: string): boolean =>
  step.id === id || (step.kind === 'again' && step.steps.some((inner) => contains(inner, id)));

/** How many "again" the list of this parent lies inside of. */
const depthIn = (steps: readonly Step[], parentId: string | null): number =>
  parentId === null ? 0 : (findRow(steps, parentId)?.depth ?? 0) + 1;

/** Whether the step may be put there: not into itself, not deeper than repeats may nest. */
export function fits(steps: readonly Step[], step: Step, parentId: string | null): boolean {
  if (parentId !== null && contains(step, parentId)) return false;
  return depthIn(steps, parentId) + heightOf(step) <= MAX_NESTING;
}

/** Takes a step out and puts it elsewhere; `place` is counted without the step itself. Null when it does not fit. */
export function moveStep(steps: readonly Step[], id: string, place: Place): Step[] | null {
  const step = findRow(steps, id)?.step;
  if (!step || !fits(steps, step, place.parentId)) return null;
  return insertStep(removeStep(steps, id), step, place);
}

/** One place further up or down among its siblings. Null at the end of the list. */
export function moveBy(steps: readonly Step[], id: string, by: 1 | -1): Step[] | null {
  const row = findRow(steps, id);
  if (!row) return null;
  const index = row.index + by;
  if (index < 0 || index >= listOf(steps, row.parentId).length) return null;
  return moveStep(steps, id, { parentId: row.parentId, index });
}

/** Into the "again" just above it (as its last step), or, when there is none, the one just below (as its first). */
export function moveIn(steps: readonly Step[], id: string): Step[] | null {
  const row = findRow(steps, id);
  if (!row) return null;
  const siblings = listOf(steps, row.parentId);
  const isAgain = (step: Step | undefined): step is AgainStep => step?.kind === 'again';
  const above = siblings[row.index - 1];
  if (isAgain(above)) return moveStep(steps, id, { parentId: above.id, index: above.steps.length });
  const below = siblings[row.index + 1];
  return isAgain(below) ? moveStep(steps, id, { parentId: below.id, index: 0 }) : null;
}

/** Out of its "again", to just below it. Null at the top. */
export function moveOut(steps: readonly Step[], id: string): Step[] | null {
  const row = findRow(steps, id);
  const parent = row?.parentId ? findRow(steps, row.parentId) : null;
  return parent ? moveStep(steps, id, { parentId: parent.parentId, index: parent.index + 1 }) : null;
}

/** Names nobody uses yet, the smallest numbers first: s1, s2 … */
export function freshIds(steps: readonly Step[], count: number): string[] {
  const taken = new Set(rowsOf(steps).map((row) => row.step.id));
  const ids: string[] = [];
  for (let n = 1; ids.length < count; n++) if (!taken.has(`s${n}`)) ids.push(`s${n}`);
  return ids;
}

/** A copy with names of its own, "again" included. */
export function copyOf(steps: readonly Step[], step: Step): Step {
  const ids = freshIds(steps, rowsOf([step]).length);
  const rename = (original: Step): Step => {
    const id = ids.shift()!;
    return original.kind === 'again'
      ? { ...original, id, steps: original.steps.map(rename) }
      : { ...original, id };
  };
  return rename(step);
}

/**
 * Where a dragged row lands. The list is drawn without what the dragged "again" holds; the row takes the place
 * of `overId`, and `depth` (as far as the pointer went sideways) chooses the list when several end there.
 */
export function dropPlace(steps: readonly Step[], id: string, overId: string, depth: number): Place | null {
  const all = rowsOf(steps);
  const step = all.find((row) => row.step.id === id)?.step;
  if (!step || (overId !== id && contains(step, overId))) return null;
  const rows = all.filter((row) => row.step.id === id || !contains(step, row.step.id));
  const from = rows.findIndex((row) => row.step.id === id);
  const to = rows.findIndex((row) => row.step.id === overId);
  const rest = rows.filter((row) => row.step.id !== id);
  if (from < 0 || to < 0) return null;
  // Neighbours once the row sits at index `to`.
  const above = rest[to - 1];
  const below = rest[to];
  const deepest = above ? above.depth + (above.step.kind === 'again' ? 1 : 0) : 0;
  const shallowest = below?.depth ?? 0;
  const wanted = Math.min(deepest, Math.max(shallowest, depth));
  if (!above || wanted === 0) return { parentId: null, index: countBefore(rest, to, null) };
  const parentId = wanted > above.depth ? above.step.id : ancestorAt(rest, above, wanted);
  return { parentId, index: countBefore(rest, to, parentId) };
}

/** The list, at this depth, that `row` lies in. */
function ancestorAt(rows: readonly StepRow[], row: StepRow, depth: number): string | null {
  let at: StepRow | undefined = row;
  while (at && at.depth > depth) at = rows.find((other) => other.step.id === at!.parentId);
  return at?.parentId ?? null;
}

const countBefore = (rows: readonly StepRow[], to: number, parentId: string | null): number =>
  rows.slice(0, to).filter((row) => row.parentId === parentId).length;
