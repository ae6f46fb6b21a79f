import type { RunSummary } from '../../../shared/api/resources';
import { FaultIcon, MovingIcon } from '../../components/icons';
import { endedBadly, endingWords } from './run-words';

const StoppedMark = () => (
  <svg viewBox="0 0 18 18" aria-hidden="true">
    <rect x="4" y="4" width="10" height="10" fill="currentColor" />
  </svg>
);

/** How a run ended: a word, and a mark where it did not simply finish. */
export function Ending({ how }: { how: RunSummary['how'] }) {
  const bad = endedBadly(how);
  return (
    <span className={`end ${bad ? 'red' : ''}`}>
      {how === null ? <MovingIcon /> : bad ? <FaultIcon /> : how === 'finished' ? null : <StoppedMark />}
      <span>{endingWords(how)}</span>
    </span>
  );
}
