import { useCallback, useEffect, useMemo, useReducer, useState } from 'react';
import type { Sequence } from '../../../shared/api/resources';
import { type Draft, type Edit, type Editing, edit, sameDraft, startEditing } from './editing';
import { forget, keep, readKept } from './kept-draft';

const draftOf = ({ name, note, steps }: Sequence): Draft => ({ name, note, steps });

/** A kept draft is one edit away from what is saved, so that Undo leads back to it. */
function begin(sequence: Sequence, kept: Draft | null): Editing {
  const editing = startEditing(draftOf(sequence));
  if (!kept || sameDraft(kept, editing.draft)) return editing;
  return { ...editing, draft: kept, past: [editing.draft] };
}

/**
 * The draft of a sequence, kept in this browser after every change. `sequence` is the newest version the server
 * has; when somebody else saves one, an untouched draft follows it and a touched one stays as it is.
 */
export function useSequenceDraft(armId: string, sequence: Sequence) {
  const [kept] = useState(() => readKept(localStorage, armId, sequence.id));
  const [editing, dispatch] = useReducer(edit, null, () => begin(sequence, kept?.draft ?? null));
  const [baseVersion, setBaseVersion] = useState(kept?.baseVersion ?? sequence.version);
  const [keptSince, setKeptSince] = useState<number | null>(kept ? kept.savedAtMs : null);
  const [stored, setStored] = useState(true);
  const saved = useMemo(() => draftOf(sequence), [sequence]);
  const dirty = !sameDraft(editing.draft, saved);

  const load = useCallback((draft: Draft, version: number) => {
    dispatch({ type: 'reset', draft });
    setBaseVersion(version);
    setKeptSince(null);
  }, []);

  // Somebody else's version, or the same from another window.
  useEffect(() => {
    if (sequence.version <= baseVersion) return;
    if (editing.past.length === 0 || !dirty) load(saved, sequence.version);
  }, [sequence.version, baseVersion, editing.past.length, dirty, saved, load]);

  useEffect(() => {
    if (dirty) setStored(keep(localStorage, armId, sequence.id, editing.draft, baseVersion, Date.now()));
    else forget(localStorage, armId, sequence.id);
  }, [dirty, armId, sequence.id, editing.draft, baseVersion]);

  return {
    editing,
    dispatch: dispatch as (action: Edit) => void,
    dirty,
    baseVersion,
    /** Somebody saved a newer version than the one these edits began from. */
    overtaken: dirty && sequence.version > baseVersion,
    /** When the edits were kept that were found on opening; null otherwise. */
    keptSince: dirty ? keptSince : null,
    /** False when this browser could not keep the edits. */
    stored,
    /** Starts anew from this: after saving, or to drop the edits. */
    load,
    /** Keeps the edits and goes on from the newest version, so that saving puts them on top of it. */
    rebase: () => setBaseVersion(sequence.version),
    dismissKept: () => setKeptSince(null),
  };
}
