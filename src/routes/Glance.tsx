import { Glance } from '../features/move/Glance';
import { useCurrentArm } from './use-current-arm';

export function Component() {
  const arm = useCurrentArm();
  return <Glance armId={arm.id} model={arm.model} />;
}
