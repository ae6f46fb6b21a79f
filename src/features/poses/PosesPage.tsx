import './poses.css';
import { useCallback, useMemo, useState } from 'react';
import { useSearchParams } from 'react-router-dom';
import type { Arm } from '../../../shared/api/resources';
import { may } from '../../../shared/team/roles';
import { errorText } from '../../api/client';
import { usePoses } from '../../api/poses';
import { CaptureButton, useCaptureReason } from '../../components/CaptureButton';
import { Message } from '../../components/Message';
import { useHello } from '../../live/use-live';
import { FileMenu } from './FileMenu';
import { findPoses, tagsInUse } from './find-poses';
import { PoseCard } from './PoseCard';
import { PoseDetail } from './PoseDetail';
import { TypedPoseDialog } from './TypedPoseDialog';

/** All poses of an arm as index cards, and one of them beside the arm as it is now. */
export function PosesPage({ arm }: { arm: Arm }) {
  const poses = usePoses(arm.id);
  const teaches = may(useHello()?.you.role ?? 'observer', 'pose.edit');
  const reason = useCaptureReason();
  const [search, setSearch] = useSearchParams();
  const [text, setText] = useState('');
  const [tag, setTag] = useState<string | null>(null);
  const [typing, setTyping] = useState(false);
  const all = useMemo(() => poses.data ?? [], [poses.data]);
  const shown = useMemo(() => findPoses(all, text, tag), [all, text, tag]);
  const tags = useMemo(() => tagsInUse(all), [all]);
  const asked = search.get('pose');
  const chosen = all.find((pose) => pose.id === asked) ?? shown[0] ?? null;
  const choose = useCallback((id: string) => setSearch({ pose: id }, { replace: true }), [setSearch]);
  const chooseNone = useCallback(() => setSearch({}, { replace: true }), [setSearch]);
  return (
    <main className={`sheet poses ${asked && chosen?.id === asked ? 'has-choice' : ''}`}>
      <section className="pane lib" aria-label="Poses">
        <div className="bar">
          <div className="r">
            <h1 className="title">Poses</h1>
            <span className="note count">{poses.isPending ? '' : `${all.length} for ${arm.name}`}</span>
            <div className="entry text find">
              <input
                type="search"
                aria-label="Find a pose"
                placeholder="Find by name, tag or person"
                value={text}
                onChange={(event) => setText(event.target.value)}
              />
            </div>
            <FileMenu arm={arm} teaches={teaches} onType={() => setTyping(true)} />
            <CaptureButton arm={arm} className="ink" letter onCaptured={choose} />
          </div>
          <div className="r">
            <div className="chips" role="group" aria-label="Tags">
              {[null, ...tags].map((name) => (
                <button
                  key={name ?? ''}
                  type="button"
                  className="chip"
                  aria-pressed={tag === name}
                  onClick={() => setTag(name)}
                >
                  {name ?? 'all'}
                </button>
              ))}
            </div>
            <span className="note legendnote">
              {reason ?? 'Dashed rule: captured while position was only declared'}
            </span>
          </div>
        </div>
        {poses.isError ? (
          <div className="paper">
            <Message
              kind="fault"
              action={
                <button type="button" className="btn sm" onClick={() => void poses.refetch()}>
                  Try again
                </button>
              }
            >
              {errorText(poses.error)}
            </Message>
          </div>
        ) : all.length === 0 && !poses.isPending ? (
          <div className="empty">
            <h2 className="h2">No poses yet</h2>
            <p className="quiet">
              Jog {arm.name} to a place worth keeping on Move, let it stand, and capture it. A pose remembers
              how far the position could be trusted.
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
                onChoose={choose}
              />
            ))}
            {shown.length === 0 && !poses.isPending && (
              <p className="quiet nomatch" role="status">
                No pose has these words{tag === null ? '' : ` and the tag “${tag}”`}.
              </p>
            )}
          </div>
        )}
      </section>
      {chosen ? (
        <PoseDetail key={chosen.id} arm={arm} pose={chosen} onGone={chooseNone} />
      ) : (
        <section className="pane cmp" aria-label="Compare" />
      )}
      <TypedPoseDialog arm={arm} open={typing} onClose={() => setTyping(false)} onSaved={choose} />
    </main>
  );
}
