import { useCallback, useEffect, useReducer, useState } from 'react';
import { z } from 'zod';
import type { Sequence } from '../../../shared/api/resources';
import { Step } from '../../../shared/sequence/steps';
import { begin, type Draft, edit, type History, redo, undo } from './edit';

const Kept = z.object({ baseVersion: z.int(), name: z.string(), note: z.string(), steps: z.array(Step) });

type Act =
  | { kind: 'edit'; draft: Draft }
  | { kind: 'undo' }
  | { kind: 'redo' }
  | { kind: 'load'; draft: Draft };

function reduce(history: History, act: Act): History {
  switch (act.kind) {
    case 'edit':
      return edit(history, act.draft);
    case 'undo':
      return undo(history);
    case 'redo':
      return redo(history);
    case 'load':
      return begin(act.draft);
  }
}

const draftOf = (sequence: Sequence): Draft => ({
  name: sequence.name,
  note: sequence.note,
  steps: sequence.steps,
});
const same = (a: Draft, b: Draft) => JSON.stringify(a) === JSON.stringify(b);

/** A draft that survives a closed page: unsaved edits stay in this browser until they are saved or dropped. */
export function useDraft(sequence: Sequence) {
  const key = `elbowroom.draft.${sequence.id}`;
  const [history, act] = useReducer(reduce, null, () => {
    const kept = readKept(key);
    const saved = begin(draftOf(sequence));
    if (!kept || kept.baseVersion > sequence.version) return saved;
    return edit(saved, { name: kept.name, note: kept.note, steps: kept.steps });
  });
  const [base, setBase] = useState(() => readKept(key)?.baseVersion ?? sequence.version);
  const saved = draftOf(sequence);
  const dirty = !same(history.now, saved) || base !== sequence.version;
  const edited = history.past.length > 0 || !same(history.now, saved);

  // Somebody else's version arrives while nothing here is edited: show it.
  useEffect(() => {
    if (base !== sequence.version && !edited) {
      act({ kind: 'load', draft: draftOf(sequence) });
      setBase(sequence.version);
    }
  }, [base, edited, sequence]);

  useEffect(() => {
    if (same(history.now, draftOf(sequence))) localStorage.removeItem(key);
    else localStorage.setItem(key, JSON.stringify({ baseVersion: base, ...history.now }));
  }, [history.now, sequence, key, base]);

  const load = useCallback(
    (draft: Draft, version: number) => {
      act({ kind: 'load', draft });
      setBase(version);
      localStorage.removeItem(key);
    },
    [key],
  );

  return {
    draft: history.now,
    dirty,
    baseVersion: base,
    canUndo: history.past.length > 0,
    canRedo: history.future.length > 0,
    change: (draft: Draft) => act({ kind: 'edit', draft }),
    undo: () => act({ kind: 'undo' }),
    redo: () => act({ kind: 'redo' }),
    /** After saving, or to drop the edits. */
    load,
  };
}

function readKept(key: string): z.infer<typeof Kept> | null {
  try {
    const parsed = Kept.safeParse(JSON.parse(localStorage.getItem(key) ?? 'null'));
    return parsed.success ? parsed.data : null;
  } catch {
    return null;
  }
}
