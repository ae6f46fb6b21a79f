import type { Step } from '../../../shared/sequence/steps';
import {
  copyOf,
  findRow,
  freshIds,
  insertStep,
  moveBy,
  moveIn,
  moveOut,
  moveStep,
  type Place,
  removeStep,
  replaceStep,
  rowsOf,
} from './step-tree';

/** What is edited: all that a version keeps. */
export interface Draft {
  name: string;
  note: string;
  steps: Step[];
}

/** Editing as a pure state: the draft, what led to it, what was undone, and the step in hand. */
export interface Editing {
  draft: Draft;
  past: readonly Draft[];
  future: readonly Draft[];
  selected: string | null;
  /** Changes under the same key in a row (letters typed into one field) are undone as one. */
  mergeKey: string | null;
}

type WithoutId<S> = S extends Step ? Omit<S, 'id'> : never;
/** A step that has no name yet. */
export type NewStep = WithoutId<Step>;

export type Edit =
  /** Puts a step after the one in hand (into it, if that is an empty "again"), or at `place`. */
  | { type: 'insert'; step: Step; place?: Place }
  /** The same for new steps, which get their names here; all are undone together. */
  | { type: 'insertAll'; steps: readonly NewStep[] }
  | { type: 'change'; step: Step; mergeKey?: string }
  | { type: 'label'; name?: string; note?: string }
  | { type: 'remove'; id: string }
  | { type: 'duplicate'; id: string }
  | { type: 'moveUp' | 'moveDown' | 'moveIn' | 'moveOut'; id: string }
  | { type: 'moveTo'; id: string; place: Place }
  | { type: 'select'; id: string | null }
  | { type: 'undo' | 'redo' }
  /** Another version's content takes over; it can be undone. */
  | { type: 'replace'; draft: Draft }
  /** Starts anew from what is saved (or from a draft that was kept). */
  | { type: 'reset'; draft: Draft };

/** So many changes can be undone. */
const MOST_PAST = 200;

export const startEditing = (draft: Draft): Editing => ({
  draft,
  past: [],
  future: [],
  selected: null,
  mergeKey: null,
});

export const sameDraft = (a: Draft, b: Draft): boolean =>
  a.name === b.name && a.note === b.note && JSON.stringify(a.steps) === JSON.stringify(b.steps);

/** Where a new step goes: after the step in hand, or at the end. */
export function placeAfter(steps: readonly Step[], selected: string | null): Place {
  const row = selected === null ? null : findRow(steps, selected);
  if (!row) return { parentId: null, index: steps.length };
  if (row.step.kind === 'again' && row.step.steps.length === 0) return { parentId: row.step.id, index: 0 };
  return { parentId: row.parentId, index: row.index + 1 };
}

export function edit(editing: Editing, action: Edit): Editing {
  const { draft, selected } = editing;
  const { steps } = draft;
  switch (action.type) {
    case 'insert':
      return changed(
        editing,
        insertStep(steps, action.step, action.place ?? placeAfter(steps, selected)),
        action.step.id,
      );
    case 'insertAll': {
      const ids = freshIds(steps, action.steps.length);
      const added = action.steps.map((step, i) => ({ ...step, id: ids[i]! }) as Step);
      const { parentId, index } = placeAfter(steps, selected);
      const next = added.reduce<Step[]>(
        (list, step, i) => insertStep(list, step, { parentId, index: index + i }),
        [...steps],
      );
      return changed(editing, next, ids.at(-1) ?? selected);
    }
    case 'change':
      return changed(editing, replaceStep(steps, action.step), action.step.id, action.mergeKey ?? null);
    case 'label': {
      const next = { ...draft, name: action.name ?? draft.name, note: action.note ?? draft.note };
      return withDraft(editing, next, selected, action.name === undefined ? 'note' : 'name');
    }
    case 'remove':
      return changed(editing, removeStep(steps, action.id), neighbourOf(steps, action.id));
    case 'duplicate': {
      const row = findRow(steps, action.id);
      if (!row) return editing;
      const copy = copyOf(steps, row.step);
      return changed(
        editing,
        insertStep(steps, copy, { parentId: row.parentId, index: row.index + 1 }),
        copy.id,
      );
    }
    case 'moveUp':
      return changed(editing, moveBy(steps, action.id, -1), action.id);
    case 'moveDown':
      return changed(editing, moveBy(steps, action.id, 1), action.id);
    case 'moveIn':
      return changed(editing, moveIn(steps, action.id), action.id);
    case 'moveOut':
      return changed(editing, moveOut(steps, action.id), action.id);
    case 'moveTo':
      return changed(editing, moveStep(steps, action.id, action.place), action.id);
    case 'select':
      return { ...editing, selected: action.id, mergeKey: null };
    case 'undo':
      return undo(editing);
    case 'redo':
      return redo(editing);
    case 'replace':
      return withDraft(editing, action.draft, null, null);
    case 'reset':
      return startEditing(action.draft);
  }
}

/** The row that takes over when one goes: the one above it, else the one below. */
function neighbourOf(steps: readonly Step[], id: string): string | null {
  const left = rowsOf(removeStep(steps, id));
  const at = rowsOf(steps).findIndex((row) => row.step.id === id);
  return (left[at - 1] ?? left[at])?.step.id ?? null;
}

function changed(
  editing: Editing,
  steps: Step[] | null,
  selected: string | null,
  mergeKey: string | null = null,
): Editing {
  if (steps === null) return editing;
  return withDraft(editing, { ...editing.draft, steps }, selected, mergeKey);
}

function withDraft(
  editing: Editing,
  draft: Draft,
  selected: string | null,
  mergeKey: string | null,
): Editing {
  if (sameDraft(draft, editing.draft)) return { ...editing, selected };
  const merges = mergeKey !== null && mergeKey === editing.mergeKey;
  return {
    draft,
    past: merges ? editing.past : [...editing.past, editing.draft].slice(-MOST_PAST),
    future: [],
    selected,
    mergeKey,
  };
}

/** The step in hand stays in hand if it is still there. */
const stillThere = (draft: Draft, selected: string | null): string | null =>
  selected !== null && findRow(draft.steps, selected) ? selected : null;

function undo(editing: Editing): Editing {
  const draft = editing.past.at(-1);
  if (!draft) return editing;
  return {
    draft,
    past: editing.past.slice(0, -1),
    future: [editing.draft, ...editing.future],
    selected: stillThere(draft, editing.selected),
    mergeKey: null,
  };
}

function redo(editing: Editing): Editing {
  const [draft, ...future] = editing.future;
  if (!draft) return editing;
  return {
    draft,
    past: [...editing.past, editing.draft],
    future,
    selected: stillThere(draft, editing.selected),
    mergeKey: null,
  };
}
