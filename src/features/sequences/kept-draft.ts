import { z } from 'zod';
import { SequenceDraft } from '../../../shared/api/resources';
import type { Draft } from './editing';

/**
 * The unsaved draft, kept in this browser after every change so that a closed lid or a crashed tab loses
 * nothing. `baseVersion` is the version the changes began from.
 */
const KeptDraft = z.object({
  baseVersion: z.int(),
  savedAtMs: z.number(),
  // A name may be empty while it is typed; only saving asks for one.
  draft: SequenceDraft.extend({ name: z.string().max(60) }),
});
export type KeptDraft = z.infer<typeof KeptDraft>;

const keyOf = (armId: string, sequenceId: string) => `elbowroom.draft.${armId}.${sequenceId}`;

export function readKept(store: Storage, armId: string, sequenceId: string): KeptDraft | null {
  try {
    const parsed = KeptDraft.safeParse(JSON.parse(store.getItem(keyOf(armId, sequenceId)) ?? 'null'));
    return parsed.success ? parsed.data : null;
  } catch {
    return null;
  }
}

/** Returns whether it could be kept: a full or forbidden store is said, not hidden. */
export function keep(
  store: Storage,
  armId: string,
  sequenceId: string,
  draft: Draft,
  baseVersion: number,
  nowMs: number,
): boolean {
  try {
    store.setItem(keyOf(armId, sequenceId), JSON.stringify({ baseVersion, savedAtMs: nowMs, draft }));
    return true;
  } catch {
    return false;
  }
}

export function forget(store: Storage, armId: string, sequenceId: string): void {
  store.removeItem(keyOf(armId, sequenceId));
}
