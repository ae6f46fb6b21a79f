import { RunsPage } from '../features/runs/RunsPage';
import { useCurrentArm } from './use-current-arm';

export function Component() {
  return <RunsPage arm={useCurrentArm()} />;
}
