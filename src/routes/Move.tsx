import { MovePage } from '../features/move/MovePage';
import { useCurrentArm } from './use-current-arm';

export function Component() {
  return <MovePage arm={useCurrentArm()} />;
}
