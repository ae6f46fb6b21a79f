import { DropdownMenu } from 'radix-ui';
import { useEffect } from 'react';
import type { ArmModel } from '../../../shared/arm/model';
import { STEP_KINDS, type StepKind } from '../../../shared/sequence/steps';
import { ChevronDown, StepKindIcon } from '../../components/icons';
import type { Edit, Editing } from './editing';
import { usualStep } from './new-steps';
import { KIND_WORDS } from './step-words';

const KIND_DOES: Record<StepKind, string> = {
  goTo: 'all joints together to a pose',
  straightTo: 'the tool on a straight line to a pose',
  grip: 'open or close the gripper',
  wait: 'stand still for a time',
  again: 'repeat the steps inside',
  remark: 'words for people',
};

const needsPose = (kind: StepKind) => kind === 'goTo' || kind === 'straightTo';

/** Ctrl+Z and Ctrl+Shift+Z (or Ctrl+Y), except while somebody types: there the letters come back first. */
function useUndoKeys(dispatch: (action: Edit) => void): void {
  useEffect(() => {
    const onKey = (event: KeyboardEvent) => {
      if (!(event.ctrlKey || event.metaKey) || event.altKey) return;
      const key = event.key.toLowerCase();
      if (key !== 'z' && key !== 'y') return;
      if ((event.target as Element | null)?.closest?.('input:not([type=checkbox]), textarea')) return;
      event.preventDefault();
      dispatch({ type: key === 'y' || event.shiftKey ? 'redo' : 'undo' });
    };
    window.addEventListener('keydown', onKey);
    return () => window.removeEventListener('keydown', onKey);
  }, [dispatch]);
}

/** What changes the list: add, undo, redo, record, save. */
export function EditTools({
  editing,
  dispatch,
  model,
  firstPose,
  saveable,
  saving,
  recording,
  onSave,
  onRecord,
}: {
  editing: Editing;
  dispatch: (action: Edit) => void;
  model: ArmModel;
  /** The pose a new Go to begins with; null when there is none yet. */
  firstPose: string | null;
  saveable: boolean;
  saving: boolean;
  recording: boolean;
  onSave: () => void;
  onRecord: () => void;
}) {
  useUndoKeys(dispatch);
  const kinds = STEP_KINDS.filter((kind) => kind !== 'grip' || model.gripper !== null);
  return (
    <>
      <DropdownMenu.Root modal={false}>
        <DropdownMenu.Trigger className="btn sm">
          Add step
          <ChevronDown />
        </DropdownMenu.Trigger>
        <DropdownMenu.Portal>
          <DropdownMenu.Content className="menu-list steps-menu" align="start" sideOffset={4}>
            {kinds.map((kind) => (
              <DropdownMenu.Item
                key={kind}
                disabled={needsPose(kind) && firstPose === null}
                onSelect={() => dispatch({ type: 'insertAll', steps: [usualStep(kind, firstPose ?? '')] })}
              >
                <StepKindIcon kind={kind} />
                {KIND_WORDS[kind]}
                <span className="note">
                  {needsPose(kind) && firstPose === null ? 'capture a pose first' : KIND_DOES[kind]}
                </span>
              </DropdownMenu.Item>
            ))}
          </DropdownMenu.Content>
        </DropdownMenu.Portal>
      </DropdownMenu.Root>
      <button type="button" className="btn sm" aria-pressed={recording} onClick={onRecord}>
        {recording ? 'Stop recording' : 'Record'}
      </button>
      <button
        type="button"
        className="btn sm"
        disabled={editing.past.length === 0}
        title="Ctrl + Z"
        onClick={() => dispatch({ type: 'undo' })}
      >
        Undo
      </button>
      <button
        type="button"
        className="btn sm"
        disabled={editing.future.length === 0}
        title="Ctrl + Shift + Z"
        onClick={() => dispatch({ type: 'redo' })}
      >
        Redo
      </button>
      <button type="button" className="btn sm ink" disabled={!saveable || saving} onClick={onSave}>
        Save
      </button>
    </>
  );
}
