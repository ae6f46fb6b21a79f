import './build.css';
import { lazy, Suspense, useEffect, useMemo, useReducer, useState } from 'react';
import type { Arm } from '../../../shared/api/resources';
import type { ArmModel } from '../../../shared/arm/model';
import { shownValue } from '../../../shared/arm/units';
import { may } from '../../../shared/team/roles';
import { fetchArmRevision, useArmRevisions, useSaveArmModel } from '../../api/arms';
import { ApiError, errorText } from '../../api/client';
import { Dialog } from '../../components/Dialog';
import { Field } from '../../components/Field';
import { Message } from '../../components/Message';
import { Segmented } from '../../components/Segmented';
import { toast } from '../../components/toast';
import { when } from '../../components/when';
import { useArmState, useHello } from '../../live/use-live';
import type { View } from '../../scene/views';
import { JointForm, ToolForm } from './JointForm';
import {
  beginModel,
  editModel,
  type ModelHistory,
  modelErrors,
  redoModel,
  undoModel,
  withJoint,
} from './model-edit';

const ArmScene = lazy(() => import('../../scene/ArmScene'));

type Act = { kind: 'edit' | 'load'; model: ArmModel } | { kind: 'undo' } | { kind: 'redo' };
function reduce(history: ModelHistory, act: Act): ModelHistory {
  if (act.kind === 'undo') return undoModel(history);
  if (act.kind === 'redo') return redoModel(history);
  return act.kind === 'load' ? beginModel(act.model) : editModel(history, act.model);
}

/** The arm as forms, with a live drawing of what is being typed. */
export function BuildPage({ arm }: { arm: Arm }) {
  const [history, act] = useReducer(reduce, arm.model, beginModel);
  const [base, setBase] = useState(arm.revision);
  const [part, setPart] = useState<number | 'tool'>(0);
  const [note, setNote] = useState('');
  const [saving, setSaving] = useState(false);
  const [revisionsOpen, setRevisionsOpen] = useState(false);
  const save = useSaveArmModel(arm.id);
  const role = useHello()?.you.role ?? 'observer';
  const resting = useArmState((state) => state === null || state.motors === 'resting');
  const model = history.now;
  const errors = useMemo(() => modelErrors(model), [model]);
  const dirty = JSON.stringify(model) !== JSON.stringify(arm.model);
  const readOnly = !may(role, 'arm.build')
    ? 'Builders describe the arm; you can look.'
    : !resting
      ? 'Switch the motors off to change the arm: a changed arm starts afresh, resting.'
      : null;
  useEffect(() => {
    if (!dirty) setBase(arm.revision);
  }, [dirty, arm.revision]);
  const change = (next: ArmModel) => act({ kind: 'edit', model: next });
  const conflict = save.error instanceof ApiError && save.error.code === 'changedMeanwhile';
  const joint = typeof part === 'number' ? model.joints[part] : undefined;
  return (
    <main className="sheet build">
      <Preview model={model} />
      <section className="pane forms" aria-label="Description">
        <div className="sh1">
          <h1 className="title">Build</h1>
          <span className="note">
            {arm.name}, revision {arm.revision}
          </span>
          <span className="end">
            <button
              type="button"
              className="btn sm"
              disabled={history.past.length === 0}
              onClick={() => act({ kind: 'undo' })}
            >
              Undo
            </button>
            <button
              type="button"
              className="btn sm"
              disabled={history.future.length === 0}
              onClick={() => act({ kind: 'redo' })}
            >
              Redo
            </button>
            <button type="button" className="btn sm" onClick={() => setRevisionsOpen(true)}>
              Revisions…
            </button>
            <button
              type="button"
              className="btn sm ink"
              disabled={!dirty || errors.size > 0 || readOnly !== null}
              onClick={() => setSaving(true)}
            >
              Save…
            </button>
          </span>
        </div>
        <div className="parts" role="group" aria-label="Part">
          {model.joints.map((j, i) => (
            <button
              key={i}
              type="button"
              className="chip"
              aria-pressed={part === i}
              onClick={() => setPart(i)}
            >
              {i + 1} {j.name || 'no name'}
            </button>
          ))}
          <button
            type="button"
            className="chip"
            aria-pressed={part === 'tool'}
            onClick={() => setPart('tool')}
          >
            Arm and tool
          </button>
        </div>
        <div className="scroll body">
          {readOnly && <Message>{readOnly}</Message>}
          {errors.size > 0 && <Message kind="fault">{[...errors.values()][0]}</Message>}
          {save.isError && (
            <Message
              kind="fault"
              action={
                conflict ? (
                  <button
                    type="button"
                    className="btn sm"
                    onClick={() => {
                      setBase(arm.revision);
                      save.reset();
                    }}
                  >
                    Keep mine on top of theirs
                  </button>
                ) : undefined
              }
            >
              {errorText(save.error)}
            </Message>
          )}
          {joint && typeof part === 'number' ? (
            <JointForm
              key={part}
              joint={joint}
              index={part}
              errors={errors}
              disabled={readOnly !== null}
              onChange={(next) => change(withJoint(model, part, next))}
            />
          ) : (
            <ToolForm model={model} disabled={readOnly !== null} onChange={change} />
          )}
        </div>
      </section>
      <Dialog open={saving} onClose={() => setSaving(false)} title={`Save ${model.name}`}>
        <p className="small">
          The arm starts afresh with it: position unknown, approvals and held first cycles to be given again
          where the arm’s mechanics changed.
        </p>
        <Field
          label="What changed (for the others)"
          value={note}
          maxLength={200}
          onChange={(event) => setNote(event.target.value)}
        />
        <div className="acts">
          <button type="button" className="btn" onClick={() => setSaving(false)}>
            Not yet
          </button>
          <button
            type="button"
            className="btn ink"
            disabled={save.isPending}
            onClick={() =>
              save.mutate(
                { model, baseRevision: base, note },
                {
                  onSuccess: (saved) => {
                    act({ kind: 'load', model: saved.model });
                    setBase(saved.revision);
                    setNote('');
                    toast(`Saved as revision ${saved.revision}.`);
                  },
                  onSettled: () => setSaving(false),
                },
              )
            }
          >
            Save revision
          </button>
        </div>
      </Dialog>
      <Dialog open={revisionsOpen} onClose={() => setRevisionsOpen(false)} title="Revisions">
        <RevisionList
          arm={arm}
          mayRestore={readOnly === null}
          onLoad={(old) => {
            change(old);
            setRevisionsOpen(false);
          }}
        />
        <div className="acts">
          <button type="button" className="btn" onClick={() => setRevisionsOpen(false)}>
            Close
          </button>
        </div>
      </Dialog>
    </main>
  );
}

function Preview({ model }: { model: ArmModel }) {
  const [view, setView] = useState<View>('corner');
  const [q, setQ] = useState(() => model.joints.map((j) => (j.limits.lower + j.limits.upper) / 2));
  const clamped = model.joints.map((joint, i) =>
    Math.min(joint.limits.upper, Math.max(joint.limits.lower, q[i] ?? 0)),
  );
  const source = useMemo(() => previewSource(), []);
  useEffect(() => source.set(clamped), [source, clamped]);
  return (
    <section className="pane view" aria-label="Drawing">
      <div className="vhead">
        <h2 className="h3">Seen from</h2>
        <Segmented
          label="Seen from"
          value={view}
          onChange={setView}
          options={[
            { value: 'corner', label: 'corner' },
            { value: 'side', label: 'side' },
            { value: 'above', label: 'above' },
          ]}
        />
      </div>
      <div className="stage">
        <Suspense fallback={<p className="note stage-note">Drawing the arm…</p>}>
          <ArmScene model={model} view={view} source={source} known />
        </Suspense>
      </div>
      <div className="sliders">
        <span className="note">Try the joints; nothing moves but the drawing.</span>
        {model.joints.map((joint, i) => (
          <label key={i}>
            <span>{joint.name}</span>
            <input
              type="range"
              min={joint.limits.lower}
              max={joint.limits.upper}
              step={(joint.limits.upper - joint.limits.lower) / 200}
              value={clamped[i] ?? 0}
              onChange={(event) =>
                setQ(model.joints.map((_, k) => (k === i ? Number(event.target.value) : (clamped[k] ?? 0))))
              }
            />
            <span className="n">{shownValue(joint.type, clamped[i] ?? 0, 0)}</span>
          </label>
        ))}
      </div>
    </section>
  );
}

/** The preview's own joint values, for a scene that otherwise follows telemetry. */
function previewSource() {
  let now: number[] = [];
  const listeners = new Set<() => void>();
  return {
    sample: () => ({
      t: 0,
      q: now,
      stopAt: now,
      gripper: 1,
      tool: { position: [0, 0, -1] as [number, number, number] },
    }),
    subscribe: (listener: () => void) => {
      listeners.add(listener);
      return () => listeners.delete(listener);
    },
    set: (q: number[]) => {
      now = q;
      for (const listener of listeners) listener();
    },
  };
}

function RevisionList({
  arm,
  mayRestore,
  onLoad,
}: {
  arm: Arm;
  mayRestore: boolean;
  onLoad: (model: ArmModel) => void;
}) {
  const revisions = useArmRevisions(arm.id).data ?? [];
  return (
    <table>
      <thead>
        <tr>
          <th className="r">Revision</th>
          <th>Saved</th>
          <th>What changed</th>
          <th>
            <span className="vh">Load</span>
          </th>
        </tr>
      </thead>
      <tbody>
        {revisions.map((r) => (
          <tr key={r.revision} className={r.revision === arm.revision ? 'sel' : ''}>
            <td className="r n">{r.revision}</td>
            <td>
              {r.by}, {when(r.atMs)}
            </td>
            <td>{r.note}</td>
            <td className="act">
              <button
                type="button"
                className="btn sm"
                disabled={!mayRestore || r.revision === arm.revision}
                onClick={() =>
                  void fetchArmRevision(arm.id, r.revision).then(
                    ({ model }) => onLoad(model),
                    (error) => toast(errorText(error)),
                  )
                }
              >
                Load as edits
              </button>
            </td>
          </tr>
        ))}
      </tbody>
    </table>
  );
}
