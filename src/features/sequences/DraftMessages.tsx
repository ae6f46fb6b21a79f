import type { Sequence } from '../../../shared/api/resources';
import { errorText } from '../../api/client';
import { Message } from '../../components/Message';
import { when } from '../../components/when';
import type { useSequenceDraft } from './use-sequence-draft';

const draftOf = ({ name, note, steps }: Sequence) => ({ name, note, steps });

/** What a person has to know about unsaved changes: kept ones, somebody else's version, a save that failed. */
export function DraftMessages({
  draft,
  newest,
  error,
  onSave,
}: {
  draft: ReturnType<typeof useSequenceDraft>;
  newest: Sequence;
  /** Of the last attempt to save, if it failed for another reason than a newer version. */
  error: unknown;
  onSave: () => void;
}) {
  const drop = () => draft.load(draftOf(newest), newest.version);
  if (draft.overtaken)
    return (
      <Message
        kind="plan"
        action={
          <span className="line">
            <button
              type="button"
              className="btn sm"
              onClick={() => {
                draft.rebase();
                onSave();
              }}
            >
              Save mine as version {newest.version + 1}
            </button>
            <button type="button" className="btn sm" onClick={drop}>
              Show theirs, drop mine
            </button>
          </span>
        }
      >
        <b>
          {newest.by} saved version {newest.version} meanwhile.
        </b>{' '}
        Your changes began from version {draft.baseVersion} and are still here. Theirs stays in Versions
        either way.
      </Message>
    );
  if (error) return <Message kind="fault">{errorText(error)} Your changes are kept in this browser.</Message>;
  if (!draft.stored)
    return <Message>This browser cannot keep unsaved changes. Save before you leave the page.</Message>;
  if (draft.keptSince !== null)
    return (
      <Message
        action={
          <span className="line">
            <button type="button" className="btn sm" onClick={draft.dismissKept}>
              Go on
            </button>
            <button type="button" className="btn sm" onClick={drop}>
              Drop them
            </button>
          </span>
        }
      >
        Unsaved changes from {when(draft.keptSince)} were kept in this browser.
      </Message>
    );
  return null;
}
