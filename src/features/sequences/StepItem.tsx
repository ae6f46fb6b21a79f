import { useSortable } from '@dnd-kit/sortable';
import { CSS } from '@dnd-kit/utilities';
import type { KeyboardEvent } from 'react';
import type { RehearsalProblem } from '../../../shared/api/resources';
import { DragIcon, FaultIcon, StepKindIcon, WarnIcon } from '../../components/icons';
import { durationText } from '../../components/when';
import { StepForm } from './StepForm';
import { INDENT, type StepListProps } from './step-list-props';
import { moveBy, moveIn, moveOut, type StepRow } from './step-tree';
import { sentence } from './step-words';

/** One row: number, glyph, sentence, quiet details, warning, time; in hand it opens its fields and tools. */
export function StepItem({
  row,
  ends,
  steps,
  poses,
  model,
  rehearsal,
  editable,
  running,
  isSelected,
  dispatch,
  onKeyDown,
}: StepListProps & {
  row: StepRow;
  ends: number;
  isSelected: boolean;
  onKeyDown: (event: KeyboardEvent) => void;
}) {
  const { step, path, depth } = row;
  const { attributes, listeners, setNodeRef, setActivatorNodeRef, transform, transition, isDragging } =
    useSortable({ id: step.id, disabled: !editable });
  const { lead, about, detail } = sentence(step, poses, model);
  const problem = worst(rehearsal?.problems.filter((p) => p.stepId === step.id) ?? []);
  const now = running?.stepId === step.id ? running.word : null;
  return (
    <li
      ref={setNodeRef}
      data-step={step.id}
      style={{ transform: CSS.Translate.toString(transform), transition, paddingLeft: depth * INDENT }}
      className={`st ${step.kind === 'again' ? 'rep' : ''} ${isSelected ? 'picked' : ''} ${now ? 'here' : ''} ${isDragging ? 'lifted' : ''}`}
      aria-current={now ? 'step' : undefined}
    >
      <Brackets depth={depth} ends={ends} opens={step.kind === 'again' && step.steps.length > 0} />
      <span className="no">
        {editable && (
          <button
            type="button"
            ref={setActivatorNodeRef}
            className="grab"
            {...attributes}
            {...listeners}
            aria-label={`Drag step ${path}`}
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
        aria-expanded={editable ? isSelected : undefined}
        aria-pressed={editable ? undefined : isSelected}
        aria-label={`Step ${path}: ${[lead, about, detail].filter(Boolean).join(' ')}${problem ? `. ${problem.message}` : ''}`}
        onClick={() => dispatch({ type: 'select', id: isSelected ? null : step.id })}
        onKeyDown={onKeyDown}
      >
        {lead} {about && <b>{about}</b>}
        {detail && <em className={step.kind === 'remark' ? 'said' : ''}>{detail}</em>}
      </button>
      <span className="mk">
        {now && <span className="from">{now}</span>}
        {problem && <ProblemTag problem={problem} />}
      </span>
      <span className="tm">{timeOf(step.id, rehearsal, step.kind === 'again' ? step.times : null)}</span>
      {isSelected && editable && (
        <div className="stepedit">
          <StepForm
            step={step}
            poses={poses}
            model={model}
            onChange={(next, field) =>
              dispatch({ type: 'change', step: next, mergeKey: field && `${step.id}.${field}` })
            }
          />
          <StepTools row={row} steps={steps} dispatch={dispatch} />
        </div>
      )}
    </li>
  );
}

function ProblemTag({ problem }: { problem: RehearsalProblem }) {
  const blocks = problem.severity === 'blocks';
  return (
    <span className={`wn ${blocks ? 'bad' : ''}`} title={problem.message}>
      {blocks ? <FaultIcon /> : <WarnIcon />}
      {blocks ? 'blocks' : problem.code === 'tight' ? 'tight' : 'look'}
    </span>
  );
}

const worst = (problems: readonly RehearsalProblem[]): RehearsalProblem | null =>
  problems.find((p) => p.severity === 'blocks') ?? problems[0] ?? null;

function timeOf(id: string, rehearsal: StepListProps['rehearsal'], times: number | null): string {
  if (times !== null) return `× ${times}`;
  const seconds = rehearsal?.stepDurations[id];
  return seconds === undefined ? '' : durationText(seconds);
}

/** The lines at the left of what repeats, closed at top and bottom. */
function Brackets({ depth, ends, opens }: { depth: number; ends: number; opens: boolean }) {
  return (
    <>
      {Array.from({ length: depth }, (_, level) => (
        <i
          key={level}
          className={`br ${level >= depth - ends ? 'end' : ''}`}
          style={{ left: (level + 1) * INDENT - 2 }}
        />
      ))}
      {opens && <i className="br top" style={{ left: (depth + 1) * INDENT - 2 }} />}
    </>
  );
}

/** What the keys do, as buttons. Those that would change nothing are off. */
function StepTools({ row, steps, dispatch }: Pick<StepListProps, 'steps' | 'dispatch'> & { row: StepRow }) {
  const { id } = row.step;
  const tool = (
    word: string,
    type: 'moveUp' | 'moveDown' | 'moveIn' | 'moveOut' | 'duplicate' | 'remove',
    keys: string,
    possible: boolean,
  ) => (
    <button
      type="button"
      className="btn sm"
      disabled={!possible}
      title={keys}
      onClick={() => dispatch({ type, id })}
    >
      {word}
    </button>
  );
  return (
    <div className="line" role="group" aria-label={`Step ${row.path}`}>
      {tool('Up', 'moveUp', 'Alt + arrow up', moveBy(steps, id, -1) !== null)}
      {tool('Down', 'moveDown', 'Alt + arrow down', moveBy(steps, id, 1) !== null)}
      {tool('Into repeat', 'moveIn', 'Alt + arrow right', moveIn(steps, id) !== null)}
      {tool('Out of repeat', 'moveOut', 'Alt + arrow left', moveOut(steps, id) !== null)}
      {tool('Copy', 'duplicate', 'Ctrl + D', true)}
      {tool('Delete', 'remove', 'Delete', true)}
    </div>
  );
}
