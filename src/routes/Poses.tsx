import { PosesPage } from '../features/poses/PosesPage';
import { useCurrentArm } from './use-current-arm';

export function Component() {
  return <PosesPage arm={useCurrentArm()} />;
}
