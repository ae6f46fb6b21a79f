/** The motion part of the public maths API: outside programs import it from here. */
export { planPosition } from './position';
export { type AxisLimits, type AxisState, type Phase, type Profile, sampleProfile } from './profile';
export { planSynchronised } from './synchronised';
export { planVelocity, restPosition } from './velocity';
