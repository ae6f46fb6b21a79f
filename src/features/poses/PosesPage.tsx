import './poses.css';
import './poses-more.css';
import { useRef, useState } from 'react';
import { useSearchParams } from 'react-router-dom';
import { type Arm, PoseFile } from '../../../shared/api/resources';
import { figure, fromShown, shownUnit, shownValue, toShown } from '../../../shared/arm/units';
import { may } from '../../../shared/team/roles';
import { errorText } from '../../api/client';
import { useCapturePose, useImportPoses, usePoses, useTypedPose } from '../../api/poses';
import { Dialog } from '../../components/Dialog';
import { Field } from '../../components/Field';
import { Message } from '../../components/Message';
import { parseQuantity } from '../../components/quantity';
import { useArmState, useHello } from '../../live/use-live';
import { toast } from '../shell/toast';
import { PoseCard } from './PoseCard';
import { PoseDetail } from './PoseDetail';

export function PosesPage({ arm }: { arm: Arm }) {
  const poses = usePoses(arm.id);
  const role = useHello()?.you.role ?? 'observer';
  const teaches = may(role, 'pose.edit');
  const [search, setSearch] = useSearchParams();
  const [text, setText] = useState('');
  const [tag, setTag] = useState<string | null>(null);
  const [typing, setTyping] = useState(false);
  const all = poses.data ?? [];
  const tags = [...new Set(all.flatMap((pose) => pose.tags))].sort();
  const wanted = text.trim().toLowerCase();
  const shown = all.filter(
    (pose) =>
      (tag === null || pose.tags.includes(tag)) &&
      (!wanted || `${pose.name} ${pose.note} ${pose.tags.join(' ')}`.toLowerCase().includes(wanted)),
  );
  const chosen = all.find((pose) => pose.id === search.get('pose')) ?? shown[0] ?? null;
  return (
    <main className="sheet poses">
      <section className="pane lib" aria-label="Poses">
        <div className="bar">
          <div className="r">
            <h1 className="title">Poses</h1>
            <div className="entry text find">
              <input
                aria-label="Find a pose"
                placeholder="Find…"
                value={text}
                onChange={(event) => setText(event.target.value)}
              />
            </div>
            <span className="end line" style={{ marginLeft: 'auto' }}>
              {teaches && <Capture armId={arm.id} />}
              {teaches && (
                <button type="button" className="btn" onClick={() => setTyping(true)}>
                  Type one…
                </button>
              )}
            </span>
          </div>
          <div className="r chips">
            {tags.map((name) => (
              <button
                key={name}
                type="button"
                className="chip"
                aria-pressed={tag === name}
                onClick={() => setTag(tag === name ? null : name)}
              >
                {name}
              </button>
            ))}
            <span className="line" style={{ marginLeft: 'auto' }}>
              <a className="link small" href={`/api/arms/${arm.id}/poses/export?format=json`}>
                Export JSON
              </a>
              <a className="link small" href={`/api/arms/${arm.id}/poses/export?format=csv`}>
                CSV
              </a>
              {teaches && <Import arm={arm} />}
            </span>
          </div>
        </div>
        {poses.isError && <Message kind="fault">{errorText(poses.error)}</Message>}
        {all.length === 0 && !poses.isPending ? (
          <div className="empty">
            <h2 className="h2">No poses yet.</h2>
            <p className="quiet">
              Jog {arm.name} to a place worth keeping on Move, let it stand, and capture it. A pose remembers
              how far its position could be trusted.
            </p>
          </div>
        ) : (
          <div className="grid">
            {shown.map((pose) => (
              <PoseCard
                key={pose.id}
                model={arm.model}
                pose={pose}
                chosen={pose.id === chosen?.id}
                onChoose={() => setSearch({ pose: pose.id }, { replace: true })}
              />
            ))}
            {shown.length === 0 && <p className="quiet">Nothing matches.</p>}
          </div>
        )}
      </section>
      {chosen && <PoseDetail arm={arm} pose={chosen} onGone={() => setSearch({}, { replace: true })} />}
      <TypedDialog arm={arm} open={typing} onClose={() => setTyping(false)} />
    </main>
  );
}

function Capture({ armId }: { armId: string }) {
  const capture = useCapturePose(armId);
  const standing = useArmState((state) => state?.motors === 'standing');
  return (
    <button
      type="button"
      className="btn ink"
      disabled={!standing || capture.isPending}
      onClick={() =>
        capture.mutate(
          {},
          {
            onSuccess: (pose) => toast(`Captured as “${pose.name}”.`),
            onError: (error) => toast(errorText(error)),
          },
        )
      }
    >
      Capture pose
    </button>
  );
}

function Import({ arm }: { arm: Arm }) {
  const picker = useRef<HTMLInputElement>(null);
  const load = useImportPoses(arm.id);
  const read = async (file: File) => {
    try {
      const parsed = PoseFile.safeParse(JSON.parse(await file.text()));
      if (!parsed.success) {
        toast(`${file.name} is not a file of poses: ${parsed.error.issues[0]?.message ?? ''}`);
        return;
      }
      load.mutate(parsed.data, {
        onSuccess: (poses) => toast(`${poses.length} poses imported, as declared.`),
        onError: (error) => toast(errorText(error)),
      });
    } catch {
      toast(`${file.name} is not JSON.`);
    }
  };
  return (
    <>
      <button type="button" className="link small" onClick={() => picker.current?.click()}>
        Import…
      </button>
      <input
        ref={picker}
        type="file"
        accept="application/json,.json"
        hidden
        aria-label="File of poses"
        onChange={(event) => {
          const file = event.target.files?.[0];
          event.target.value = '';
          if (file) void read(file);
        }}
      />
    </>
  );
}

function TypedDialog({ arm, open, onClose }: { arm: Arm; open: boolean; onClose: () => void }) {
  return (
    <Dialog open={open} onClose={onClose} title="A pose from typed values">
      <TypedForm arm={arm} onClose={onClose} />
    </Dialog>
  );
}

function TypedForm({ arm, onClose }: { arm: Arm; onClose: () => void }) {
  const { joints } = arm.model;
  const save = useTypedPose(arm.id);
  const [name, setName] = useState('');
  const [typed, setTyped] = useState(() =>
    joints.map((joint) => figure(toShown(joint.type, (joint.limits.lower + joint.limits.upper) / 2), 1)),
  );
  const q = joints.map((joint, i) => {
    const parsed = parseQuantity(typed[i] ?? '', shownUnit(joint.type));
    return parsed ? fromShown(joint.type, parsed.value) : null;
  });
  const error = (i: number) => {
    const value = q[i];
    const joint = joints[i]!;
    if (value === null || value === undefined) return 'a number is needed';
    return value < joint.limits.lower || value > joint.limits.upper
      ? `between ${shownValue(joint.type, joint.limits.lower)} and ${shownValue(joint.type, joint.limits.upper)}`
      : null;
  };
  const good = name.trim() !== '' && joints.every((_, i) => error(i) === null);
  return (
    <form
      className="stack"
      onSubmit={(event) => {
        event.preventDefault();
        if (good) save.mutate({ name: name.trim(), q: q as number[] }, { onSuccess: onClose });
      }}
    >
      <Field label="Name" value={name} maxLength={60} onChange={(event) => setName(event.target.value)} />
      <div className="grid2">
        {joints.map((joint, i) => (
          <Field
            key={joint.name}
            label={joint.name}
            text={false}
            unit={shownUnit(joint.type)}
            value={typed[i] ?? ''}
            error={error(i)}
            onChange={(event) => setTyped(typed.map((v, k) => (k === i ? event.target.value : v)))}
          />
        ))}
      </div>
      {save.isError && <Message kind="fault">{errorText(save.error)}</Message>}
      <div className="acts">
        <button type="button" className="btn" onClick={onClose}>
          Cancel
        </button>
        <button type="submit" className="btn ink" disabled={!good || save.isPending}>
          Save pose
        </button>
      </div>
    </form>
  );
}
