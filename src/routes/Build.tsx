import { BuildPage } from '../features/build/BuildPage';
import { useCurrentArm } from './use-current-arm';

export function Component() {
  return <BuildPage arm={useCurrentArm()} />;
}
