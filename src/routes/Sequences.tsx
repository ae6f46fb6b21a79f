import { SequencesPage } from '../features/sequences/SequencesPage';
import { useCurrentArm } from './use-current-arm';

export function Component() {
  return <SequencesPage arm={useCurrentArm()} />;
}
