/** The motion part of the public maths API: outside programs import it from here. */

export { alongPath, type JointPath, jointPath, type PathCaps, pathLimits } from './joint-path';
export { planPosition } from './position';
export { type AxisLimits, type AxisState, type Phase, type Profile, sampleProfile } from './profile';
export { planSynchronised } from './synchronised';
export { planVelocity, restPosition } from './velocity';
