import {
  type Announcements,
  closestCenter,
  DndContext,
  type DragEndEvent,
  KeyboardSensor,
  PointerSensor,
  useSensor,
  useSensors,
} from '@dnd-kit/core';
import { SortableContext, sortableKeyboardCoordinates, verticalListSortingStrategy } from '@dnd-kit/sortable';
import { type KeyboardEvent, useEffect, useMemo, useRef, useState } from 'react';
import type { Edit } from './editing';
import { StepItem } from './StepItem';
import { INDENT, type StepListProps } from './step-list-props';
import { dropPlace, rowsOf, type StepRow } from './step-tree';

/** Esc is Stop and nothing else, so a picked-up step is put back by Backspace. */
const DRAG_KEYS = { start: ['Space', 'Enter'], end: ['Space', 'Enter'], cancel: ['Backspace'] };
const INSTRUCTIONS =
  'Press Space to pick the step up, the arrow keys to move it, Space to put it down, Backspace to put it back.';

/** The steps, numbered, repeats bracketed like a dimension; dragged, or moved by keys and buttons. */
export function StepList(props: StepListProps) {
  const { steps, selected, dispatch, editable } = props;
  const list = useRef<HTMLOListElement>(null);
  const [dragging, setDragging] = useState<string | null>(null);
  const all = useMemo(() => rowsOf(steps), [steps]);
  // What a dragged repeat holds travels with it and is not drawn meanwhile.
  const drawn = useMemo(() => {
    const held = all.find((row) => row.step.id === dragging)?.step;
    const inside = held ? new Set(rowsOf([held]).map((row) => row.step.id)) : new Set<string>();
    return all.filter((row) => row.step.id === dragging || !inside.has(row.step.id));
  }, [all, dragging]);
  const sensors = useSensors(
    useSensor(PointerSensor, { activationConstraint: { distance: 6 } }),
    useSensor(KeyboardSensor, { coordinateGetter: sortableKeyboardCoordinates, keyboardCodes: DRAG_KEYS }),
  );

  // The step in hand is seen, and after a key has moved or deleted a row the keyboard stays with it.
  const follow = useRef(false);
  useEffect(() => {
    if (selected === null) return;
    const row = rowElement(list.current, selected);
    row?.scrollIntoView?.({ block: 'nearest' });
    if (follow.current) row?.querySelector<HTMLElement>('.sx')?.focus({ preventScroll: true });
    follow.current = false;
  }, [selected]);

  const onDragEnd = ({ active, over, delta }: DragEndEvent) => {
    setDragging(null);
    const row = all.find(({ step }) => step.id === active.id);
    if (!over || !row) return;
    const depth = Math.max(0, row.depth + Math.round(delta.x / INDENT));
    const place = dropPlace(steps, row.step.id, String(over.id), depth);
    if (place) dispatch({ type: 'moveTo', id: row.step.id, place });
  };

  const onKey = (event: KeyboardEvent, row: StepRow) => {
    const action = keyAction(event, row.step.id, editable);
    if (action === 'above' || action === 'below') {
      const at = all.indexOf(row) + (action === 'above' ? -1 : 1);
      const next = all[at]?.step.id;
      if (next === undefined) return;
      rowElement(list.current, next)?.querySelector<HTMLElement>('.sx')?.focus();
    } else if (action) {
      follow.current = action.type === 'remove' || action.type === 'duplicate';
      dispatch(action);
    } else return;
    event.preventDefault();
  };

  return (
    <DndContext
      sensors={sensors}
      collisionDetection={closestCenter}
      accessibility={{
        announcements: announcementsFor(all),
        screenReaderInstructions: { draggable: INSTRUCTIONS },
      }}
      onDragStart={({ active }) => setDragging(String(active.id))}
      onDragCancel={() => setDragging(null)}
      onDragEnd={onDragEnd}
    >
      <SortableContext items={drawn.map((row) => row.step.id)} strategy={verticalListSortingStrategy}>
        <ol className="list" aria-label="Steps" ref={list}>
          {drawn.map((row) => (
            <StepItem
              key={row.step.id}
              row={row}
              ends={endsAfter(all, row)}
              {...props}
              isSelected={selected === row.step.id}
              onKeyDown={(event) => onKey(event, row)}
            />
          ))}
        </ol>
      </SortableContext>
    </DndContext>
  );
}

const rowElement = (list: HTMLElement | null, id: string): HTMLElement | null =>
  [...(list?.querySelectorAll<HTMLElement>('[data-step]') ?? [])].find((row) => row.dataset.step === id) ??
  null;

/** How many brackets end with this row: those of the repeats it is the very last row of. */
function endsAfter(all: readonly StepRow[], row: StepRow): number {
  const next = all[all.indexOf(row) + 1];
  return Math.max(0, row.depth - (next?.depth ?? 0));
}

function keyAction(event: KeyboardEvent, id: string, editable: boolean): Edit | 'above' | 'below' | null {
  const { key, altKey } = event;
  if (!altKey && key === 'ArrowUp') return 'above';
  if (!altKey && key === 'ArrowDown') return 'below';
  if (!editable) return null;
  if (altKey && key === 'ArrowUp') return { type: 'moveUp', id };
  if (altKey && key === 'ArrowDown') return { type: 'moveDown', id };
  if (altKey && key === 'ArrowRight') return { type: 'moveIn', id };
  if (altKey && key === 'ArrowLeft') return { type: 'moveOut', id };
  if (key === 'Delete') return { type: 'remove', id };
  if ((event.ctrlKey || event.metaKey) && key.toLowerCase() === 'd') return { type: 'duplicate', id };
  return null;
}

function announcementsFor(all: readonly StepRow[]): Announcements {
  const name = (id: string | number) => `step ${all.find((row) => row.step.id === id)?.path ?? ''}`;
  return {
    onDragStart: ({ active }) => `Picked up ${name(active.id)}.`,
    onDragOver: ({ active, over }) =>
      over ? `${name(active.id)} is over ${name(over.id)}.` : `${name(active.id)} is over no step.`,
    onDragEnd: ({ active, over }) =>
      over ? `${name(active.id)} was put at ${name(over.id)}.` : `${name(active.id)} was put back.`,
    onDragCancel: ({ active }) => `${name(active.id)} was put back.`,
  };
}
