import type { Arm } from '../../shared/api/resources';
import { worstTrust } from '../../shared/arm/trust';
import { may } from '../../shared/team/roles';
import { errorText } from '../api/client';
import { useCapturePose } from '../api/poses';
import { useArmState, useHello } from '../live/use-live';
import { letterKeysOn, useLetterKey } from './letter-keys';
import { toast } from './toast';

/** Why nothing can be captured now, or null. The server asks the same of the controller. */
export function useCaptureReason(): string | null {
  const role = useHello()?.you.role ?? 'observer';
  const motors = useArmState((state) => state?.motors ?? 'resting');
  const trust = useArmState((state) => worstTrust(state?.trust ?? []));
  if (!may(role, 'pose.edit')) return 'Teachers capture poses.';
  if (motors !== 'standing') return 'Capture once the arm stands, energised.';
  if (trust === 'unknown' || trust === 'doubtful')
    return 'Capture needs a known position: declare or reference it.';
  return null;
}

/** Where the controller says the arm stands becomes a pose; no numbers travel from here. */
export function CaptureButton({
  arm,
  className = '',
  letter = false,
  onCaptured,
}: {
  arm: Arm;
  className?: string;
  /** Whether C presses it too; at most one on a page. */
  letter?: boolean;
  onCaptured?: (id: string) => void;
}) {
  const capture = useCapturePose(arm.id);
  const reason = useCaptureReason();
  const usable = reason === null && !capture.isPending;
  const press = () =>
    capture.mutate(
      {},
      {
        onSuccess: (pose) => {
          toast(`Captured as “${pose.name}”.`);
          onCaptured?.(pose.id);
        },
        onError: (error) => toast(errorText(error)),
      },
    );
  useLetterKey('c', letter && usable ? press : null);
  return (
    <button
      type="button"
      className={`btn ${className}`}
      disabled={!usable}
      title={reason ?? undefined}
      onClick={press}
    >
      Capture pose
      {letter && usable && letterKeysOn() && (
        <span aria-hidden="true">
          <kbd>C</kbd>
        </span>
      )}
    </button>
  );
}
