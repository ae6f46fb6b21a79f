/** How a simulated joint differs from its model. Left out, it is as modelled. */
export interface DriveTruth {
  /** Torque the motor really has, 1 = as modelled. */
  strength?: number;
  /** Travel it really makes per travel commanded: a wrong ratio or step count. */
  scale?: number;
  /** A coil pair swapped: it goes the other way. */
  reversed?: boolean;
}

/** Real travel per commanded travel. */
export function gainOf(truth: DriveTruth): number {
  return (truth.scale ?? 1) * (truth.reversed ? -1 : 1);
}
