import { useLiveStore } from '../../live/live-store';
import { useArmState } from '../../live/use-live';

/** Speaks status changes: politely, and faults at once. */
export function LiveRegion() {
  const fault = useArmState((state) => state?.fault?.message ?? '');
  const newest = useLiveStore((live) => live.events[0]?.message ?? '');
  return (
    <>
      <p className="vh" aria-live="polite">
        {newest}
      </p>
      <p className="vh" role="alert">
        {fault}
      </p>
    </>
  );
}
