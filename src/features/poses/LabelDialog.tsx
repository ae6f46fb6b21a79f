import { useState } from 'react';
import type { Pose } from '../../../shared/api/resources';
import { errorText } from '../../api/client';
import { useChangePose } from '../../api/poses';
import { Dialog } from '../../components/Dialog';
import { Field } from '../../components/Field';
import { Message } from '../../components/Message';

/** "tray, pick" as a list: trimmed, once each, none empty. */
export function tagsOf(text: string): string[] {
  return [
    ...new Set(
      text
        .split(',')
        .map((tag) => tag.trim())
        .filter(Boolean),
    ),
  ];
}

/** Tags as the server takes them: at most ten, of 24 letters each. */
function tagsError(tags: readonly string[]): string | null {
  if (tags.length > 10) return 'at most ten tags';
  const long = tags.find((tag) => tag.length > 24);
  return long ? `“${long}” is longer than 24 letters` : null;
}

export function LabelDialog({
  armId,
  pose,
  open,
  onClose,
}: {
  armId: string;
  pose: Pose;
  open: boolean;
  onClose: () => void;
}) {
  return (
    <Dialog open={open} onClose={onClose} title={`Rename or tag ${pose.name}`}>
      <LabelForm armId={armId} pose={pose} onClose={onClose} />
    </Dialog>
  );
}

function LabelForm({ armId, pose, onClose }: { armId: string; pose: Pose; onClose: () => void }) {
  const change = useChangePose(armId);
  const [name, setName] = useState(pose.name);
  const [tags, setTags] = useState(pose.tags.join(', '));
  const [note, setNote] = useState(pose.note);
  const list = tagsOf(tags);
  const wrongTags = tagsError(list);
  const ready = name.trim() !== '' && wrongTags === null;
  return (
    <form
      className="stack"
      onSubmit={(event) => {
        event.preventDefault();
        if (ready)
          change.mutate({ id: pose.id, name: name.trim(), tags: list, note }, { onSuccess: onClose });
      }}
    >
      <Field
        label="Name"
        value={name}
        maxLength={60}
        error={name.trim() === '' ? 'a pose needs a name' : null}
        onChange={(event) => setName(event.target.value)}
      />
      <Field
        label="Tags"
        help="separated by commas"
        error={wrongTags}
        value={tags}
        onChange={(event) => setTags(event.target.value)}
      />
      <Field label="Note" value={note} maxLength={500} onChange={(event) => setNote(event.target.value)} />
      {change.isError && <Message kind="fault">{errorText(change.error)}</Message>}
      <div className="acts">
        <button type="button" className="btn" onClick={onClose}>
          Cancel
        </button>
        <button type="submit" className="btn ink" disabled={!ready || change.isPending}>
          Save
        </button>
      </div>
    </form>
  );
}
