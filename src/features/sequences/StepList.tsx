import {
  closestCenter,
  DndContext,
  type DragEndEvent,
  KeyboardSensor,
  PointerSensor,
  useSensor,
  useSensors,
} from '@dnd-kit/core';
import {
  SortableContext,
  sortableKeyboardCoordinates,
  useSortable,
  verticalListSortingStrategy,
} from '@dnd-kit/sortable';
import { CSS } from '@dnd-kit/utilities';
import type { Pose, Rehearsal } from '../../../shared/api/resources';
import type { ArmModel } from '../../../shared/arm/model';
import type { Step } from '../../../shared/sequence/steps';
import { DragIcon, StepKindIcon, WarnIcon } from '../../components/icons';
import {
  copyOf,
  type Draft,
  insertAfter,
  moveIn,
  moveOut,
  moveTo,
  type Row,
  remove,
  replace,
  rows,
  shift,
} from './edit';
import { StepForm } from './StepForm';
import { sentence } from './step-words';

interface Props {
  draft: Draft;
  poses: readonly Pose[];
  model: ArmModel;
  rehearsal: Rehearsal | null;
  editable: boolean;
  chosen: string | null;
  /** The step a run does now or next. */
  running: string | null;
  onChoose: (id: string | null) => void;
  onChange: (draft: Draft) => void;
  newId: () => string;
}

/** The steps, numbered; dragged, or moved by buttons and keys. */
export function StepList(props: Props) {
  const { draft, editable, chosen, onChoose, onChange, newId } = props;
  const all = rows(draft.steps);
  const sensors = useSensors(
    useSensor(PointerSensor, { activationConstraint: { distance: 6 } }),
    useSensor(KeyboardSensor, { coordinateGetter: sortableKeyboardCoordinates }),
  );
  const set = (steps: Step[]) => onChange({ ...draft, steps });
  const onDragEnd = ({ active, over }: DragEndEvent) => {
    if (over) set(moveTo(draft.steps, String(active.id), String(over.id)));
  };
  const onKey = (event: React.KeyboardEvent, row: Row) => {
    if (!editable || event.target !== event.currentTarget) return;
    const { id } = row.step;
    const act: Record<string, () => void> = {
      'Alt+ArrowUp': () => set(shift(draft.steps, id, -1)),
      'Alt+ArrowDown': () => set(shift(draft.steps, id, 1)),
      'Alt+ArrowRight': () => set(moveIn(draft.steps, id)),
      'Alt+ArrowLeft': () => set(moveOut(draft.steps, id)),
      ['Delete']: () => set(remove(draft.steps, id)),
      'Ctrl+d': () => set(insertAfter(draft.steps, id, copyOf(row.step, newId))),
    };
    const run =
      act[`${event.ctrlKey || event.metaKey ? 'Ctrl+' : ''}${event.altKey ? 'Alt+' : ''}${event.key}`];
    if (!run) return;
    event.preventDefault();
    run();
  };
  return (
    <DndContext sensors={sensors} collisionDetection={closestCenter} onDragEnd={onDragEnd}>
      <SortableContext items={all.map((row) => row.step.id)} strategy={verticalListSortingStrategy}>
        <ol className="list" aria-label="Steps">
          {all.map((row) => (
            <StepRow
              key={row.step.id}
              row={row}
              {...props}
              isChosen={chosen === row.step.id}
              onToggle={() => onChoose(chosen === row.step.id ? null : row.step.id)}
              onKeyDown={(event) => onKey(event, row)}
              set={set}
            />
          ))}
        </ol>
      </SortableContext>
    </DndContext>
  );
}

function StepRow({
  row,
  draft,
  poses,
  model,
  rehearsal,
  editable,
  running,
  isChosen,
  onToggle,
  onKeyDown,
  set,
  newId,
}: Props & {
  row: Row;
  isChosen: boolean;
  onToggle: () => void;
  onKeyDown: (event: React.KeyboardEvent) => void;
  set: (steps: Step[]) => void;
}) {
  const { step, path, depth } = row;
  const { attributes, listeners, setNodeRef, setActivatorNodeRef, transform, transition } = useSortable({
    id: step.id,
    disabled: !editable,
  });
  const { lead, about, detail } = sentence(step, poses, model);
  const problem = rehearsal?.problems.find((p) => p.stepId === step.id);
  const seconds = rehearsal?.stepDurations[step.id];
  return (
    <li
      ref={setNodeRef}
      style={{ transform: CSS.Translate.toString(transform), transition, paddingLeft: depth * 34 }}
      className={`st ${depth > 0 ? 'nested' : ''} ${step.kind === 'again' ? 'repeat' : ''} ${isChosen ? 'here' : ''} ${running === step.id ? 'next' : ''}`}
      aria-current={running === step.id ? 'step' : undefined}
    >
      <span className="no">
        {editable && (
          <button
            type="button"
            ref={setActivatorNodeRef}
            className="grab"
            {...attributes}
            {...listeners}
            aria-label={`Move step ${path}`}
          >
            <DragIcon />
          </button>
        )}
        {path}
      </span>
      <span className="gl">
        <StepKindIcon kind={step.kind} />
      </span>
      <button
        type="button"
        className="sx"
        aria-expanded={isChosen}
        aria-label={`Step ${path}: ${lead} ${about} ${detail}`}
        onClick={onToggle}
        onKeyDown={onKeyDown}
      >
        {lead} <b>{about}</b>
        <em>{detail}</em>
      </button>
      <span className="tags">
        {running === step.id && <span className="from">now</span>}
        {problem && (
          <span className="wn" title={problem.message}>
            <WarnIcon />
            {problem.severity === 'blocks' ? 'blocks' : 'tight'}
          </span>
        )}
      </span>
      <span className="tm">
        {step.kind === 'again' ? `× ${step.times}` : seconds !== undefined ? `${seconds.toFixed(1)} s` : ''}
      </span>
      {isChosen && editable && (
        <div className="stepedit">
          <StepForm
            key={step.id}
            step={step}
            poses={poses}
            model={model}
            onChange={(next) => set(replace(draft.steps, next))}
          />
          <div className="line">
            <button type="button" className="btn sm" onClick={() => set(shift(draft.steps, step.id, -1))}>
              Up
            </button>
            <button type="button" className="btn sm" onClick={() => set(shift(draft.steps, step.id, 1))}>
              Down
            </button>
            <button type="button" className="btn sm" onClick={() => set(moveIn(draft.steps, step.id))}>
              Into the repeat above
            </button>
            <button
              type="button"
              className="btn sm"
              disabled={depth === 0}
              onClick={() => set(moveOut(draft.steps, step.id))}
            >
              Out of its repeat
            </button>
            <button
              type="button"
              className="btn sm"
              onClick={() => set(insertAfter(draft.steps, step.id, copyOf(step, newId)))}
            >
              Copy
            </button>
            <button type="button" className="btn sm" onClick={() => set(remove(draft.steps, step.id))}>
              Delete
            </button>
          </div>
        </div>
      )}
    </li>
  );
}
