import type { Arm, Sequence } from '../../../shared/api/resources';
import { may } from '../../../shared/team/roles';
import { errorText } from '../../api/client';
import { useApproveSequence, useWithdrawApproval } from '../../api/sequences';
import { toast } from '../../components/toast';
import { when } from '../../components/when';
import { useHello } from '../../live/use-live';
import type { Draft, Edit } from './editing';

/** Name, note, which version this is, and whether operators may run it. */
export function SequenceHead({
  arm,
  sequence,
  shown,
  dirty,
  dispatch,
}: {
  arm: Arm;
  sequence: Sequence;
  shown: Draft;
  dirty: boolean;
  /** Null where nothing may be changed. */
  dispatch: ((action: Edit) => void) | null;
}) {
  const { shownVersion, version } = sequence;
  return (
    <div className="sh1">
      {dispatch ? (
        <>
          <h1 className="vh">{shown.name || 'Sequence'}</h1>
          <input
            className="title nameinput"
            aria-label="Name of the sequence"
            value={shown.name}
            maxLength={60}
            onChange={(event) => dispatch({ type: 'label', name: event.target.value })}
          />
        </>
      ) : (
        <h1 className="title">{shown.name}</h1>
      )}
      <span className="note">
        version <span className="n">{shownVersion}</span>
        {shownVersion === version ? '' : ` of ${version}`}
        {dirty ? ', with unsaved changes' : `, ${sequence.by} ${when(sequence.updatedAtMs)}`}
      </span>
      <Approval arm={arm} sequence={sequence} dirty={dirty} />
    </div>
  );
}

function approvalWords({ approval, approvedVersion, shownVersion }: Sequence): string {
  if (!approval || approvedVersion === null) return 'Not approved for operators.';
  const which = approvedVersion === shownVersion ? 'Approved' : `Version ${approvedVersion} is approved`;
  return approval.holds
    ? `${which} for operators by ${approval.by}, ${when(approval.atMs)}.`
    : `The approval of version ${approvedVersion} no longer holds. ${approval.why ?? ''}`;
}

function Approval({ arm, sequence, dirty }: { arm: Arm; sequence: Sequence; dirty: boolean }) {
  const approves = may(useHello()?.you.role ?? 'observer', 'sequence.approve');
  const approve = useApproveSequence(arm.id, sequence.id);
  const withdraw = useWithdrawApproval(arm.id, sequence.id);
  const here = sequence.approvedVersion === sequence.shownVersion && (sequence.approval?.holds ?? false);
  const onError = (error: unknown) => toast(errorText(error));
  return (
    <span className="approval">
      <span className="note">{approvalWords(sequence)}</span>
      {!approves ? (
        <span className="note">Teachers approve.</span>
      ) : here ? (
        <button
          type="button"
          className="btn sm"
          disabled={withdraw.isPending}
          onClick={() => withdraw.mutate(undefined, { onError })}
        >
          Withdraw approval
        </button>
      ) : (
        <button
          type="button"
          className="btn sm"
          disabled={dirty || approve.isPending}
          title={dirty ? 'save your changes first' : undefined}
          onClick={() => approve.mutate(sequence.shownVersion, { onError })}
        >
          Approve version {sequence.shownVersion}
        </button>
      )}
    </span>
  );
}
