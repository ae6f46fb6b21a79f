import './sequences.css';
import './sequences-more.css';
import { useEffect, useState } from 'react';
import { useSearchParams } from 'react-router-dom';
import type { Arm, Sequence } from '../../../shared/api/resources';
import { STEP_KINDS, type StepKind } from '../../../shared/sequence/steps';
import { may } from '../../../shared/team/roles';
import { ApiError, errorText } from '../../api/client';
import { usePoses } from '../../api/poses';
import { useApproveSequence, useRehearsal, useSaveSequence, useWithdrawApproval } from '../../api/sequences';
import { Message } from '../../components/Message';
import { when } from '../../components/when';
import { useArmState, useHello } from '../../live/use-live';
import { toast } from '../shell/toast';
import { insertAfter, newStep } from './edit';
import { Recorder } from './Recorder';
import { RehearsalPanel } from './RehearsalPanel';
import { RunBar } from './RunBar';
import { StepList } from './StepList';
import { KIND_WORDS } from './step-words';
import { useDraft } from './use-draft';
import { VersionsDialog } from './VersionsDialog';

const newId = () => crypto.randomUUID().slice(0, 8);

/** A sequence: its steps, its rehearsal, and the run. */
export function SequenceEditor({ arm, sequence }: { arm: Arm; sequence: Sequence }) {
  const role = useHello()?.you.role ?? 'observer';
  const poses = usePoses(arm.id).data ?? [];
  const [, setSearch] = useSearchParams();
  const newest = sequence.shownVersion === sequence.version;
  const editable = may(role, 'sequence.edit') && newest;
  const draft = useDraft(sequence);
  const [chosen, setChosen] = useState<string | null>(null);
  const [recording, setRecording] = useState(false);
  const [versionsOpen, setVersionsOpen] = useState(false);
  const save = useSaveSequence(arm.id, sequence.id);
  const rehearsal = useRehearsal(arm.id, sequence.id, sequence.shownVersion, true).data ?? null;
  const running = useArmState((state) => (state?.run?.sequenceId === sequence.id ? state.run.stepId : null));
  const shown = newest ? draft.draft : { name: sequence.name, note: sequence.note, steps: sequence.steps };
  const dirty = newest && draft.dirty;

  useEffect(() => {
    if (!editable) return;
    const onKey = (event: KeyboardEvent) => {
      if (!(event.ctrlKey || event.metaKey) || event.key.toLowerCase() !== 'z') return;
      if ((event.target as Element | null)?.closest('input, textarea, select')) return;
      event.preventDefault();
      if (event.shiftKey) draft.redo();
      else draft.undo();
    };
    window.addEventListener('keydown', onKey);
    return () => window.removeEventListener('keydown', onKey);
  }, [editable, draft]);

  const add = (kind: StepKind) => {
    const step = newStep(kind, newId, poses[0]?.id ?? '');
    draft.change({ ...shown, steps: insertAfter(shown.steps, chosen, step) });
    setChosen(step.id);
  };
  const saveDraft = () =>
    save.mutate(
      { ...draft.draft, baseVersion: draft.baseVersion },
      {
        onSuccess: (saved) => {
          draft.load({ name: saved.name, note: saved.note, steps: saved.steps }, saved.version);
          toast(`Saved as version ${saved.version}.`);
        },
      },
    );
  const conflict = save.error instanceof ApiError && save.error.code === 'changedMeanwhile';

  return (
    <main className="sheet seq">
      <section className="pane steps" aria-label="Sequence">
        <div className="sh1">
          {editable ? (
            <input
              className="title nameinput"
              aria-label="Name of the sequence"
              value={shown.name}
              maxLength={60}
              onChange={(event) => draft.change({ ...shown, name: event.target.value })}
            />
          ) : (
            <h1 className="title">{shown.name}</h1>
          )}
          <span className="note">
            version {sequence.shownVersion}
            {newest ? '' : ` of ${sequence.version}`}, {sequence.by} {when(sequence.updatedAtMs)}
          </span>
        </div>
        <div className="toolsline">
          {editable && (
            <>
              <button type="button" className="btn sm" disabled={!draft.canUndo} onClick={draft.undo}>
                Undo
              </button>
              <button type="button" className="btn sm" disabled={!draft.canRedo} onClick={draft.redo}>
                Redo
              </button>
              <button
                type="button"
                className="btn sm ink"
                disabled={!dirty || save.isPending || !shown.name.trim()}
                onClick={saveDraft}
              >
                Save
              </button>
              <button
                type="button"
                className="btn sm"
                aria-pressed={recording}
                onClick={() => setRecording(!recording)}
              >
                {recording ? 'Stop recording' : 'Record'}
              </button>
            </>
          )}
          <button type="button" className="btn sm" onClick={() => setVersionsOpen(true)}>
            Versions…
          </button>
          <Approval arm={arm} sequence={sequence} dirty={dirty} />
        </div>
        {recording && editable && (
          <div className="toolsline rec">
            <Recorder
              arm={arm}
              poses={poses}
              steps={shown.steps}
              newId={newId}
              onMarked={(added) => draft.change({ ...shown, steps: [...shown.steps, ...added] })}
            />
          </div>
        )}
        {!newest && (
          <Message
            action={
              <span className="line">
                {may(role, 'sequence.edit') && (
                  <button
                    type="button"
                    className="btn sm"
                    onClick={() => {
                      draft.change({ name: sequence.name, note: sequence.note, steps: sequence.steps });
                      setSearch({});
                    }}
                  >
                    Bring it back
                  </button>
                )}
                <button type="button" className="btn sm" onClick={() => setSearch({})}>
                  Newest
                </button>
              </span>
            }
          >
            You look at version {sequence.shownVersion}; the newest is {sequence.version}.
          </Message>
        )}
        {save.isError && (
          <Message
            kind="fault"
            action={
              conflict ? (
                <button
                  type="button"
                  className="btn sm"
                  onClick={() => {
                    draft.load(
                      { name: sequence.name, note: sequence.note, steps: sequence.steps },
                      sequence.version,
                    );
                    save.reset();
                  }}
                >
                  Drop mine, show theirs
                </button>
              ) : undefined
            }
          >
            {errorText(save.error)}
          </Message>
        )}
        <div className="scroll">
          {shown.steps.length === 0 && (
            <p className="empty quiet">
              No steps yet. Record by marking where the arm stands, or add steps one by one below.
            </p>
          )}
          <StepList
            draft={shown}
            poses={poses}
            model={arm.model}
            rehearsal={dirty ? null : rehearsal}
            editable={editable}
            chosen={chosen}
            running={running}
            onChoose={setChosen}
            onChange={draft.change}
            newId={newId}
          />
          {editable && (
            <div className="addline" role="group" aria-label="Add a step">
              <span className="note">Add</span>
              {STEP_KINDS.filter((kind) => kind !== 'grip' || arm.model.gripper).map((kind) => (
                <button
                  key={kind}
                  type="button"
                  className="btn sm"
                  disabled={kind === 'goTo' && poses.length === 0}
                  onClick={() => add(kind)}
                >
                  {KIND_WORDS[kind]}
                </button>
              ))}
            </div>
          )}
        </div>
      </section>
      <RehearsalPanel
        armId={arm.id}
        sequenceId={sequence.id}
        version={sequence.shownVersion}
        model={arm.model}
        dirty={dirty}
        onGoToStep={setChosen}
      />
      <RunBar sequence={sequence} dirty={dirty} fromStep={chosen} />
      <VersionsDialog
        arm={arm}
        sequence={sequence}
        open={versionsOpen}
        onClose={() => setVersionsOpen(false)}
        onShow={(version) => {
          setVersionsOpen(false);
          setSearch(version === sequence.version ? {} : { version: String(version) });
        }}
      />
    </main>
  );
}

function Approval({ arm, sequence, dirty }: { arm: Arm; sequence: Sequence; dirty: boolean }) {
  const role = useHello()?.you.role ?? 'observer';
  const approve = useApproveSequence(arm.id, sequence.id);
  const withdraw = useWithdrawApproval(arm.id, sequence.id);
  const { approval, approvedVersion, shownVersion } = sequence;
  const here = approvedVersion === shownVersion && approval?.holds;
  const approves = may(role, 'sequence.approve');
  return (
    <span className="line end">
      <span className="note">
        {here
          ? `approved for operators by ${approval.by}`
          : approvedVersion && approval
            ? approval.holds
              ? `version ${approvedVersion} is approved`
              : `approval of version ${approvedVersion} no longer holds: ${approval.why}`
            : 'not approved for operators'}
      </span>
      {approves &&
        (here ? (
          <button type="button" className="btn sm" onClick={() => withdraw.mutate()}>
            Withdraw
          </button>
        ) : (
          <button
            type="button"
            className="btn sm"
            disabled={dirty || approve.isPending}
            onClick={() => approve.mutate(shownVersion, { onError: (error) => toast(errorText(error)) })}
          >
            Approve
          </button>
        ))}
    </span>
  );
}
