import './sequences.css';
import { useCallback, useMemo, useState } from 'react';
import { useSearchParams } from 'react-router-dom';
import type { Arm, Sequence } from '../../../shared/api/resources';
import { may } from '../../../shared/team/roles';
import { ApiError } from '../../api/client';
import { usePoses } from '../../api/poses';
import { useRehearsal, useSaveSequence } from '../../api/sequences';
import { Message } from '../../components/Message';
import { toast } from '../../components/toast';
import { useArmState, useHello } from '../../live/use-live';
import { DraftMessages } from './DraftMessages';
import { EditTools } from './EditTools';
import type { Edit } from './editing';
import { RecordPanel } from './RecordPanel';
import { RehearsalPanel } from './RehearsalPanel';
import { RunBar } from './RunBar';
import { SequenceHead } from './SequenceHead';
import { StepList } from './StepList';
import { findRow } from './step-tree';
import { useSequenceDraft } from './use-sequence-draft';
import { VersionsDialog } from './VersionsDialog';

/**
 * A sequence: its steps, its rehearsal (or the arm, while recording), and the run.
 *
 * @param newest - the newest version; what is edited
 * @param old - an older version to look at instead, or null
 */
export function SequenceEditor({ arm, newest, old }: { arm: Arm; newest: Sequence; old: Sequence | null }) {
  const poses = usePoses(arm.id);
  const teaches = may(useHello()?.you.role ?? 'observer', 'sequence.edit');
  const [, setSearch] = useSearchParams();
  const draft = useSequenceDraft(arm.id, newest);
  const { editing } = draft;
  const [recording, setRecording] = useState(false);
  const [versionsOpen, setVersionsOpen] = useState(false);
  const save = useSaveSequence(arm.id, newest.id);
  const [oldSelected, setOldSelected] = useState<string | null>(null);
  const sequence = old ?? newest;
  const editable = teaches && old === null;
  const dirty = old === null && draft.dirty;
  const shown = old ?? (editable ? editing.draft : newest);
  const selected = editable ? editing.selected : oldSelected;
  const dispatch = useCallback(
    (action: Edit) => {
      if (editable) draft.dispatch(action);
      else if (action.type === 'select') setOldSelected(action.id);
    },
    [editable, draft.dispatch],
  );
  const rehearsal = useRehearsal(arm.id, sequence.id, sequence.shownVersion, true).data ?? null;
  const run = useArmState((state) =>
    state?.run?.sequenceId === newest.id ? { stepId: state.run.stepId, phase: state.run.phase } : null,
  );
  const running = useMemo(
    () =>
      run && {
        stepId: run.stepId,
        word: run.phase === 'running' || run.phase === 'heldRunning' ? 'now' : 'next',
      },
    [run],
  );
  const conflict = save.error instanceof ApiError && save.error.code === 'changedMeanwhile';
  const saveDraft = (baseVersion: number) =>
    save.mutate(
      { ...editing.draft, name: editing.draft.name.trim(), baseVersion },
      {
        onSuccess: (saved) => {
          draft.load({ name: saved.name, note: saved.note, steps: saved.steps }, saved.version);
          toast(`Saved as version ${saved.version}.`);
        },
      },
    );
  const showNewest = () => setSearch({}, { replace: true });

  return (
    <main className="sheet seq">
      <section className="pane steps" aria-label="Sequence">
        <SequenceHead
          arm={arm}
          sequence={sequence}
          shown={shown}
          dirty={dirty}
          dispatch={editable ? dispatch : null}
        />
        <div className="toolsline">
          {editable ? (
            <EditTools
              editing={editing}
              dispatch={dispatch}
              model={arm.model}
              firstPose={poses.data?.[0]?.id ?? null}
              saveable={dirty && editing.draft.name.trim() !== ''}
              saving={save.isPending}
              recording={recording}
              onSave={() => saveDraft(draft.baseVersion)}
              onRecord={() => setRecording(!recording)}
            />
          ) : (
            !teaches && (
              <>
                <span className="btn sm is-off">Add step</span>
                <span className="btn sm is-off">Record</span>
                <span className="note">Teachers change sequences.</span>
              </>
            )
          )}
          <button type="button" className="btn sm end" onClick={() => setVersionsOpen(true)}>
            Versions…
          </button>
        </div>
        <div className="said">
          {old && (
            <Message
              kind="plan"
              action={
                <button type="button" className="btn sm" onClick={showNewest}>
                  Back to the newest
                </button>
              }
            >
              You look at version {old.shownVersion}. The newest is {newest.version}.
            </Message>
          )}
          {editable && (
            <DraftMessages
              draft={draft}
              newest={newest}
              error={conflict ? null : save.error}
              onSave={() => saveDraft(newest.version)}
            />
          )}
        </div>
        <div className="scroll">
          {poses.isPending ? (
            // Without the poses every Go to would look as if its pose were gone.
            <p className="empty quiet">Opening the steps…</p>
          ) : shown.steps.length === 0 ? (
            <p className="empty quiet">
              No steps yet.{' '}
              {editable ? 'Record by marking where the arm stands, or add steps one by one.' : ''}
            </p>
          ) : (
            <StepList
              steps={shown.steps}
              poses={poses.data ?? []}
              model={arm.model}
              rehearsal={rehearsal}
              editable={editable}
              selected={selected}
              running={running}
              dispatch={dispatch}
            />
          )}
        </div>
      </section>
      {recording && editable ? (
        <RecordPanel
          arm={arm}
          poses={poses.data ?? []}
          editing={editing}
          dispatch={dispatch}
          onDone={() => setRecording(false)}
        />
      ) : (
        <RehearsalPanel
          arm={arm}
          sequence={sequence}
          dirty={dirty}
          saving={save.isPending}
          onSave={() => saveDraft(draft.baseVersion)}
          onGoToStep={(id) => dispatch({ type: 'select', id })}
        />
      )}
      <RunBar
        sequence={sequence}
        dirty={dirty}
        from={selected === null ? null : findRow(shown.steps, selected)}
      />
      <VersionsDialog
        arm={arm}
        sequence={sequence}
        open={versionsOpen}
        onClose={() => setVersionsOpen(false)}
        onShow={(version) => {
          setVersionsOpen(false);
          if (version === newest.version) showNewest();
          else setSearch({ version: String(version) }, { replace: true });
        }}
        onRestore={
          teaches
            ? (restored) => {
                setVersionsOpen(false);
                showNewest();
                draft.dispatch({ type: 'replace', draft: restored });
                toast('Brought back as unsaved changes. Save to make it the newest version.');
              }
            : null
        }
      />
    </main>
  );
}
