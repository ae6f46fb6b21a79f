import type { ArmModel } from '../../shared/arm/model';

/** "Upper arm and forearm": joints by name, as a sentence begins with them. */
export function namesOf(model: ArmModel, joints: readonly number[]): string {
  const names = joints.map((i, k) => {
    const name = model.joints[i]?.name ?? `joint ${i + 1}`;
    return k === 0 ? name : name.toLowerCase();
  });
  if (names.length < 2) return names[0] ?? '';
  return `${names.slice(0, -1).join(', ')} and ${names.at(-1)}`;
}
